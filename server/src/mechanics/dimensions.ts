import { Rational } from '../expression/rational';
import { childrenOf } from '../notation/building';
import { FUNCTION_NAMES } from '../notation/formula';
import { agree, dimensionOf, known, quote, uniform, UNKNOWN, type Dim, type Environment } from '../notation/inference';
import type { Block, Formula, Statement } from '../notation/tree';
import { type Dimension, DIMENSIONS, parseUnit } from '../notation/units';
import type { Span } from '../text/span';

export interface DimensionProblem {
  readonly code: 'dimension';
  readonly message: string;
  readonly span: Span;
}

type Of<K extends Statement['kind']> = Extract<Statement, { kind: K }>;

/** Passes over the shorthand, so that one may use another that stands below it. */
const PASSES = 4;
const MOST_PROBLEMS = 50;

/**
 * Dimensional consistency of a declaration's formulas. Only what follows from declared units is reported; a symbol without a
 * unit makes everything that depends on it unknown. A system may use scaled units throughout (mass 1, say): then its
 * energies need only agree with one another.
 */
export function checkDimensions(block: Block): DimensionProblem[] {
  const check = new Check(block);
  check.run();
  return check.problems.sort((a, b) => a.span.start - b.span.start || a.span.end - b.span.end);
}

class Check implements Environment {
  readonly problems: DimensionProblem[] = [];
  private readonly names = new Map<string, Dim>();
  private readonly declared = new Set<string>();
  private silent = false;
  timed = false;
  /** Some declared unit has mass in it. Where none has, no energy can be in joule: the system is scaled. */
  private massive = false;
  private energy: Dimension = DIMENSIONS.energy;

  constructor(private readonly block: Block) {}

  lookup(name: string): Dim | undefined {
    return this.names.get(name);
  }

  report(message: string, span: Span): void {
    if (this.silent || this.problems.length >= MOST_PROBLEMS) return;
    if (this.problems.some((p) => p.span.start === span.start && p.span.end === span.end)) return;
    this.problems.push({ code: 'dimension', message, span });
  }

  run(): void {
    this.declare();
    this.silent = true;
    for (let pass = 0; pass < PASSES; pass++) this.defineShorthand();
    this.energy = this.energyDimension();
    this.silent = false;
    for (const statement of this.block.statements) this.statement(statement);
  }

  private declare(): void {
    let time = 't';
    for (const s of this.block.statements) {
      if (s.kind === 'time') time = s.name;
      if (s.kind !== 'coordinates' && s.kind !== 'parameters' && s.kind !== 'inputs') continue;
      for (const item of s.items) {
        const unit = item.unit && parseUnit(item.unit.text);
        this.declared.add(item.name);
        this.names.set(item.name, unit && 'dimension' in unit ? known(unit.dimension) : UNKNOWN);
        if (!unit || !('dimension' in unit)) continue;
        if (unit.dimension.involves('s')) this.timed = true;
        if (unit.dimension.involves('kg')) this.massive = true;
      }
    }
    if (!this.names.has(time)) this.names.set(time, this.timed ? known(DIMENSIONS.time) : UNKNOWN);
  }

  private defineShorthand(): void {
    const fresh = new Map<string, Dim>();
    for (const s of this.block.statements) {
      if (s.kind !== 'where') continue;
      for (const { left, right } of s.items) {
        const target = left.kind === 'index' ? left.object : left;
        if (target.kind !== 'name' || this.declared.has(target.name)) continue;
        const dim = dimensionOf(right, this);
        const before = fresh.get(target.name);
        const value = before && !same(before, dim) ? UNKNOWN : dim;
        fresh.set(target.name, value);
        this.names.set(target.name, value);
      }
    }
  }

  /** Joule, unless the typed energies agree on something else and no geometry contradicts them. */
  private energyDimension(): Dimension {
    const typed: Dimension[] = [];
    let whole = false;
    for (const s of this.block.statements) {
      if (s.kind === 'point' && dimensionIs(dimensionOf(s.mass, this), DIMENSIONS.mass)) return DIMENSIONS.energy;
      if (s.kind === 'body' && s.mass && dimensionIs(dimensionOf(s.mass, this), DIMENSIONS.mass)) return DIMENSIONS.energy;
      if (s.kind !== 'energy' || s.which === 'D') continue;
      const dim = dimensionOf(s.value, this, DIMENSIONS.energy);
      if (dim.kind !== 'is') {
        // With one of them unknown nothing is known about the scale of the others.
        if (dim.kind === 'unknown') whole = true;
        continue;
      }
      typed.push(dim.dimension);
      if (s.which === 'L' && s.value.kind === 'binary' && (s.value.op === '+' || s.value.op === '-')) whole = true;
    }
    const first = typed[0];
    if (!first || typed.some((d) => d.equals(DIMENSIONS.energy))) return DIMENSIONS.energy;
    return (typed.length > 1 || whole || !this.massive) && typed.every((d) => d.equals(first)) ? first : DIMENSIONS.energy;
  }

