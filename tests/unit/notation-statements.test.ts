import { describe, expect, test } from 'vitest';
import { block, errors, statements } from './notation-show';

const reads = (line: string, ...said: string[]): void => {
  test(line, () => {
    expect(errors(line)).toEqual([]);
    expect(statements(line)).toEqual(said);
  });
};

describe('symbols', () => {
  reads('coordinates x [m], th [rad]   th from straight down', 'coordinates x [m]; th [rad] "th from straight down"');
  reads('parameters M, m [kg] > 0', 'parameters M [kg] > 0; m [kg] > 0');
  reads('parameters a [m], b, c [kg]', 'parameters a [m]; b [kg]; c [kg]');
  reads('parameters l [m] > 0 = 0.5, g [m/s^2] in [9, 10], c >= 0', 'parameters l [m] > 0 = 0.5; g [m/s^2] in 9..10; c >= 0');
  reads('parameters M, m > 0 [kg]', 'parameters M [kg] > 0; m [kg] > 0');
  reads('parameters a > 0 < 2', 'parameters a > 0 < 2');
  reads('parameters a in (0, 2], b != 0', 'parameters a in 0..2; b != 0');
  reads('parameters m1, m2', 'parameters m1; m2');
  reads('parameters x[m], y[1]', 'parameters x [m]; y [1]');
  reads('parameters M   [kg]   > 0', 'parameters M [kg] > 0');
  reads('parameters c [N·m·s/rad], J [kg·m²], k [N m⁻¹]', 'parameters c [N·m·s/rad]; J [kg·m²]; k [N m⁻¹]');
  reads('coordinates th[i] [rad] over i in 1..3', 'coordinates th[i] [rad] over i in 1..3');
  reads('coordinates x [m]    in the turning frame', 'coordinates x [m] "in the turning frame"');
  reads('parameters m[i], l[i] [m] > 0 over i in 1..n', 'parameters m[i] [m] > 0; l[i] [m] > 0 over i in 1..n');
  reads('inputs F [N]  # the push', 'inputs F [N] "the push"');
  reads('inputs τ₁, τ₂ [N m]', 'inputs τ₁ [N m]; τ₂ [N m]');
  reads('coordinates x [m]', 'coordinates x [m]');
  reads('parameters L = 2*pi', 'parameters L = 2*pi');
  reads('parameters m = 1, l [m] = 2', 'parameters m = 1; l [m] = 2');

  test('one item to a line, each with its remark', () =>
    expect(statements('coordinates x [m],   the cart', '  th [rad]   the swing')).toEqual(['coordinates x [m] "the cart"; th [rad] "the swing"']));
  test('one item to a line needs no commas', () => expect(statements('coordinates x [m]', '            y [m]')).toEqual(['coordinates x [m]; y [m]']));
  test('the remark is also the statement\'s', () => expect(block('coordinates x [m]   to the right').statements[0]!.remark).toBe('to the right'));
  test('places of name and unit', () => {
    const b = block('coordinates x [m]');
    const s = b.statements[0]!;
    const item = s.kind === 'coordinates' ? s.items[0]! : undefined;
    expect([item!.nameSpan, item!.unit!.span].map((p) => b.text.slice(p.start, p.end))).toEqual(['x', '[m]']);
  });
});

describe('energies and shorthand', () => {
  reads("T = 1/2*m*x'^2", "T = 1/2*m*x'^2");
  reads('T = a, V = b', 'T = a', 'V = b');
  reads("V = m*g*y   the hook's height", 'V = m*g*y');
  reads('where P = (x, y), Q = 2*P', 'where P = (x, y); Q = 2*P');
  reads('where r[0] = (0, 0), r[i] = r[i-1] + l[i] over i in 1..3', 'where r[0] = (0, 0); r[i] = r[i - 1] + l[i] over i in 1..3');
  reads('Q[x] = F', 'Q[x] = F');
  reads('Q[th1] = tau - c*th1\'', "Q[th1] = tau - c*th1'");
  reads('time tau', 'time tau');
  reads('defines T', 'defines T');
  reads('defines Q[x], V', 'defines Q[x]', 'defines V');
  test('continued over lines', () => expect(statements('T = a', '  + b', '  - c')).toEqual(['T = a + b - c']));
  test('continued after an operator at the same indent', () => expect(statements('T = a +', 'b')).toEqual(['T = a + b']));
  test('one equation to a line', () => expect(statements('where a = 1', '      b = 2')).toEqual(['where a = 1; b = 2']));
});

