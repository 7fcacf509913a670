import { describe, expect, test } from 'vitest';
import { parseFormula } from '../../server/src/notation/index';
import { shape } from './notation-show';

describe('precedence', () => {
  test.each([
    ['a + b*c', '(+ a (* b c))'],
    ['a - b - c', '(- (- a b) c)'],
    ['a/b*c', '(* (/ a b) c)'],
    ['a/b/c', '(/ (/ a b) c)'],
    ['-x^2', '(neg (^ x 2))'],
    ['2^-1', '(^ 2 (neg 1))'],
    ['2^-x^2', '(^ 2 (neg (^ x 2)))'],
    ['x^2^3', '(^ x (^ 2 3))'],
    ['x**2', '(^ x 2)'],
    ['-a*b', '(* (neg a) b)'],
    ['a*-b', '(* a (neg b))'],
    ['a - -b', '(- a (neg b))'],
    ['+a', '(+ a)'],
    ["x'^2", "(^ x' 2)"],
    ["-th''", "(neg th'')"],
    ['(a + b)*c', '(* (+ a b) c)'],
    ['a < b and not c > d or e', '(or (and (< a b) (not (> c d))) e)'],
    ['0 < x < 2', '(and (< 0 x) (< x 2))'],
    ['a < b < c < d', '(and (and (< a b) (< b c)) (< c d))'],
    ['a == b', '(= a b)'],
    ['a ≠ b', '(!= a b)'],
    ['a ≤ b', '(<= a b)'],
    ['a && !b || c', '(or (and a (not b)) c)'],
  ])('%s', (text, tree) => expect(shape(text)).toBe(tree));
});

describe('operands', () => {
  test.each([
    ['1.5e-3', '1.5e-3'],
    ['.5', '.5'],
    ['2.', '2.'],
    ['½*m', '(* ½ m)'],
    ['1/2', '(/ 1 2)'],
    ['sin(x)', '(call sin x)'],
    ['sin (x)', '(call sin x)'],
    ['atan2(y, x)', '(call atan2 y x)'],
    ['f()', '(call f)'],
    ["dot(P', P')", "(call dot P' P')"],
    ['(a, b)', '(tuple a b)'],
    ['(a, b, c)', '(tuple a b c)'],
    ['(a,)', '(tuple a)'],
    ['[a, b]', '(list a b)'],
    ['[]', '(list)'],
    ['[a, b; c, d]', '(list (list a b) (list c d))'],
    ['[[a, b], [c, d]]', '(list (list a b) (list c d))'],
    ["(x + y)'", "(+ x y)'"],
    ["p[q]'", "p[q]'"],
    ['r[i-1]', 'r[(- i 1)]'],
    ['M[0, 1]', 'M[0 1]'],
    ['A[0][1]', 'A[0][1]'],
    ['sum(m[i]*g over i in 1..n)', '(sum (* m[i] g) i=1..n)'],
    ['sum(a[i, j] over i in 1..3, j in 1..i)', '(sum a[i j] i=1..3 j=1..i)'],
    ['sum(a[i, j] over i in 1..3 over j in 1..i-1)', '(sum a[i j] i=1..3 j=1..(- i 1))'],
    ['sum(a, b)', '(call sum a b)'],
    ['pi', 'pi'],
  ])('%s', (text, tree) => expect(shape(text)).toBe(tree));
});

describe('other spellings', () => {
  test.each([
    ['m·l×g', '(* (* m l) g)'],
    ['a − b', '(- a b)'],
    ['x²', '(^ x 2)'],
    ['x⁻¹', '(^ x -1)'],
    ["x'²", "(^ x' 2)"],
    ['θ', 'θ'],
    ['\u03b8\u0307', "θ'"],
    ['\u03b8\u0308', "θ''"],
    ['\u1e8b', "x'"],
    ['\u1e8d', "x''"],
    ['\u1e8f', "y'"],
    ['\u03b8\u03071', "θ1'"],
    ['\u03b8\u0307\u0307', "θ''"],
    ['θ₁', 'θ₁'],
    ['\u1e8b₂²', "(^ x₂' 2)"],
    ['höhe', 'höhe'],
    ['ho\u0308he', 'höhe'],
    ['ångström', 'ångström'],
    ['x′', "x'"],
    ['x″', "x''"],
    ['x’', "x'"],
    ['x²·\u1e8b', "(* (^ x 2) x')"],
  ])('%s', (text, tree) => expect(shape(text)).toBe(tree));
});