  private statement(s: Statement): void {
    switch (s.kind) {
      case 'coordinates':
      case 'parameters':
      case 'inputs':
        return this.symbols(s);
      case 'where':
        for (const { right } of s.items) dimensionOf(right, this);
        return;
      case 'energy':
        return s.which === 'D'
          ? this.expect(s.value, this.energy.divide(DIMENSIONS.time), 'D is half the power lost,')
          : this.expectEnergy(s);
      case 'generalized-force':
        return this.perCoordinate(s.value, s.coordinate, `Q[${quote(s.coordinate)}] is energy per ${quote(s.coordinate)},`);
      case 'torque':
        return this.perCoordinate(s.value, s.on, `a torque on ${quote(s.on)} is energy per ${quote(s.on)},`);
      case 'force':
        return this.force(s);
      case 'constraint':
        agree([s.left, s.right], this, 'compared with');
        return;
      case 'point':
        this.expectUnlessPlain(s.mass, DIMENSIONS.mass, 'a mass is');
        return this.position(s.at);
      case 'body':
        return this.body(s);
      case 'gravity':
        return this.expectUnlessPlain(s.value, DIMENSIONS.acceleration, 'gravity is an acceleration,');
      case 'spring':
      case 'damper':
        return this.link(s);
      case 'ranges':
        for (const { target, low, high } of s.items) this.sameAs(target, [low, high]);
        return;
      case 'near':
        for (const { left, right } of s.items) this.sameAs(left, [right]);
        return;
      case 'reads':
        for (const { right } of s.items) dimensionOf(right, this);
        return;
      case 'checks':
        this.claims(s);
        return;
      default:
    }
  }

  private symbols(s: Of<'coordinates' | 'parameters' | 'inputs'>): void {
    for (const item of s.items) {
      const own = this.names.get(item.name) ?? UNKNOWN;
      const values = item.bounds.flatMap((b) => (b.op === 'in' ? [b.low, b.high] : [b.value]));
      if (item.typical) values.push(item.typical);
      for (const value of values) this.compare(own, item.name, value);
    }
  }

  /** Plain numbers are taken in the unit of what they bound. */
  private sameAs(target: Formula, values: readonly Formula[]): void {
    const own = dimensionOf(target, this);
    for (const value of values) this.compare(own, quote(target), value);
  }

  private compare(own: Dim, name: string, value: Formula): void {
    const dim = dimensionOf(value, this);
    if (isNumeric(value) || dim.kind !== 'is' || own.kind !== 'is' || own.dimension.equals(dim.dimension)) return;
    this.report(`\`${quote(value)}\` is ${dim.dimension.describe()}, but \`${name}\` ${own.dimension.describe()}`, value.span);
  }

  /** An energy is judged as a whole only where all of it is known; its terms are compared with one another in any case. */
  private expectEnergy(s: Of<'energy'>): void {
    if (this.isKnown(s.value)) this.expect(s.value, this.energy, `${s.which} is an energy,`);
    else dimensionOf(s.value, this, this.energy);
  }

  private isKnown(f: Formula): boolean {
    if (f.kind === 'name') {
      const dim = this.lookup(f.name) ?? UNKNOWN;
      return dim.kind !== 'unknown' || f.name === 'pi' || f.name === 'π' || FUNCTION_NAMES.has(f.name);
    }
    if (f.kind === 'index') return this.isKnown(f.object);
    if (f.kind === 'sum') return this.isKnown(f.body);
    return childrenOf(f).every((part) => this.isKnown(part));
  }

  /** Reports where a formula, or a component of it, is known and has another dimension. */
  private expect(f: Formula, expected: Dimension, why: string): void {
    this.compareTo(dimensionOf(f, this, expected), f, expected, why, false);
  }

  /** As `expect`, but what has no unit at all may belong to a system scaled throughout. */
  private expectUnlessPlain(f: Formula, expected: Dimension, why: string): void {
    this.compareTo(dimensionOf(f, this, expected), f, expected, why, true);
  }

  private compareTo(dim: Dim, f: Formula, expected: Dimension, why: string, orPlain: boolean): void {
    if (dim.kind === 'vector') {
      const parts = f.kind === 'tuple' || f.kind === 'list' ? f.items : undefined;
      dim.items.forEach((item, i) => this.compareTo(item, parts?.[i] ?? f, expected, why, orPlain));
      return;
    }
    if (dim.kind !== 'is' || dim.dimension.equals(expected) || (orPlain && dim.dimension.isNone)) return;
    this.report(`\`${quote(f)}\` is ${dim.dimension.describe()}, but ${why} ${expected.describe()}`, f.span);
  }

  private perCoordinate(value: Formula, coordinate: Formula, why: string): void {
    const per = uniform(dimensionOf(coordinate, this));
    if (per.kind === 'is') this.expect(value, this.energy.divide(per.dimension), why);
    else dimensionOf(value, this);
  }

