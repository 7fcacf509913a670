import type { Expr, SymbolData } from '../expression/node';
import type { CodeEnergies } from '../mechanics/build';
import type { DeclarationProblem } from '../mechanics/system';
import type { FormulaError } from '../mechanics/scope';
import { printFormula } from '../notation';
import type { Place } from '../text/span';
import { freeSymbol } from './claims';
import { readSubject, readsBindings, type SubjectRequest } from './subject';

/** An energy that a function of the code defines, or why it could not be read. */
export interface CodeEnergy {
  readonly which: string;
  readonly expr: Expr | undefined;
  readonly problem: DeclarationProblem | undefined;
  readonly place: Place | undefined;
}

/** Reads the functions below `defines` statements: what they return is the declaration of that energy. */
export function readCodeEnergies(request: SubjectRequest): CodeEnergy[] {
  const { block, derived } = request;
  const out: CodeEnergy[] = [];
  for (const s of block.statements) {
    if (s.kind !== 'defines') continue;
    const which = printFormula(s.what);
    const fail = (message: string, place?: Place): CodeEnergy => ({
      which,
      expr: undefined,
      problem: { code: 'inconsistent', message, span: s.span, severity: 'error' },
      place,
    });
    if (!['T', 'V', 'L', 'D'].includes(which)) {
      out.push(fail(`\`defines ${which}\` is not supported: code can define T, V, L or D`));
      continue;
    }
    const errors: FormulaError[] = [];
    const reads = readsBindings(block, derived, errors);
    const span = s.what.span;
    const reading = readSubject(request, reads, [{ expression: { kind: 'name', name: 'return', span } }]);
    const value = reading.outputs[0]!;
    const what = request.subject.kind === 'file' ? 'the file' : `\`${request.subject.path}\``;
    if (value.kind !== 'scalar') {
      const reason = value.kind === 'unread' ? value.reason : 'it returns a list';
      out.push(fail(`${which} can't be read from ${what}: ${reason}`, value.place));
      continue;
    }
    const free = freeSymbol(value.expr);
    if (free) {
      const why = reading.free.get(free);
      const reason = why?.reason ?? `nothing says what \`${(free.data as SymbolData).name}\` means`;
      out.push(fail(`${which} can't be read from ${what}: ${reason}`, why?.place ?? value.place));
      continue;
    }
    out.push({ which, expr: value.expr, problem: undefined, place: value.place });
  }
  return out;
}

export function asCodeEnergies(energies: readonly CodeEnergy[]): CodeEnergies {
  const map = new Map<'T' | 'V' | 'L' | 'D', Expr>();
  for (const e of energies) if (e.expr) map.set(e.which as 'T' | 'V' | 'L' | 'D', e.expr);
  return map;
}
