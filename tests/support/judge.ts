import { readDeclaration, statements, type Declared, type Drawn } from './declaration';
import type { Fixture, Section } from './fixtures';
import { num, parseFormula } from './formula';
import { Mechanics, type Instant } from './lagrange';
import { runPython } from './python-run';
import { compileRun } from './run-code';

/** What the tests themselves find out about a claim, without the product. */
export interface Judgement {
  readonly output: string;
  readonly right: string;
  readonly holds: boolean;
  /** Largest relative difference seen. */
  readonly worst: number;
}

const STATES = 6;
/** With kinks there are branches, and each must be met. */
const STATES_WITH_KINKS = 24;
/** Finite differences are good to about 1e-9; a realistic fault shows far above this. */
const SAME = 1e-6;

/** Judges the claims of one section in any text of its file (the fixture's own or a faulty twin's). */
export class Judge {
  private readonly claims: Declared['claims'];
  private readonly states: { instant: Instant; expected: number[] }[] = [];
  private readonly system: Declared;
  private readonly named: readonly string[];
  private physics: string;

  constructor(
    private readonly fixture: Fixture,
    private readonly section: Section,
    private readonly others: ReadonlyMap<string, string> = new Map(),
  ) {
    const block = fixture.text.slice(fixture.text.indexOf(`@visviva`, section.start), section.end);
    const own = readDeclaration(section.name, block);
    this.physics = statements(block).join('\n');
    this.system = own.coordinates.length > 0 ? own : this.elsewhere();
    this.claims = own.claims;
    this.named = [...own.named.keys()];
    this.draw(own);
  }

  private elsewhere(): Declared {
    const name = this.section.name;
    for (const text of [this.fixture.text, ...this.others.values()]) {
      for (const match of text.matchAll(/@visviva[ \t]+(\S+)/g)) {
        if (match[1] !== name) continue;
        const found = readDeclaration(name, text.slice(match.index));
        if (found.coordinates.length === 0) continue;
        this.physics += statements(text.slice(match.index)).join('\n');
        return found;
      }
    }
    throw new Error(`${this.fixture.file}: no declaration of ${name} with coordinates`);
  }

  private draw(own: Declared): void {
    const next = random(20240517);
    const mechanics = new Mechanics(this.system);
    const kinked = /\b(abs|sign|min|max)\(/.test(this.physics) ? new Mechanics(this.system, 3) : undefined;
    const rights = this.claims.map((c) => parseFormula(c.right));
    const pick = (s: Drawn): number => s.low + (s.high - s.low) * next();
    // Away from zero, where signs and contacts have kinks that no difference quotient survives.
    const clear = (draw: () => number): number => {
      let value = draw();
      for (let tries = 0; Math.abs(value) <= 0.2 && tries < 50; tries++) value = draw();
      return value;
    };
    const speed = (): number => clear(() => 4 * next() - 2);
    const wanted = kinked ? STATES_WITH_KINKS : STATES;
    for (let tries = 0; this.states.length < wanted; tries++) {
      if (tries > 20 * wanted) throw new Error(`${this.fixture.file}: ${this.section.name} has no state away from kinks`);
      const at = new Map<string, readonly number[]>();
      for (const c of this.system.coordinates) at.set(c.name, [clear(() => pick(c)), speed(), 0]);
      for (const p of [...this.system.parameters, ...own.parameters.filter((o) => !at.has(o.name))]) at.set(p.name, [pick(p), 0, 0, 0]);
      for (const u of this.system.inputs) at.set(u.name, [pick(u), speed(), speed(), 0]);
      if (!at.has(this.system.time)) at.set(this.system.time, [next(), 1, 0, 0]);
      const solved = mechanics.solve(at);
      const again = kinked?.solve(at);
      if (again && this.system.coordinates.some((c) => !close(again.get(c.name)![2]!, solved.get(c.name)![2]!))) continue;
      const scope = mechanics.scope(solved);
      const instant = new Map(solved);
      for (const [name, formula] of own.named) if (!instant.has(name)) instant.set(name, [num(formula(scope))]);
      this.states.push({ instant, expected: rights.map((r) => num(r(scope))) });
    }
  }

  /** The truth about each claim when the file's text is this. */
  judge(text: string): Judgement[] {
    const first = this.states[0]!.instant;
    const symbols = [...first].flatMap(([name, series]) => series.map((_, k) => name + "'".repeat(k)));
    const run = compileRun(this.fixture.file, text, this.section.run, this.claims, symbols, this.constants, this.others);
    return this.weigh(this.given.map(run));
  }

  /** The same for Python, whose code runs in a process of its own. */
  async judgePython(text: string): Promise<Judgement[]> {
    const { fixture, section, claims, constants, others } = this;
    return this.weigh(await runPython({ file: fixture.file, text, run: section.run, claims, constants, others }, this.given));
  }

  private get constants(): Set<string> {
    return new Set([...this.system.parameters.map((p) => p.name), ...this.named]);
  }

  /** The values of all symbols and their rates, state by state. */
  private get given(): Map<string, number>[] {
    return this.states.map(({ instant }) => new Map([...instant].flatMap(([name, series]) => series.map((v, k) => [name + "'".repeat(k), v] as const))));
  }

  private weigh(found: readonly (readonly number[])[]): Judgement[] {
    const worst = this.claims.map(() => 0);
    this.states.forEach(({ expected }, k) => {
      found[k]!.forEach((v, i) => {
        const wanted = this.claims[i]!.op === '-=' ? -expected[i]! : expected[i]!;
        const difference = Math.abs(v - wanted) / (Math.abs(wanted) + 1e-3 * (1 + Math.abs(v)));
        if (!(difference <= worst[i]!)) worst[i] = Number.isNaN(difference) ? Infinity : difference;
      });
    });
    return this.claims.map((c, i) => ({ output: c.left, right: c.right, holds: worst[i]! < SAME, worst: worst[i]! }));
  }
}

function close(a: number, b: number): boolean {
  return Math.abs(a - b) <= SAME * 0.01 * (1 + Math.abs(b));
}

/** A small generator with a fixed seed (mulberry32, public domain, by Tommy Ettinger), so that tests repeat. */
function random(seed: number): () => number {
  let a = seed;
  return () => {
    a = (a + 0x6d2b79f5) | 0;
    let t = Math.imul(a ^ (a >>> 15), 1 | a);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}
