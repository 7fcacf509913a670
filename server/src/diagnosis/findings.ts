import type { FindingCode } from '@visviva/shared';
import type { ClaimResult } from '../comparison/subject';
import type { System } from '../mechanics/system';
import type { Expr } from '../expression/node';
import type { Rational } from '../expression/rational';
import type { Place } from '../text/span';
import { conventionText, numberText, stateText } from './describe';

/** A finding about a claim, before it is put into lines and columns. */
export interface RawFinding {
  readonly code: FindingCode;
  readonly message: string;
  readonly place: Place;
}

/**
 * Says what is wrong with a claim.
 * @param here where to point when nothing better is known: the claim itself
 */
export function describeClaim(system: System, claim: ClaimResult, here: Place): RawFinding[] {
  const { decision } = claim;
  switch (decision.verdict) {
    case 'holds': {
      if (!decision.rounded) return [];
      const message = `${claim.quantity}: ${roundedText(decision.rounded)}. The claim holds to ${digitsText(decision.worst)}.`;
      return [{ code: 'rounded-constant', message, place: claim.place ?? here }];
    }
    case 'unread': {
      const message = `${claim.output} is not checked: ${decision.reason}.`;
      return [{ code: 'unread', message, place: decision.place ?? claim.place ?? here }];
    }
    case 'differs': {
      const { witness, rounded } = decision;
      const what = rounded
        ? `${claim.quantity}: ${roundedText(rounded)}`
        : `${claim.quantity}: the code does not compute what the declared energies give`;
      const state = stateText(system, witness);
      const numbers = `the code gives ${numberText(witness.found)}, the declared energies give ${numberText(witness.expected)}`;
      const precise =
        numberText(witness.found) === numberText(witness.expected)
          ? `the code gives ${witness.found}, the declared energies give ${witness.expected}`
          : numbers;
      const message = `${what}. ${state ? `At ${state} ` : ''}${precise}.${conventionText(system, claim)}`;
      return [{ code: rounded ? 'rounded-constant' : 'differs', message, place: claim.place ?? here }];
    }
  }
}

function roundedText(rounded: { readonly literal: Expr; readonly exactText: string }): string {
  const literal = (rounded.literal.data as Rational).toNumber();
  return `the number ${literal} is ${rounded.exactText} rounded; write ${rounded.exactText}`;
}

function digitsText(worst: number): string {
  return `${Math.max(1, Math.floor(-Math.log10(Math.max(worst, 1e-17))))} digits`;
}
