import type { BinaryOperator } from '../../program/form';

export const BINARY: Readonly<Record<string, BinaryOperator>> = {
  '+': '+',
  '-': '-',
  '*': '*',
  '/': '/',
  '//': 'floor-divide',
  '%': 'remainder-floor',
  '**': '**',
  '@': 'matmul',
  '&': 'bit-and',
  '|': 'bit-or',
  '^': 'bit',
  '<<': 'bit',
  '>>': 'bit',
};

/** The operator of `+=` and its like. */
export function augmented(text: string): BinaryOperator {
  return BINARY[text.slice(0, -1)] ?? 'bit';
}

/** Comparisons; `not in` and `is not` are the negations of what they name. */
export const COMPARISONS: Readonly<Record<string, { readonly op: BinaryOperator; readonly negated?: boolean }>> = {
  '<': { op: '<' },
  '<=': { op: '<=' },
  '>': { op: '>' },
  '>=': { op: '>=' },
  '==': { op: '==' },
  '!=': { op: '!=' },
  '<>': { op: '!=' },
  is: { op: '==' },
  'is not': { op: '!=' },
  in: { op: 'in' },
  'not in': { op: 'in', negated: true },
};
