import type { FindingCode } from '@visviva/shared';
import type { Diagnosis } from './diagnose';
import type { Edit } from './search/edits';
import { declarationText, derivedText, faultText, NO_EXPLANATION, readableText, repairTitle, termAndFault } from './messages';
import { expectedInCode } from './own-names';
import type { Reading } from '../program/reading';
import type { ClaimResult } from '../comparison/subject';
import type { Expr } from '../expression/node';
import type { Rational } from '../expression/rational';
import type { Place } from '../text/span';
import { formatPair } from '../expression/print/number';
import type { Derived } from '../mechanics/lagrange';
import { conventionText, stateText } from './describe';
import { findRowPattern } from './rows';
import { findTermFault, termText } from './terms';

/** A finding about a claim, before it is put into lines and columns. */
export interface RawFinding {
  readonly code: FindingCode;
  readonly message: string;
  readonly place: Place;
  readonly repair?: { readonly title: string; readonly edits: readonly Edit[] };
}

/** The code that a claim is about. */
export interface Context {
  readonly reading: Reading | undefined;
  readonly language: string;
}

/**
 * Says what is wrong with a claim.
 * @param claims all claims of the function, for what they tell about each other
 * @param here where to point when nothing better is known: the claim itself
 */
export function describeClaim(derived: Derived, claims: readonly ClaimResult[], index: number, here: Place, diagnosis?: Diagnosis, context?: Context): RawFinding[] {
  const claim = claims[index]!;
  const { system } = derived;
  const { decision } = claim;
  switch (decision.verdict) {
    case 'holds': {
      if (!decision.rounded) return [];
      const message = `${claim.quantity}: ${roundedText(decision.rounded)}. The claim holds to ${digitsText(decision.worst)}.`;
      return [{ code: 'rounded-constant', message, place: claim.place ?? here }];
    }
    case 'unread': {
      const message = `${claim.output} is not checked: ${decision.reason}.`;
      if (diagnosis?.edits && diagnosis.faults.length > 0) {
        const repair = { title: repairTitle(diagnosis.faults), edits: diagnosis.edits };
        return diagnosis.faults.map((f) => ({ code: 'unread', message: `${message} ${readableText(f)}`, place: { file: here.file, span: f.span }, repair }));
      }
      return [{ code: 'unread', message, place: decision.place ?? claim.place ?? here }];
    }
    case 'differs': {
      const { witness, rounded } = decision;
      const state = stateText(system, witness);
      const [found, expected] = formatPair(witness.found, witness.expected);
      const numbers = `${state ? `At ${state} the` : 'The'} code gives ${found}, the declared energies give ${expected}.`;
      const where = claim.place ?? here;
      const other = diagnosis?.declaration ? ` ${declarationText(diagnosis.declaration)}` : '';
      const last = `${numbers}${conventionText(system, claim)}${other}`;
      const finish = (code: FindingCode, what: string): RawFinding[] => {
        const place = diagnosis?.place ? { file: here.file, span: diagnosis.place } : where;
        const own = expectedInCode(derived, claim, context?.reading, context?.language ?? '');
        return [{ code, message: `${claim.quantity}: ${what}. ${last}${own ? ` ${derivedText(own)}` : ''}`, place }];
      };
      if (rounded) return finish('rounded-constant', roundedText(rounded));
      if (diagnosis && diagnosis.faults.length > 0) {
        const term = diagnosis.faults.length === 1 ? findTermFault(derived, claims, index) : undefined;
        const repair = diagnosis.edits && { title: repairTitle(diagnosis.faults), edits: diagnosis.edits };
        return diagnosis.faults.map((f) => ({
          code: f.code,
          message: `${claim.quantity}: ${term ? termAndFault(termText(term), f) : faultText(f)}. ${last}`,
          place: { file: here.file, span: f.span },
          ...(repair ? { repair } : {}),
        }));
      }
      const pattern = findRowPattern(derived, claims, index);
      if (pattern) return finish(pattern.code, `the code ${pattern.message}`);
      const term = findTermFault(derived, claims, index);
      if (term) return finish(term.code, termText(term));
      return finish('differs', NO_EXPLANATION);
    }
  }
}

function roundedText(rounded: { readonly literal: Expr; readonly exactText: string }): string {
  const literal = Math.abs((rounded.literal.data as Rational).toNumber());
  return `the number ${literal} is ${rounded.exactText} rounded; write ${rounded.exactText}`;
}

function digitsText(worst: number): string {
  return `${Math.max(1, Math.floor(-Math.log10(Math.max(worst, 1e-17))))} digits`;
}
