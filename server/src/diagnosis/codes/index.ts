import type { FindingCode, ProblemCode } from '@visviva/shared';
import type { CodeDoc } from './doc';
import { ambiguous } from './ambiguous';
import { differs } from './differs';
import { dimension } from './dimension';
import { extraTerm } from './extra-term';
import { factor } from './factor';
import { grouping } from './grouping';
import { inconsistent } from './inconsistent';
import { missingTerm } from './missing-term';
import { notQuadratic } from './not-quadratic';
import { roundedConstant } from './rounded-constant';
import { sign } from './sign';
import { singular } from './singular';
import { swappedRows } from './swapped-rows';
import { swappedSymbol } from './swapped-symbol';
import { syntax } from './syntax';
import { undeclared } from './undeclared';
import { unread } from './unread';
import { unused } from './unused';
import { wrongFunction } from './wrong-function';
import { wrongOperator } from './wrong-operator';
import { wrongPower } from './wrong-power';

export type { CodeDoc } from './doc';

/** By code; the type makes sure that none is forgotten. */
const byCode: Readonly<Record<FindingCode | ProblemCode, CodeDoc>> = {
  sign,
  factor,
  'missing-term': missingTerm,
  'extra-term': extraTerm,
  'swapped-symbol': swappedSymbol,
  'swapped-rows': swappedRows,
  'wrong-function': wrongFunction,
  'wrong-power': wrongPower,
  'wrong-operator': wrongOperator,
  grouping,
  'rounded-constant': roundedConstant,
  differs,
  unread,
  syntax,
  undeclared,
  unused,
  ambiguous,
  dimension,
  'not-quadratic': notQuadratic,
  singular,
  inconsistent,
};

/** Every code: those about claims first. */
export const codeDocs: readonly CodeDoc[] = Object.values(byCode);

export function codeDoc(code: FindingCode | ProblemCode): CodeDoc {
  return byCode[code];
}
