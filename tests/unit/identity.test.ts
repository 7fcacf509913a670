import { describe, expect, test } from 'vitest';
import { decideFormulas } from '../support/decide-formulas';

const PENDULUM = `
coordinates th [rad]
parameters  m, l, g > 0
point bob: mass m at (l*sin(th), -l*cos(th))
gravity (0, -g)`;
const CRANE = `
coordinates x [m], th [rad]
parameters  M, m, l, g > 0, c >= 0
inputs      F
point trolley: mass M at (x, 0)
point load:    mass m at (x + l*sin(th), -l*cos(th))
gravity (0, -g)
D = 1/2*c*x'^2
Q[x] = F`;
const X = `(F - c*x' + m*l*th'^2*sin(th) + m*g*sin(th)*cos(th))/(M + m*sin(th)^2)`;
const TH = `-(cos(th)*${X} + g*sin(th))/l`;

/** `identity`, or what stopped the exact test, or the verdict of a claim that does not hold. */
function proof(declaration: string, quantity: string, code: string): string {
  const d = decideFormulas(declaration, { [quantity]: code })[quantity]!;
  if (d.verdict !== 'holds') return d.verdict;
  if (d.proof?.kind === 'identity') expect(d.proof.chance).toBeLessThan(1e-15);
  return d.proof?.kind === 'none' ? d.proof.stopped : (d.proof?.kind ?? 'nothing');
}

describe('identities', () => {
  test.each([
    ['-g/l*sin(th)'],
    ['-g*2*sin(th/2)*cos(th/2)/l'],
    ['-g/l*cos(th - pi/2)'],
    ['g/l*sin(th + pi)'],
    ['-g/l*tan(th)*cos(th)'],
    ['-g/l*(sin(3*th) + 4*sin(th)^3)/3'],
    ['-g/l*sin(th)*(sin(th)^2 + cos(th)^2)'],
    ['-sqrt(g^2)/l*sin(th)'],
    ['-sqrt(g)*sqrt(g/l^2)*sin(th)'],
    ['-g/l*sin(th)*exp(th)*exp(-th)'],
    ['-g/l*sin(th)*(cosh(th)^2 - sinh(th)^2)'],
    ['-g/l*sin(th) + log(m*g) - log(g*m)'],
    ['-0.5*g/l*sin(th)*2'],
  ])('%s is the acceleration of a pendulum', (code) => expect(proof(PENDULUM, "th''", code)).toBe('identity'));

  test('coupled accelerations, all together and one alone', () => {
    const d = decideFormulas(CRANE, { "x''": X, "th''": TH });
    for (const k of ["x''", "th''"]) expect(d[k]).toMatchObject({ verdict: 'holds', proof: { kind: 'identity' } });
    expect(proof(CRANE, "th''", TH)).toBe('identity');
    expect(proof(CRANE, 'mass matrix[x, th]', 'm*l*cos(th)')).toBe('identity');
  });

  test('what is no identity is not proved', () => {
    expect(proof(PENDULUM, "th''", '-g/l*sin(th)*1.0000000000000001')).toMatch(/rounded/);
    expect(proof(PENDULUM, "th''", 'g/l*sin(th)')).toBe('differs');
    expect(proof(PENDULUM, "th''", '-g/l*sin(th) + 0*sqrt(th^2)')).toBe('identity');
    expect(proof(PENDULUM, "th''", '-g/l*sin(th)*sign(th)^2')).toBe('sign');
    expect(proof(PENDULUM, "th''", '-g/l*sin(th)*sqrt(th^2)/abs(th)')).toBe('abs');
    expect(proof(PENDULUM, "th''", '-2*g/l*sin(th)*cos(pi/3)')).toMatch(/pi/);
  });

  test('expansions are proved order by order', () => {
    expect(proof(`${PENDULUM}\nnear th = 0, order 3`, "th''", '-g/l*(th - th^3/6)')).toBe('identity');
  });
});

describe('a literal that is rounded too little to be seen in numbers', () => {
  test.each([
    ['-g/l*sin(th)*3.14159265358979/pi', 'the number 3.14159265358979, which is pi rounded'],
    ['-g/l*sin(th)*1.41421356237310/sqrt(2)', 'the number 1.4142135623731, which is sqrt(2) rounded'],
    ['-g/l*sin(th)*(cos(th)^2*0.333333333333333 + sin(th)^2/3)*3', 'the number 0.333333333333333, which is 1/3 rounded'],
  ])('%s', (code, stopped) => expect(proof(PENDULUM, "th''", code)).toBe(stopped));

  test('with the exact value it is proved', () => {
    expect(proof(PENDULUM, "th''", '-g/l*sin(th)*sqrt(2)^2/2')).toBe('identity');
    expect(proof(PENDULUM, "th''", '-g/l*sin(th)*sqrt(8)/(2*sqrt(2))')).toBe('identity');
  });
});

describe('roots', () => {
  const ROPE = `
coordinates x, y
parameters  m, k, l > 0
point p: mass m at (x, y)
spring k, rest l between (0, 0) and (x, y)`;
  test('a spring between points', () => {
    expect(proof(ROPE, "x''", '-k/m*(1 - l/sqrt(x^2 + y^2))*x')).toBe('identity');
    expect(proof(ROPE, "x''", '-k/m*(x - l*x*sqrt(x^2 + y^2)/(x^2 + y^2))')).toBe('identity');
  });

  test('a root that is right for positive values only is no identity', () => {
    const declaration = ROPE.replace('coordinates x, y', 'coordinates x, y\nranges x in [1, 2]');
    expect(proof(declaration, "x''", '-k/m*(1 - l/sqrt(x^2 + y^2))*sqrt(x^2)')).not.toBe('nothing');
    expect(proof(ROPE.replace('coordinates x, y', 'coordinates x, y\nranges x in [-2, -1]'), "x''", '-k/m*(1 - l/sqrt(x^2 + y^2))*(-sqrt(x^2))')).toMatch(/rounded|root/);
  });
});