describe('code', () => {
  test.each([
    ['this.m_', 'this.m_'],
    ['self.#m', 'self.#m'],
    ['p->m', 'p.m'],
    ['State::x', 'State.x'],
    ['p?.m', 'p.m'],
    ['s.0', 's.0'],
    ['s.0.1', 's.0.1'],
    ['params["m"]', 'params["m"]'],
    ["params['m']", 'params["m"]'],
    ['p.getMass()', '(call p.getMass)'],
    ['C(q, dq)*x', '(* (call C q dq) x)'],
    ['y[0:2]', 'y[0:2]'],
    ['y[2:]', 'y[2:]'],
    ['y[:2]', 'y[:2]'],
    ['A[0, :]', 'A[0 :]'],
    ['y(1:2)', '(call y 1:2)'],
    ['return[2]', 'return[2]'],
    ['rates.return[1]', 'rates.return[1]'],
    ['\u03b8\u0307', '\u03b8\u0307'],
    ['\u1e8b', '\u1e8b'],
    ['*out', 'out'],
    ['(*p).m', 'p.m'],
    ['mass', 'mass'],
    ['bias', 'bias'],
    ["M11*x'' + M12*th'' - f1", "(- (+ (* M11 x'') (* M12 th'')) f1)"],
    ['kind == "rod"', '(= kind "rod")'],
    ["kind == 'rod'", '(= kind "rod")'],
  ])('%s', (text, tree) => expect(shape(text, 'code')).toBe(tree));
});

describe('quantities', () => {
  test.each([
    ['mass matrix', '<mass matrix>'],
    ['mass matrix[x, th]', '<mass matrix x th>'],
    ['Coriolis vector', '<coriolis vector>'],
    ['coriolis matrix', '<coriolis matrix>'],
    ['gravity vector + damping vector', '(+ <gravity vector> <damping vector>)'],
    ['-bias', '(neg <bias>)'],
    ['right side[x]', '<right side x>'],
    ['residual', '<residual>'],
    ['multiplier lam', '<multiplier lam>'],
    ['linearised A', '<linearised A>'],
    ['linearized B[1, 2]', '<linearised B 1 2>'],
    ['jacobian of (x, y) by (th1, th2)', '<jacobian (tuple x y) (tuple th1 th2)>'],
    ['input matrix * 2', '(* <input matrix> 2)'],
  ])('%s', (text, tree) => expect(shape(text)).toBe(tree));
});

describe('remarks', () => {
  test.each([
    ['m*g  the weight', '(* m g)'],
    ['m*g\tthe weight', '(* m g)'],
    ['m*g   (a remark)', '(* m g)'],
    ['m*g # why', '(* m g)'],
    ['m*g // why', '(* m g)'],
    ['m*g ! why', '(* m g)'],
    ['m*g — why', '(* m g)'],
    ['a  first\n + b  second', '(+ a b)'],
    ['a   + b', '(+ a b)'],
    ['[a,   b]', '(list a b)'],
  ])('%j', (text, tree) => expect(shape(text)).toBe(tree));
});

