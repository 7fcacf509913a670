import { gradient } from '../expression/differentiate';
import type { Expr, SymbolData } from '../expression/node';
import { symbolsOf } from '../expression/reach';
import { Tape, type Column } from '../expression/tape';
import type { Derived } from '../mechanics/lagrange';
import type { DeclarationProblem } from '../mechanics/system';
import { Motion } from './motion';
import { Sampler } from './sampling';

const STATES = 12;
/** Larger systems would pay more for this than for their claims. */
const MOST_COORDINATES = 12;
/** A pivot this small beside the largest entry is rounding. */
const NOTHING = 1e-10;

/**
 * What can be said about a declaration by itself at generic states: kinetic energy that is no positive quadratic form of the
 * velocities, a singular mass matrix, constraints that depend on each other or can't be met. Only what is so at every
 * state is reported.
 */
export function checkDeclaration(derived: Derived): DeclarationProblem[] {
  const { system } = derived;
  if (system.blocked || system.coordinates.length > MOST_COORDINATES) return [];
  const out: DeclarationProblem[] = [];
  const motion = new Motion(derived);
  const sampler = new Sampler(system);
  const own = symbolsOf(...derived.massMatrix, system.T ?? system.L).concat(system.coordinates.flatMap((c) => [c.symbol, c.velocity]));
  const symbols = [...new Set([...motion.symbols, ...own])];
  const drawn = sampler.draw(symbols, STATES);
  const problem = (code: DeclarationProblem['code'], message: string, severity: DeclarationProblem['severity']) =>
    out.push({ code, message, span: system.block.nameSpan, severity });

  out.push(...countedTwice(derived, sampler));
  const { constraints } = system;
  if (constraints.length > 0) {
    const span = constraints[constraints.length - 1]!.span;
    if (!independent(derived, drawn)) {
      const message = 'the constraints are not independent: one of them follows from the others; take it out';
      return [{ code: 'singular', message, span, severity: 'error' }];
    }
    const at = motion.onConstraints(drawn, STATES);
    const first = at.get(system.coordinates[0]!.symbol)!.values;
    if (first.every(Number.isNaN)) {
      const message = 'no state that meets the constraints was found: check their signs and the `ranges`';
      return [{ code: 'inconsistent', message, span, severity: 'error' }];
    }
  }
  const at = motion.onConstraints(drawn, STATES);
  const form = massForm(derived, at);
  if (form === 'singular' && constraints.length === 0) {
    const idle = system.coordinates.filter((c) => !symbolsOf(system.L).includes(c.velocity));
    const message =
      idle.length > 0
        ? `no kinetic energy goes with \`${idle[0]!.name}\`: its acceleration can't be determined from these energies`
        : 'the mass matrix is singular: some motion of the coordinates has no kinetic energy';
    problem('singular', message, 'error');
  } else if (form === 'negative') {
    problem('not-quadratic', 'the kinetic energy is negative for some velocities at every state tried: check its signs', 'warning');
  }
  if (system.T && !isQuadratic(derived, system.T, at)) {
    problem('not-quadratic', 'T is not a quadratic form in the velocities: check their powers', 'warning');
  }
  return out;
}

const WORDS = { T: 'kinetic energy', V: 'potential energy', D: 'dissipation function' } as const;

/** An energy typed by hand that says once more what points, bodies, springs or dampers say already. */
function countedTwice(derived: Derived, sampler: Sampler): DeclarationProblem[] {
  return (derived.system.doubled ?? []).flatMap(({ which, difference, value, span }) => {
    const tape = new Tape([difference, value]);
    const columns = sampler.draw(tape.symbols, STATES);
    const registers = tape.run((s) => columns.get(s), STATES);
    for (let s = 0; s < STATES; s++) {
      const bound = 8 * registers.error(difference, s) + 1e-12 * Math.abs(registers.value(value, s));
      if (!(Math.abs(registers.value(difference, s)) <= bound) || registers.value(value, s) === 0) return [];
    }
    const message = `${which} is the ${WORDS[which]} that the points and bodies give already, and both count: take one of them out`;
    return [{ code: 'inconsistent' as const, message, span, severity: 'warning' as const }];
  });
}

/** Rank of the constraints' gradients, at states off the constraints: there it can only be larger. */
function independent(derived: Derived, columns: ReadonlyMap<Expr, Column>): boolean {
  const { graph, coordinates } = derived.system;
  const velocities = coordinates.map((c) => c.velocity);
  const slopes = derived.velocityConstraints.map((c) => gradient(graph, [c], [graph.one], velocities));
  const registers = new Tape(slopes.flat()).run((s) => columns.get(s), STATES);
  for (let s = 0; s < STATES; s++) {
    const A = slopes.map((row) => row.map((e) => registers.value(e, s)));
    const normal = A.map((row) => A.map((other) => row.reduce((t, x, j) => t + x * other[j]!, 0)));
    if (pivots(normal) === 'positive') return true;
  }
  return false;
}

function massForm(derived: Derived, columns: ReadonlyMap<Expr, Column>): 'positive' | 'singular' | 'negative' | 'unknown' {
  const n = derived.system.coordinates.length;
  const entries = derived.massMatrix;
  const registers = new Tape(entries).run((s) => columns.get(s), STATES);
  const seen = new Set<string>();
  for (let s = 0; s < STATES; s++) {
    const M = Array.from({ length: n }, (_, i) => Array.from({ length: n }, (_, j) => registers.value(entries[i * n + j]!, s)));
    if (M.flat().some((x) => !Number.isFinite(x))) continue;
    seen.add(pivots(M));
  }
  return seen.size === 1 ? ([...seen][0] as 'positive' | 'singular' | 'negative') : 'unknown';
}

/** Signs of the pivots of a symmetric matrix (Cholesky without roots). */
function pivots(matrix: readonly (readonly number[])[]): 'positive' | 'singular' | 'negative' {
  const a = matrix.map((row) => [...row]);
  const largest = Math.max(...a.flat().map(Math.abs), 1e-300);
  let singular = false;
  for (let k = 0; k < a.length; k++) {
    const pivot = a[k]![k]!;
    if (pivot < -NOTHING * largest) return 'negative';
    if (pivot <= NOTHING * largest) {
      singular = true;
      continue;
    }
    for (let i = k + 1; i < a.length; i++) {
      const f = a[i]![k]! / pivot;
      for (let j = k; j < a.length; j++) a[i]![j] = a[i]![j]! - f * a[k]![j]!;
    }
  }
  return singular ? 'singular' : 'positive';
}

/** Doubling all velocities must make T four times as large, where nothing moves by itself. */
function isQuadratic(derived: Derived, T: Expr, columns: ReadonlyMap<Expr, Column>): boolean {
  const moving = symbolsOf(T).some((s) => ['input', 'time'].includes((s.data as SymbolData).role));
  if (moving) return true;
  const tape = new Tape([T]);
  const once = tape.run((s) => columns.get(s), STATES);
  const velocities = new Set(derived.system.coordinates.map((c) => c.velocity));
  const twice = tape.run((s) => {
    const c = columns.get(s);
    return c && velocities.has(s) ? { values: c.values.map((x) => 2 * x) } : c;
  }, STATES);
  for (let s = 0; s < STATES; s++) {
    const [a, b] = [once.value(T, s), twice.value(T, s)];
    if (Math.abs(b - 4 * a) <= 1e-9 * Math.abs(b) || !Number.isFinite(a)) return true;
  }
  return false;
}
