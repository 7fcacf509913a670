import { equationText, text } from '../expression/print/text';
import { equationTex, tex } from '../expression/print/tex';
import { typescriptFunction } from '../expression/print/code';
import { conserved, equationsOfMotion, solvedAccelerations } from '../mechanics/equations';
import type { Derived } from '../mechanics/lagrange';
import type { Budget } from '../text/budget';
import type { Document } from '../workspace/documents';
import { declares } from '../workspace/systems';
import type { DerivedSystem } from './api';
import type { Project } from './check';

export async function deriveSystems(
  project: Project,
  document: Document,
  as: 'text' | 'tex' | 'typescript',
  budget: Budget,
): Promise<DerivedSystem[]> {
  const out: DerivedSystem[] = [];
  for (const { block } of document.blocks) {
    if (!declares(block)) continue;
    const lookup = await project.systems.lookup(document, block, budget);
    if (lookup.kind !== 'found') continue;
    const { derived } = lookup.entry;
    const { blocked } = derived.system;
    const body = blocked
      ? `not derived: ${blocked.reason}`
      : as === 'text'
        ? asText(derived)
        : as === 'tex'
          ? asTex(derived)
          : asTypescript(derived);
    out.push({ system: block.name, range: document.lines.range(block.span), text: body });
  }
  return out;
}

function asText(derived: Derived): string {
  const lines: string[] = [];
  const { coordinates } = derived.system;
  lines.push('equations of motion');
  for (const e of equationsOfMotion(derived)) lines.push(`  ${equationText(e.left, e.right)}`);
  const solved = solvedAccelerations(derived);
  if (solved) {
    lines.push('accelerations');
    for (const { coordinate, expr } of solved) lines.push(`  ${coordinate.name}'' = ${text(expr)}`);
  }
  const constant = conserved(derived);
  if (constant.length > 0) {
    lines.push('constant along the motion');
    for (const c of constant) lines.push(`  ${c.name} = ${text(c.expr)}    ${c.why}`);
  }
  const n = coordinates.length;
  lines.push(n === 1 ? '1 degree of freedom' : `${n} degrees of freedom`);
  return lines.join('\n');
}

function asTex(derived: Derived): string {
  const rows = equationsOfMotion(derived).map((e) => equationTex(e.left, e.right));
  const solved = solvedAccelerations(derived) ?? [];
  const solutions = solved.map(({ coordinate, expr }) => `${tex(coordinate.acceleration)} &= ${tex(expr)}`);
  const blocks = [['\\begin{align*}', rows.map((r) => `  ${r}`).join(' \\\\\n'), '\\end{align*}']];
  if (solutions.length > 0) blocks.push(['\\begin{align*}', solutions.map((r) => `  ${r}`).join(' \\\\\n'), '\\end{align*}']);
  return blocks.map((b) => b.join('\n')).join('\n\n');
}

/** A function that returns the accelerations, in names of the declaration. */
function asTypescript(derived: Derived): string {
  const solved = solvedAccelerations(derived);
  const { coordinates, parameters, inputs, name } = derived.system;
  const exprs = solved ? solved.map((s) => s.expr) : derived.accelerations;
  return typescriptFunction({
    name,
    states: coordinates.map((c) => ({ symbol: c.symbol, rate: c.velocity })),
    parameters: [...parameters, ...inputs].map((p) => p.symbol),
    results: exprs,
  });
}
