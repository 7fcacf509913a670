import ts from 'typescript';
import type { BinaryOperator } from '../../program/form';

const K = ts.SyntaxKind;

export const BINARY = new Map<ts.SyntaxKind, BinaryOperator>([
  [K.PlusToken, '+'],
  [K.MinusToken, '-'],
  [K.AsteriskToken, '*'],
  [K.SlashToken, '/'],
  [K.PercentToken, '%'],
  [K.AsteriskAsteriskToken, '**'],
  [K.LessThanToken, '<'],
  [K.LessThanEqualsToken, '<='],
  [K.GreaterThanToken, '>'],
  [K.GreaterThanEqualsToken, '>='],
  [K.EqualsEqualsToken, '=='],
  [K.EqualsEqualsEqualsToken, '=='],
  [K.ExclamationEqualsToken, '!='],
  [K.ExclamationEqualsEqualsToken, '!='],
  [K.InKeyword, 'in'],
  [K.InstanceOfKeyword, 'instanceof'],
  [K.BarToken, 'bit'],
  [K.AmpersandToken, 'bit'],
  [K.CaretToken, 'bit'],
  [K.LessThanLessThanToken, 'bit'],
  [K.GreaterThanGreaterThanToken, 'bit'],
  [K.GreaterThanGreaterThanGreaterThanToken, 'bit'],
]);

export const LOGICAL = new Map<ts.SyntaxKind, 'and' | 'or' | 'coalesce'>([
  [K.AmpersandAmpersandToken, 'and'],
  [K.BarBarToken, 'or'],
  [K.QuestionQuestionToken, 'coalesce'],
]);

/** `+=` and its like. */
export const COMPOUND = new Map<ts.SyntaxKind, BinaryOperator>([
  [K.PlusEqualsToken, '+'],
  [K.MinusEqualsToken, '-'],
  [K.AsteriskEqualsToken, '*'],
  [K.SlashEqualsToken, '/'],
  [K.PercentEqualsToken, '%'],
  [K.AsteriskAsteriskEqualsToken, '**'],
  [K.BarEqualsToken, 'bit'],
  [K.AmpersandEqualsToken, 'bit'],
  [K.CaretEqualsToken, 'bit'],
  [K.LessThanLessThanEqualsToken, 'bit'],
  [K.GreaterThanGreaterThanEqualsToken, 'bit'],
  [K.GreaterThanGreaterThanGreaterThanEqualsToken, 'bit'],
]);

/** `||=` and its like. */
export const LOGICAL_ASSIGNMENT = new Map<ts.SyntaxKind, 'and' | 'or' | 'coalesce'>([
  [K.AmpersandAmpersandEqualsToken, 'and'],
  [K.BarBarEqualsToken, 'or'],
  [K.QuestionQuestionEqualsToken, 'coalesce'],
]);
