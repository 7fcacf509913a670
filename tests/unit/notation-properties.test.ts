import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { Rational } from '../../server/src/expression/rational';
import { checkDimensions } from '../../server/src/mechanics/dimensions';
import { findBlocks, parseFormula, parseUnit, printFormula } from '../../server/src/notation/index';
import type { BinaryOperator, Formula } from '../../server/src/notation/tree';
import { lisp } from './notation-show';

const AT = { start: 0, end: 0 };
const name = (text: string): Formula => ({ kind: 'name', name: text, span: AT });

/** Formulas as the parser makes them; comparisons do not chain, since those print as they are read, in two parts. */
const formulas = fc.letrec<{ any: Formula; atom: Formula; path: Formula; items: Formula[] }>((tie) => ({
  any: fc.oneof(
    { maxDepth: 5, depthIdentifier: 'formula' },
    tie('atom'),
    tie('path'),
    fc.record({ op: fc.constantFrom<BinaryOperator>('+', '-', '*', '/', '^', 'and', 'or'), left: tie('any'), right: tie('any') }).map((b) => ({ kind: 'binary' as const, ...b, span: AT })),
    fc.record({ op: fc.constantFrom('-' as const, 'not' as const), operand: tie('any') }).map((u) => ({ kind: 'unary' as const, ...u, span: AT })),
    tie('items').map((items) => ({ kind: 'list' as const, items, span: AT })),
    tie('items').map((items) => ({ kind: 'tuple' as const, items, span: AT })),
    fc.tuple(tie('any'), tie('any'), tie('any')).map(([body, from, to]) => ({ kind: 'sum' as const, body, over: [{ index: 'i', from, to, span: AT }], span: AT })),
    fc.tuple(tie('any'), tie('any')).map((args) => ({ kind: 'quantity' as const, name: 'jacobian' as const, args, span: AT })),
    tie('items').map((args) => ({ kind: 'quantity' as const, name: 'mass matrix' as const, args, span: AT })),
    fc.tuple(tie('any'), fc.integer({ min: 1, max: 3 })).map(([operand, order]) =>
      operand.kind === 'prime' ? operand : { kind: 'prime' as const, operand, order, span: AT },
    ),
  ),
  atom: fc.oneof(
    fc.constantFrom('x', 'th', 'θ₁', 'm', 'self', 'M11').map(name),
    fc.constantFrom('0', '1', '2.5', '1e-3', '.5').map((text): Formula => ({ kind: 'number', value: Rational.parse(text)!, text, span: AT })),
  ),
  path: fc.oneof(
    { maxDepth: 4, depthIdentifier: 'path' },
    fc.constantFrom('x', 'f', 'this').map(name),
    tie('path').map((object) => ({ kind: 'member' as const, object, name: 'm_', span: AT })),
    fc.tuple(tie('path'), tie('items')).map(([object, indices]) => ({ kind: 'index' as const, object, indices, span: AT })),
    fc.tuple(tie('path'), tie('items')).map(([callee, args]) => ({ kind: 'call' as const, callee, args, span: AT })),
  ),
  items: fc.array(tie('any'), { minLength: 1, maxLength: 3 }),
}));

const pieces = fc.constantFrom(
  '@visviva a\n', '@visviva', '\n', '\r\n', '\r', ' * ', '/**', '*/', '# ', '"""', 'coordinates ', 'parameters ', 'inputs ', 'where ', 'T = ', 'V =', 'Q[x] = ', 'reads ',
  'checks ', 'point ', 'body ', 'spring ', 'between ', 'and ', 'force ', 'at ', 'on ', 'over i in 1..3', 'ranges ', 'near ', 'assume ', 'order ', 'within limits', 'constraint ', 'with ',
  'jacobian of ', 'by ', 'mass matrix', 'x', "th'", '[m]', '[', ']', '(', ')', ',', ';', '=', '+=', '-', '*', '^', '²', '..', '.', '->', "'", '"', '😀', '\u0307', 'θ̈', '  the remark', '\t', ' ', '1', '2.5e', '> 0', 'in ',
  'sum(', 'over ', 'mass ', 'defines ', 'time ', 'U = ', 'coordinate ', 'not ', '#', '//', '\u0000', '\ud800',
);
const soup = fc.oneof(fc.array(pieces, { maxLength: 60 }).map((p) => p.join('')), fc.string({ unit: 'binary', maxLength: 200 }), fc.string({ unit: 'grapheme', maxLength: 100 }));

