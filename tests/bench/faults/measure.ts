import type { FileResult } from '../../../server/src/service/api';
import { checkText } from '../../support/check';
import type { Fixture, Section } from '../../support/fixtures';
import { Judge } from '../../support/judge';
import { Baselines } from './baselines';
import type { Mutation } from './mutations';

/** What became of one mutant. */
export interface Outcome {
  readonly operators: readonly string[];
  readonly detected: boolean;
  readonly line: boolean;
  readonly expression: boolean;
  readonly repaired: boolean;
  readonly wrong: boolean;
  readonly milliseconds: number;
  /** What the usual tests make of it; undefined where they can't be made. */
  readonly energy: boolean | undefined;
  readonly golden: boolean | undefined;
  readonly note: string;
}

export class Bench {
  private readonly judge: Judge;
  private readonly baselines: Baselines;

  constructor(
    readonly fixture: Fixture,
    readonly section: Section,
    private readonly others: ReadonlyMap<string, string>,
  ) {
    this.judge = new Judge(fixture, section, others);
    this.baselines = new Baselines(fixture, section, others);
  }

  /** Largest relative difference of a claim, by the tests' own judge; undefined where the code does not run. */
  worst(text: string): number | undefined {
    try {
      return Math.max(...this.judge.judge(text).map((j) => j.worst));
    } catch (error) {
      if (process.env['DEBUG']) console.error(error);
      return undefined;
    }
  }

  async check(text: string): Promise<FileResult> {
    return checkText(this.fixture.file, text, this.others);
  }

  /** Undefined for mutants that do not run, or compute the same. */
  async measure(mutations: readonly Mutation[]): Promise<Outcome | undefined> {
    const { text: original } = this.fixture;
    const text = mutated(original, mutations);
    const worst = this.worst(text);
    if (worst === undefined || !(worst > 1e-5)) return undefined;
    const start = process.cpuUsage();
    const result = await this.check(text);
    const used = process.cpuUsage(start);
    const claims = result.claims.filter((c) => c.line >= this.section.startLine && c.line < this.section.endLine);
    const wrong = claims.filter((c) => c.verdict === 'differs');
    const findings = wrong.flatMap((c) => c.findings);
    const repair = findings.find((f) => f.repair)?.repair;
    const usual = this.baselines.detects(text);
    const { applies } = this.baselines;
    const places = placesOf(text, mutations);
    const fixed = repair && withEdits(text, repair.edits);
    const after = fixed === undefined ? undefined : this.worst(fixed);
    const isRight = after !== undefined && after <= 1e-6;
    return {
      operators: mutations.map((m) => m.operator),
      // What was right and can no longer be read is not passed over either.
      detected: claims.some((c) => c.verdict !== 'holds'),
      line: places.every((p) => findings.some((f) => f.range.start.line <= p.line && p.line <= f.range.end.line && f.range.end.line - f.range.start.line <= 3)),
      expression: places.every((p) => findings.some((f) => meets(text, f.range, p) || f.repair?.edits.some((e) => meets(text, e.range, p)))),
      repaired: isRight,
      wrong: repair !== undefined && !isRight,
      energy: applies.energy ? usual.energy : undefined,
      golden: applies.golden ? usual.golden : undefined,
      milliseconds: (used.user + used.system) / 1000,
      note: repair ? repair.title : wrong.length > 0 ? `no repair (${findings[0]?.code})` : claims.map((c) => `${c.verdict} ${c.findings[0]?.message ?? ''}`).join('; '),
    };
  }
}

interface MutatedPlace {
  readonly line: number;
  readonly start: number;
  readonly end: number;
}

export function mutated(text: string, mutations: readonly Mutation[]): string {
  return [...mutations].sort((a, b) => b.start - a.start).reduce((t, m) => t.slice(0, m.start) + m.text + t.slice(m.end), text);
}

function placesOf(text: string, mutations: readonly Mutation[]): MutatedPlace[] {
  let shift = 0;
  return [...mutations]
    .sort((a, b) => a.start - b.start)
    .map((m) => {
      const start = m.start + shift;
      shift += m.text.length - (m.end - m.start);
      return { line: text.slice(0, start).split('\n').length, start, end: start + m.text.length };
    });
}

interface Range {
  readonly start: { readonly line: number; readonly column: number };
  readonly end: { readonly line: number; readonly column: number };
}

function offset(text: string, p: { readonly line: number; readonly column: number }): number {
  let at = 0;
  for (let line = 1; line < p.line; line++) at = text.indexOf('\n', at) + 1;
  return at + p.column - 1;
}

/** Inside, around by not much, or touching. */
function meets(text: string, range: Range, place: MutatedPlace): boolean {
  const start = offset(text, range.start);
  const end = offset(text, range.end);
  return start <= place.end && place.start <= end && end - start <= 40 + 3 * (place.end - place.start);
}

function withEdits(text: string, edits: readonly { readonly range: Range; readonly text: string }[]): string {
  return [...edits]
    .map((e) => ({ start: offset(text, e.range.start), end: offset(text, e.range.end), text: e.text }))
    .sort((a, b) => b.start - a.start)
    .reduce((t, e) => t.slice(0, e.start) + e.text + t.slice(e.end), text);
}