  private force(s: Of<'force'>): void {
    const place = uniform(dimensionOf(s.at, this));
    this.position(s.at);
    if (place.kind === 'is') this.expect(s.value, this.energy.divide(place.dimension), 'a force here is');
    else dimensionOf(s.value, this);
  }

  /** The components of a position are lengths, or at least all alike. */
  private position(f: Formula): void {
    const dim = dimensionOf(f, this);
    if (dim.kind !== 'vector' || (f.kind !== 'tuple' && f.kind !== 'list')) {
      if (dim.kind !== 'vector') return;
      const parts = dim.items.flatMap((d) => (d.kind === 'is' ? [d.dimension] : []));
      const odd = parts.find((d) => !d.equals(DIMENSIONS.length));
      if (odd && (!odd.isNone || parts.some((d) => !d.isNone))) {
        this.report(`a component of the position \`${quote(f)}\` is ${odd.describe()}, but a position is in m`, f.span);
      }
      return;
    }
    const parts = dim.items.flatMap((d, i) => (d.kind === 'is' ? [{ part: f.items[i]!, dimension: d.dimension }] : []));
    const right = parts.find((p) => p.dimension.equals(DIMENSIONS.length)) ?? parts[0];
    for (const { part, dimension } of parts) {
      if (dimension.equals(right!.dimension)) {
        if (!dimension.isNone && !dimension.equals(DIMENSIONS.length)) {
          this.report(`\`${quote(part)}\` is ${dimension.describe()}, but a position is in m`, part.span);
        }
        continue;
      }
      this.report(`\`${quote(part)}\` is ${dimension.describe()}, but the component \`${quote(right!.part)}\` of this position ${right!.dimension.describe()}`, part.span);
    }
  }

  private body(s: Of<'body'>): void {
    if (s.mass) this.expectUnlessPlain(s.mass, DIMENSIONS.mass, 'a mass is');
    if (s.inertia) this.expectUnlessPlain(s.inertia, DIMENSIONS.inertia, 'a moment of inertia is');
    if (s.centre) this.position(s.centre);
    if (s.angle) this.expect(s.angle, DIMENSIONS.none, 'an angle is');
    if (s.rotation) this.expect(s.rotation, DIMENSIONS.none, 'a rotation matrix is');
  }

  /** k d^2 is an energy and c d'^2 a power, whatever the distance d is: a length or an angle. */
  private link(s: Of<'spring' | 'damper'>): void {
    const ends = uniform(agree([s.from, s.to], this, 'compared with'));
    const value = s.kind === 'spring' ? s.stiffness : s.coefficient;
    if (ends.kind !== 'is') {
      dimensionOf(value, this);
      return;
    }
    const square = ends.dimension.power(Rational.of(2));
    const perSquare = this.energy.divide(square);
    if (s.kind === 'spring') this.expect(value, perSquare, 'this stiffness is');
    else this.expect(value, perSquare.multiply(DIMENSIONS.time), 'this damping coefficient is');
    if (s.kind === 'spring' && s.rest) this.expect(s.rest, ends.dimension, 'the distance between the ends is');
  }

  /** In claims the energies and momenta are quantities, where no symbol has their name. */
  private claims(s: Of<'checks'>): void {
    const added: string[] = [];
    for (const name of ['T', 'V', 'L', 'E', 'H']) {
      if (this.names.has(name) || !this.block.statements.some((x) => x.kind === 'energy' || x.kind === 'point' || x.kind === 'body')) continue;
      const typed = this.block.statements.find((x): x is Of<'energy'> => x.kind === 'energy' && x.which === name);
      this.names.set(name, typed ? this.quietly(() => dimensionOf(typed.value, this)) : UNKNOWN);
      added.push(name);
    }
    // The left side is code, whose units nobody declared.
    for (const { right } of s.items) dimensionOf(right, this);
    for (const name of added) this.names.delete(name);
  }

  private quietly<T>(run: () => T): T {
    const before = this.silent;
    this.silent = true;
    const result = run();
    this.silent = before;
    return result;
  }
}

function dimensionIs(d: Dim, dimension: Dimension): boolean {
  return d.kind === 'is' && d.dimension.equals(dimension);
}

function same(a: Dim, b: Dim): boolean {
  if (a.kind === 'vector' && b.kind === 'vector') {
    return a.items.length === b.items.length && a.items.every((item, i) => same(item, b.items[i]!));
  }
  return a.kind === 'is' && b.kind === 'is' ? a.dimension.equals(b.dimension) : a.kind === b.kind;
}

/** A formula of numbers alone. */
function isNumeric(f: Formula): boolean {
  switch (f.kind) {
    case 'number':
      return true;
    case 'name':
      return f.name === 'pi' || f.name === 'π' || f.name === 'inf';
    case 'unary':
      return isNumeric(f.operand);
    case 'binary':
      return isNumeric(f.left) && isNumeric(f.right);
    case 'call':
      return f.args.every(isNumeric);
    default:
      return false;
  }
}