/** Every span of a value, at any depth. */
function spansIn(value: unknown, into: { start: number; end: number }[] = []): { start: number; end: number }[] {
  if (Array.isArray(value)) for (const v of value) spansIn(v, into);
  else if (value !== null && typeof value === 'object' && !(value instanceof Rational)) {
    for (const [key, part] of Object.entries(value)) {
      if (/span$/i.test(key) && part) into.push(part as { start: number; end: number });
      else spansIn(part, into);
    }
  }
  return into;
}

describe('any text', () => {
  test('blocks: no exception, and every place inside the comment', () => {
    fc.assert(
      fc.property(soup, soup, fc.constantFrom(['*'], ['#'], ['//'], []), (before, body, lineMarks) => {
        const text = `${before}@visviva a\n${body}`;
        const comment = { span: { start: Math.min(before.length, 3), end: text.length }, lineMarks };
        for (const block of findBlocks(text, comment)) {
          for (const s of spansIn(block)) {
            if (!(s.start >= comment.span.start && s.end <= text.length && s.start <= s.end)) return false;
          }
          checkDimensions(block);
        }
        return true;
      }),
      { numRuns: 1000, interruptAfterTimeLimit: 20_000 },
    );
  });

  test('a declaration: no exception, dimensions too', () => {
    fc.assert(
      fc.property(fc.array(pieces, { maxLength: 40 }), (parts) => {
        const text = `@visviva a\ncoordinates x [m], th\n${parts.join('')}`;
        for (const block of findBlocks(text, { span: { start: 0, end: text.length }, lineMarks: [] })) checkDimensions(block);
      }),
      { numRuns: 1000, interruptAfterTimeLimit: 20_000 },
    );
  });

  test('formulas: no exception, places inside', () => {
    fc.assert(
      fc.property(soup, fc.constantFrom('physics' as const, 'code' as const), (text, side) => {
        const { formula, errors } = parseFormula(text, 5, side);
        return spansIn([formula, errors]).every((s) => s.start >= 5 && s.end <= text.length + 5 && s.start <= s.end);
      }),
      { numRuns: 1000, interruptAfterTimeLimit: 20_000 },
    );
  });

  test('a hole has an error', () => {
    fc.assert(fc.property(soup, (text) => { const { formula, errors } = parseFormula(text); return !printFormula(formula).includes('?') || errors.length > 0; }), { numRuns: 1000, interruptAfterTimeLimit: 20_000 });
  });

  test('units', () => {
    fc.assert(fc.property(fc.oneof(soup, fc.array(fc.constantFrom('m', 'kg', '^', '-', '2', '/', ' ', '(', ')', '*', '²', '⁻'), { maxLength: 20 }).map((p) => p.join(''))), (text) => void parseUnit(text)), { numRuns: 1000, interruptAfterTimeLimit: 20_000 });
  });
});

describe('print and parse', () => {
  test('what is printed reads as the same formula', () => {
    fc.assert(
      fc.property(formulas.any, (formula) => {
        const text = printFormula(formula);
        const read = parseFormula(text);
        expect(read.errors, text).toEqual([]);
        expect(lisp(read.formula), text).toBe(lisp(formula));
      }),
      { numRuns: 1000, interruptAfterTimeLimit: 20_000 },
    );
  });

  test('printing is stable', () => {
    fc.assert(
      fc.property(formulas.any, (formula) => {
        const once = printFormula(parseFormula(printFormula(formula)).formula);
        return printFormula(parseFormula(once).formula) === once;
      }),
      { numRuns: 200, interruptAfterTimeLimit: 20_000 },
    );
  });
});
