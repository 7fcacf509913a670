import { symbolText, type SymbolData } from '../expression/node';
import { code, equationText, javascript, python, tex, texAll, text, typescript, type CodeStyle } from '../expression/print';
import type { Expr } from '../expression/node';
import { symbolsOf } from '../expression/reach';
import { findEquilibria, type Equilibrium } from '../comparison/equilibria';
import { conserved, equationsOfMotion, solvedAccelerations, tidy } from '../mechanics/equations';
import type { Derived } from '../mechanics/lagrange';
import type { DeclarationProblem } from '../mechanics/system';
import type { Budget } from '../text/budget';
import type { Document } from '../workspace/documents';
import { declares } from '../workspace/systems';
import type { DeriveForm, DerivedSystem } from './api';
import type { Project } from './check';

const LONGEST_ENTRY = 48;

const STYLES = { typescript, javascript, python } as const;

export async function deriveSystems(
  project: Project,
  document: Document,
  as: DeriveForm,
  budget: Budget,
): Promise<DerivedSystem[]> {
  const out: DerivedSystem[] = [];
  for (const { block } of document.blocks) {
    if (!declares(block)) continue;
    const lookup = await project.systems.lookup(document, block, budget);
    if (lookup.kind !== 'found') continue;
    const { derived, problems } = lookup.entry;
    const { blocked } = derived.system;
    const body = blocked
      ? `not derived: ${blocked.reason}`
      : as === 'text'
        ? asText(derived, problems)
        : as === 'tex'
          ? asTex(derived)
          : accelerationFunction(derived, STYLES[as]);
    out.push({ system: block.name, range: document.lines.range(block.span), text: body });
  }
  return out;
}

function asText(derived: Derived, problems: readonly DeclarationProblem[]): string {
  const lines: string[] = ['equations of motion'];
  for (const e of equationsOfMotion(derived)) lines.push(`  ${equationText(e.left, e.right)}`);
  const solved = solvedAccelerations(derived);
  if (solved) {
    lines.push('accelerations');
    for (const { coordinate, expr } of solved) lines.push(`  ${coordinate.name}'' = ${text(expr)}`);
  }
  const { constraints } = derived.system;
  if (constraints.length > 0) {
    const { graph } = derived.system;
    lines.push('constraints');
    for (const c of constraints) lines.push(`  ${equationText(tidy(graph, c.expr), graph.zero)}    force ${c.multiplierName}`);
  }
  const matrix = massMatrix(derived);
  if (matrix.length > 0) lines.push('mass matrix', ...matrix);
  const constant = conserved(derived);
  if (constant.length > 0) {
    lines.push('constant along the motion');
    for (const c of constant) lines.push(`  ${c.name} = ${text(c.expr)}    ${c.why}`);
  }
  const equilibria = findEquilibria(derived);
  if (equilibria.length > 0) {
    lines.push('equilibria at rest');
    for (const e of equilibria) lines.push(`  ${equilibriumText(derived, e)}`);
  }
  const doubt = problems.find((p) => p.code === 'singular' || p.code === 'inconsistent');
  lines.push(doubt ? doubt.message : freedom(derived));
  return lines.join('\n');
}

/** Every independent constraint takes away one degree of freedom; of coordinates only if it is holonomic. */
function freedom({ system: { coordinates, constraints } }: Derived): string {
  const count = (n: number, word: string) => `${n} ${word}${n === 1 ? '' : 's'}`;
  const n = coordinates.length - constraints.length;
  const head = `${n} degree${n === 1 ? '' : 's'} of freedom`;
  if (constraints.length === 0) return head;
  const held = constraints.filter((c) => c.kind === 'velocity').length;
  const on = held === 0 ? '' : held === constraints.length ? ' on velocities' : `, ${held} of them on velocities`;
  return `${head}: ${count(coordinates.length, 'coordinate')} less ${count(constraints.length, 'constraint')}${on}`;
}

/** What the accelerations are multiplied to, where it is more than a list of masses and short enough to read. */
function massMatrix(derived: Derived): string[] {
  const { graph, coordinates } = derived.system;
  const n = coordinates.length;
  if (n < 2 || n > 4) return [];
  const entries = derived.massMatrix.map((e) => text(tidy(graph, e)));
  if (entries.some((e) => e.length > LONGEST_ENTRY)) return [];
  const width = coordinates.map((_, j) => Math.max(...coordinates.map((_, i) => entries[i * n + j]!.length)));
  return coordinates.map((_, i) => `  ${coordinates.map((_, j) => entries[i * n + j]!.padEnd(width[j]!)).join('   ').trimEnd()}`);
}

