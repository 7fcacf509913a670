import type { Expr, SymbolData } from '../expression/node';
import { symbolsOf } from '../expression/reach';
import type { DeclarationProblem, System } from './system';

/** Declared names that nothing uses: mostly a slip of the pen in an energy. */
/** @param claimed symbols that claims and bindings of other declarations use */
export function findUnused(system: System, claimed: ReadonlySet<Expr> = new Set()): DeclarationProblem[] {
  const out: DeclarationProblem[] = [];
  const named = new Set<string>();
  for (const s of symbolsOf(system.L, system.D, ...system.Q)) named.add((s.data as SymbolData).name);
  const used = (symbol: Expr, name: string) => named.has(name) || system.scope.used.has(symbol) || claimed.has(symbol);
  for (const d of [...system.parameters, ...system.inputs]) {
    if (used(d.symbol, d.name)) continue;
    const what = d.kind === 'input' ? 'input' : 'parameter';
    out.push({
      code: 'unused',
      message: `the ${what} \`${d.name}\` is declared but no energy, force or claim uses it`,
      span: d.span,
      severity: 'warning',
    });
  }
  return out;
}