describe('errors', () => {
  test.each([
    ['2 m', 'an operator is missing before `m`: a product is written `2*m`'],
    ['cos x', 'the argument of a function stands in brackets: `cos(x)`'],
    ['1 + |x|', 'a magnitude is written `norm(...)`, or `abs(...)` of a number'],
    ['2m', 'a product is written `2*m`'],
    ['a (b + c)(d)', 'an operator is missing before `(`'],
    ['sin^2(x)', 'a power of a function is written after its argument: `sin(...)^n`'],
    ['sin²(x)', 'a power of a function is written after its argument: `sin(...)^n`'],
    ['a +', 'a formula is expected after `+`, before the end of the statement'],
    ['a * / b', 'a formula is expected after `*`, before `/`'],
    ['', 'a formula is expected here'],
    ['(a + b', 'this bracket is not closed: `)` is missing'],
    ['[a, b', 'this bracket is not closed: `]` is missing'],
    ['(a, b]', '`)` is expected here, not `]`'],
    ['f(a,, b)', 'a formula is expected before `,`'],
    ['a)', 'unexpected `)` after the end of the formula'],
    ['()', 'a formula is expected between these brackets'],
    ['x[]', 'an index is expected between these brackets'],
    ['p.', 'the name of a field is expected after `.`'],
    ['"open', 'this quotation is not closed on its line'],
    ['a § b', '`§`'],
    ['1e99999', 'the number 1e99999 is out of range'],
    ['x"', 'two apostrophes'],
    ['sum(m[i] for i in 1..n)', 'families are written `over i in 1..n`'],
    ['sum(m[i] over i in 1:n)', 'a range is written with two dots'],
    ['sum(m[i] over i)', '`in` is expected after the index'],
    ['sum()', 'a sum is written'],
    ['jacobian of x', '`by` and the variables are expected'],
    ['a[0:1:2]', 'a slice has no step'],
    ['x [m]', 'an index stands directly after its name'],
  ])('%j', (text, message) => expect(shape(text)).toContain(message));

  test('several in one formula', () => expect(parseFormula('(a + ) * (b + )').errors).toHaveLength(2));
  test('recovers after a missing operand', () => expect(shape('f(a + , b)').split('\n')[0]).toBe('(call f (+ a ?) b)'));
});

describe('hostile input', () => {
  test('500 brackets', () => expect(parseFormula('('.repeat(500) + 'x' + ')'.repeat(500)).errors).toEqual([]));
  test.each([
    ['brackets', '('.repeat(100_000)],
    ['lists', '['.repeat(100_000)],
    ['calls', 'f('.repeat(100_000)],
    ['indices', 'x['.repeat(100_000)],
    ['signs', '-'.repeat(100_000)],
    ['nots', 'not '.repeat(100_000)],
    ['stars in code', '*'.repeat(100_000)],
    ['powers', 'x^'.repeat(100_000)],
    ['a long sum', 'x+'.repeat(100_000)],
    ['a long product', 'x '.repeat(100_000)],
    ['members', 'a.'.repeat(100_000)],
    ['primes', "x'".repeat(100_000)],
    ['jacobians', 'jacobian of '.repeat(100_000)],
    ['sums', 'sum('.repeat(100_000)],
    ['quotes', '"'.repeat(100_001)],
    ['closing', ')'.repeat(100_000)],
    ['commas', `[${','.repeat(100_000)}`],
    ['combining marks', `x${'\u0307'.repeat(100_000)}`],
    ['a long number', '1'.repeat(100_000)],
    ['comparisons', 'x<'.repeat(100_000)],
  ])('%s', (_, text) => {
    const start = performance.now();
    for (const side of ['physics', 'code'] as const) parseFormula(text, 0, side);
    expect(performance.now() - start).toBeLessThan(5000);
  });
});

describe('places', () => {
  test('a bracketed formula includes its brackets', () => expect(parseFormula('(a + b)').formula.span).toEqual({ start: 0, end: 7 }));
  test('spans start at the offset', () => expect(parseFormula('a', 10).formula.span).toEqual({ start: 10, end: 11 }));
  test('a missing bracket is reported where it was opened', () =>
    expect(parseFormula('x*(a').errors[0]!.span).toEqual({ start: 2, end: 3 }));
});