/** What the squared angular frequencies of several coordinates are: each by itself, or the roots of a determinant. */
function modesText(derived: Derived, e: Equilibrium): string {
  const { graph: g, coordinates } = derived.system;
  const n = coordinates.length;
  const at = (entries: readonly Expr[], i: number, j: number) => entries[i * n + j]!;
  const apart = coordinates.every((_, i) =>
    coordinates.every((__, j) => i === j || (at(e.mass, i, j) === g.zero && at(e.stiffness, i, j) === g.zero)),
  );
  if (apart) {
    return coordinates
      .map((c, i) => `omega^2 = ${text(tidy(g, g.divide(at(e.stiffness, i, i), at(e.mass, i, i))))} (${c.name})`)
      .join(', ');
  }
  if (n === 2) {
    const product = (a: Expr, b: Expr) => g.multiply(a, b);
    const [m11, m12, , m22] = e.mass as readonly [Expr, Expr, Expr, Expr];
    const [k11, k12, , k22] = e.stiffness as readonly [Expr, Expr, Expr, Expr];
    const a = g.subtract(product(m11, m22), g.square(m12));
    const b = g.add(product(m11, k22), product(m22, k11), g.multiply(g.number(-2), m12, k12));
    const c = g.subtract(product(k11, k22), g.square(k12));
    const [p, q, r] = [a, b, c].map((x) => text(tidy(g, x)));
    return `omega^2 = w, the roots of (${p})*w^2 - (${q})*w + (${r}) = 0`;
  }
  const rows = (entries: readonly Expr[]) =>
    `[${coordinates.map((_, i) => `[${coordinates.map((__, j) => text(at(entries, i, j))).join(', ')}]`).join(', ')}]`;
  return `omega^2 = w, the roots of det(K - w*M) = 0 with K = ${rows(e.stiffness)}, M = ${rows(e.mass)}`;
}

/** `th = 0: stable, small oscillations with omega^2 = g/l` */
export function equilibriumText(derived: Derived, e: Equilibrium): string {
  const g = derived.system.graph;
  const at = derived.system.coordinates.map((c, i) => `${c.name} = ${text(e.point[i]!)}`).join(', ');
  const head = `${at}: ${e.stability}`;
  if (!e.squaredFrequency) return e.stability === 'stable' ? `${head}, small oscillations with ${modesText(derived, e)}` : head;
  if (e.stability === 'stable') return `${head}, small oscillations with omega^2 = ${text(e.squaredFrequency)}`;
  if (e.stability === 'unstable') return `${head}, leaves with rate^2 = ${text(tidy(g, g.negate(e.squaredFrequency)))}`;
  return `${head}, omega^2 = ${text(e.squaredFrequency)}`;
}

function asTex(derived: Derived): string {
  const equations = equationsOfMotion(derived);
  const solved = solvedAccelerations(derived) ?? [];
  const rows = (pairs: readonly (readonly [string, string])[]) =>
    ['\\begin{align*}', pairs.map(([l, r]) => `  ${l} &= ${r}`).join(' \\\\\n'), '\\end{align*}'].join('\n');
  const left = texAll(equations.flatMap((e) => [e.left, e.right]));
  const pairs = equations.map((_, i) => [left.values[2 * i]!, left.values[2 * i + 1]!] as const);
  const parts = left.where.map((w) => [w.name, w.text] as const);
  const blocks = [rows([...pairs, ...parts])];
  if (solved.length > 0) blocks.push(rows(solved.map((s) => [tex(s.coordinate.acceleration), tex(s.expr)] as const)));
  return blocks.join('\n\n');
}

/** A function from coordinates, velocities, parameters and inputs to the accelerations. */
function accelerationFunction(derived: Derived, style: CodeStyle): string {
  const { coordinates, parameters, inputs, name } = derived.system;
  const solved = solvedAccelerations(derived);
  const values = solved ? solved.map((s) => s.expr) : derived.accelerations;
  const used = new Set(symbolsOf(...values));
  const identifier = (e: Expr) => {
    const data = e.data as SymbolData;
    return style.identifier(data.name, data.order);
  };
  const state = [...coordinates.map((c) => c.symbol), ...coordinates.map((c) => c.velocity)];
  const rest = [...parameters, ...inputs].map((p) => p.symbol);
  const extra = [...used].filter((s) => !state.includes(s) && !rest.includes(s));
  const constants = [...rest, ...extra].filter((e) => used.has(e));
  const printed = code(style, values);
  return style.function({
    name: `${name} accelerations`,
    remark: `${coordinates.map((c) => symbolText(c.acceleration.data as SymbolData)).join(', ')} of ${name}.`,
    state: state.map(identifier),
    constants: constants.map(identifier),
    ...printed,
  });
}
