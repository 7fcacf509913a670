import type { FileResult } from '../../../server/src/service/api';
import { checkText } from '../../support/check';
import type { Fixture, Section } from '../../support/fixtures';
import { Judge } from '../../support/judge';
import { Baselines } from './baselines';
import type { Mutation } from './mutations';
import { placed, withEdits, type Placement } from './placement';

/** What became of one mutant. */
export interface Outcome {
  readonly operators: readonly string[];
  readonly detected: boolean;
  readonly placement: Placement;
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

  private differs(text: string): boolean {
    const worst = this.worst(text);
    return worst !== undefined && worst > 1e-5;
  }

  async check(text: string): Promise<FileResult> {
    return checkText(this.fixture.file, text, this.others);
  }

  /** Undefined for mutants that do not run, or compute the same; of several faults, each must change something. */
  async measure(mutations: readonly Mutation[]): Promise<Outcome | undefined> {
    const { text: original } = this.fixture;
    const text = mutated(original, mutations);
    if (!this.differs(text) || (mutations.length > 1 && !mutations.every((m) => this.differs(mutated(original, [m]))))) return undefined;
    const start = process.cpuUsage();
    const result = await this.check(text);
    const used = process.cpuUsage(start);
    const claims = result.claims.filter((c) => c.line >= this.section.startLine && c.line < this.section.endLine);
    const wrong = claims.filter((c) => c.verdict !== 'holds');
    const findings = wrong.flatMap((c) => c.findings);
    const repair = findings.find((f) => f.repair)?.repair;
    const usual = this.baselines.detects(text);
    const { applies } = this.baselines;
    const fixed = repair && withEdits(text, repair.edits);
    const after = fixed === undefined ? undefined : this.worst(fixed);
    const isRight = after !== undefined && after <= 1e-6;
    return {
      operators: mutations.map((m) => m.operator),
      // What was right and can no longer be read is not passed over either.
      detected: claims.some((c) => c.verdict !== 'holds'),
      placement: placed(original, text, mutations, mutations.length > 1 ? findings : (wrong[0]?.findings ?? []), isRight),
      repaired: isRight,
      wrong: repair !== undefined && !isRight,
      energy: applies.energy ? usual.energy : undefined,
      golden: applies.golden ? usual.golden : undefined,
      milliseconds: (used.user + used.system) / 1000,
      note: repair ? repair.title : wrong.length > 0 ? `no repair (${findings[0]?.code})` : claims.map((c) => `${c.verdict} ${c.findings[0]?.message ?? ''}`).join('; '),
    };
  }
}

export function mutated(text: string, mutations: readonly Mutation[]): string {
  return [...mutations].sort((a, b) => b.start - a.start).reduce((t, m) => t.slice(0, m.start) + m.text + t.slice(m.end), text);
}