describe('geometry and forces', () => {
  reads('point bob: mass m at (x, y)', 'point bob: m at (x, y)');
  reads('point mass m at P', 'point : m at P');
  reads('point load:    mass m at (x + l*sin(th), -l*cos(th))', 'point load: m at (x + l*sin(th), -l*cos(th))');
  reads('point bob: at P mass m', 'point bob: m at P');
  reads('point bob[i]: mass m[i] at r[i] over i in 1..3', 'point bob: m[i] at r[i] over i in 1..3');
  reads('body rod: mass m, inertia J, centre (a, b), angle th', 'body rod: mass m, inertia J, centre (a, b), angle th');
  reads('body rod: angle th, centre P, inertia J, mass m', 'body rod: mass m, inertia J, centre P, angle th');
  reads('body disc: inertia J angle th', 'body disc: inertia J, angle th');
  reads('body top: mass m, inertia J, centre P, rotation R', 'body top: mass m, inertia J, centre P, rotation R');
  reads('body: mass m, center P', 'body : mass m, centre P');
  reads('gravity (0, -g)', 'gravity (0, -g)');
  reads('spring k between A and B', 'spring k A -- B');
  reads('spring k, rest L0 between A and B', 'spring k rest L0 A -- B');
  reads('spring k between (0, 0) and (x, y), rest L0', 'spring k rest L0 (0, 0) -- (x, y)');
  reads('spring k[i] between r[i-1] and r[i] over i in 1..3', 'spring k[i] r[i - 1] -- r[i] over i in 1..3');
  reads('damper c between A and B', 'damper c A -- B');
  reads('force (F, 0) at P', 'force (F, 0) at P');
  reads("force -c*P' at P   drag", "force -c*P' at P");
  reads('torque tau on th1', 'torque tau on th1');
  reads('torque tau on th2 - th1', 'torque tau on th2 - th1');
  reads('constraint x^2 + y^2 = l^2 with lam', 'constraint x^2 + y^2 = l^2 with lam');
  reads("constraint x' = r*th'", "constraint x' = r*th'");
  reads('constraint a = b, c = d with mu', 'constraint a = b', 'constraint c = d with mu');
});

describe('scope of validity', () => {
  reads('ranges th in [-pi, pi], r in (0, 2]', 'ranges th in -pi..pi; r in 0..2');
  reads('ranges x, y in [0, 1]', 'ranges x in 0..1; y in 0..1');
  reads('near th = 0, x = 0, order 2', 'near th = 0; x = 0 order 2');
  reads('near th = pi', 'near th = pi order 1');
  reads('near a, b = 0', 'near a = 0; b = 0 order 1');
  reads('assume not self.simple', 'assume not self.simple');
  reads('assume kind == "rod" and x > 0', 'assume kind = "rod" and x > 0');
  reads('assume within limits', 'assume within limits');
  reads('assume within limits, p.mode != 2', 'assume within limits', 'assume p.mode != 2');
  reads('assume !simple && dt > 0', 'assume not simple and dt > 0');
});

describe('reads and checks', () => {
  reads('reads a = b, [u, v] = [x, y]', 'reads a = b; [u, v] = [x, y]');
  reads("reads s = [x, th, x', th'], p.trolley = M, p[\"m\"] = m", "reads s = [x, th, x', th']; p.trolley = M; p[\"m\"] = m");
  reads("reads y[0:2] = [x, th], p->m = m, this.#l = l, get_m() = m", 'reads y[0:2] = [x, th]; p.m = m; this.#l = l; get_m() = m');
  reads("checks return = [x', th'], out[1] = th''", "checks return = [x', th']; out[1] = th''");
  reads("checks this.w += dt*th''", "checks this.w += dt*th''");
  reads("checks M11*x'' + M12*th'' - f1 = 0", "checks M11*x'' + M12*th'' - f1 = 0");
  reads('checks H(q) = mass matrix, C(q, dq)*q\' = coriolis vector, g(q) = gravity vector', "checks H(q) = mass matrix; C(q, dq)*q' = coriolis vector; g(q) = gravity vector");
  reads('checks a = bias, b = residual[x], lam = multiplier lam', 'checks a = bias; b = residual[x]; lam = multiplier lam');
  reads('checks J = jacobian of P by [x, th]', 'checks J = jacobian of P by [x, th]');
  reads('checks return.ax = x\'\'  in m/s^2', "checks return.ax = x''");
  test('one claim to a line', () => expect(statements('checks a = x', '       b = y')).toEqual(['checks a = x; b = y']));
  test('a variable of the code called T', () => expect(statements('checks V = V,', '       T = T')).toEqual(['checks V = V; T = T']));
  test('a list over lines with remarks', () =>
    expect(statements("checks return = [x',   the velocity", "                 x'']   acceleration")).toEqual(["checks return = [x', x'']"]));
});

describe('errors', () => {
  test.each([
    ['coordinates x th', 'th: a comma is missing before `th`'],
    ['coordinates x [m] the cart', 'the: unexpected `the`: put two spaces before a remark'],
    ['coordinates', 'coordinates: a name is expected after `coordinates`'],
    ['coordinates x,', ',: a name is expected after the comma'],
    ["coordinates x'", "': declare `x` itself"],
    ['coordinates 2', '2: a name is expected after `coordinates`'],
    ['parameters m [kg', '[: the bracket of this unit is not closed'],
    ['parameters m [kgg]', '[kgg]: unknown unit `kgg`: did you mean `kg`?'],
    ['parameters m [kg] [m]', '[m]: `m` has a unit already'],
    ['parameters m in 1', '1: a range is written `in [low, high]`'],
    ['T', 'T: `=` is expected after `T`'],
    ['T =', '=: a formula is expected here'],
    ['T(q) = 1', '(: an energy is written without arguments'],
    ['T = a b', 'b: an operator is missing before `b`'],
    ['T == a', '==: write one `=`'],
    ['T = (a', '(: this bracket is not closed'],
    ['T = a)', '): `)` closes no bracket'],
    ['Q = F', '=: the coordinate is expected in brackets'],
    ['force F', 'F: `at` and the point are expected'],
    ['force F on P', 'on: a force acts `at` a point'],
    ['torque tau', 'tau: `on` and the angle are expected'],
    ['constraint x^2 + y^2', '2: a constraint is an equation'],
    ['point bob mass m at P', 'bob: put a colon after the name'],
    ['point bob: m at P', 'm: `mass` is expected'],
    ['point bob: mass m', 'm: `at` and the position are expected'],
    ['body rod:', ':: a body needs its parts'],
    ['body rod: mass m, mass n', 'mass: `mass` is given twice'],
    ['spring k', 'k: `between` and two points are expected'],
    ['spring k between A', 'A: `and` and the second point are expected'],
    ['damper c, rest L between A and B', 'rest: a damper has no rest length'],
    ['ranges th', 'th: a range is written `ranges th in [low, high]`'],
    ['near th', 'th: the point of the expansion is written `near th = 0`'],
    ['near th = 0, order 0', '0: the order is a whole number from 1 to 10'],
    ['assume within', 'within: `assume within limits` is meant'],
    ['reads p.m', 'm: `=` is expected here, as in `reads p.m = m`'],
    ['checks return', 'return: `=` is expected here'],
    ['checks return = ', '=: a formula is expected here'],
    ['defines x', 'x: a function can define T, V, L, D or Q[q]'],
    ['coordinates x over i', 'i: `in` is expected after the index'],
  ])('%s', (line, message) => expect(errors(line).join('\n')).toContain(message));

  test('one bad equation does not hide the next', () => expect(statements('reads a, b = x')).toEqual(['reads a = ?; b = x']));
  test('one bad statement does not hide the next', () => expect(statements('T = (', 'V = b')).toEqual(['T = ?', 'V = b']));
});

describe('parameters by the name of a part', () => {
  reads('point bob: mass mass at (x, y)', 'point bob: mass at (x, y)');
  reads('point bob: mass 2*mass at (x, y)', 'point bob: 2*mass at (x, y)');
  reads('point 1: mass m at (x, y)', 'point 1: m at (x, y)');
  reads('body rod: mass mass, inertia inertia, centre (x, y), angle angle', 'body rod: mass mass, inertia inertia, centre (x, y), angle angle');
  reads('spring stiffness, rest rest between A and B', 'spring stiffness rest rest A -- B');
  reads('spring stiffness k, rest length length between A and B', 'spring k rest length A -- B');
  reads('damper coefficient*mass between A and B', 'damper coefficient*mass A -- B');

  test('a part without its formula is still missing', () => {
    expect(errors('point bob: mass at (x, y)')).not.toEqual([]);
    expect(errors('body rod: mass inertia J')).not.toEqual([]);
  });
  test.each(['coordinates x[i] [m] for i in 1..3', 'parameters m[i] > 0 for i in 1..3', 'point p[i]: mass m at (x[i], 0) for i in 1..3'])('%s', (line) =>
    expect(errors(line)).toEqual(['for: families are written `over i in 1..n`']),
  );
});
