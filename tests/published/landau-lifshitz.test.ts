import { published } from '../support/published';

/** L. D. Landau, E. M. Lifshitz, "Mechanics" (Course of Theoretical Physics 1), 3rd edition; all from memory. */
const LL = (section: string): string => `Landau and Lifshitz, "Mechanics", ${section}, from memory`;

published(LL('§4, equation (4.5)'), 'free particle in cylindrical coordinates', `
/**
 * @visviva ll-cylindrical
 * coordinates r [m] > 0, ph [rad], z [m]
 * parameters  m [kg] > 0
 * point particle: mass m at (r*cos(ph), r*sin(ph), z)
 * checks return = T
 */
function kinetic(m, r, rDot, phDot, zDot) {
  return 0.5 * m * (rDot ** 2 + r ** 2 * phDot ** 2 + zDot ** 2);
}
//= kinetic(m, r, r', ph', z')
//~ power: r ** 2 * phDot -> r * phDot
//~ half: 0.5 * m -> m
`);

published(LL('§4, equation (4.6)'), 'free particle in spherical coordinates', `
/**
 * @visviva ll-spherical
 * coordinates r [m] > 0, th, ph [rad]
 * parameters  m [kg] > 0
 * point particle: mass m at (r*sin(th)*cos(ph), r*sin(th)*sin(ph), r*cos(th))
 * checks return = T
 */
function kinetic(m, r, th, rDot, thDot, phDot) {
  return 0.5 * m * (rDot ** 2 + r ** 2 * thDot ** 2 + r ** 2 * phDot ** 2 * Math.sin(th) ** 2);
}
//= kinetic(m, r, th, r', th', ph')
//~ cos-for-sin: Math.sin(th) ** 2 -> Math.cos(th) ** 2
//~ lost-sine: phDot ** 2 * Math.sin(th) ** 2 -> phDot ** 2
//~ power: r ** 2 * thDot -> r * thDot
`);

published(LL('§5, problem 1'), 'coplanar double pendulum', `
/**
 * @visviva ll-double
 * coordinates ph1, ph2 [rad]           both from straight down
 * parameters  m1, m2 [kg] > 0, l1, l2 [m] > 0, g [m/s^2] > 0
 * point one: mass m1 at (l1*sin(ph1), -l1*cos(ph1))
 * point two: mass m2 at (l1*sin(ph1) + l2*sin(ph2), -l1*cos(ph1) - l2*cos(ph2))
 * gravity (0, -g)
 * checks return = L
 */
function lagrangian(ph1, ph2, ph1Dot, ph2Dot, m1, m2, l1, l2, g) {
  return 0.5 * (m1 + m2) * l1 ** 2 * ph1Dot ** 2 + 0.5 * m2 * l2 ** 2 * ph2Dot ** 2
    + m2 * l1 * l2 * ph1Dot * ph2Dot * Math.cos(ph1 - ph2)
    + (m1 + m2) * g * l1 * Math.cos(ph1) + m2 * g * l2 * Math.cos(ph2);
}
//= lagrangian(ph1, ph2, ph1', ph2', m1, m2, l1, l2, g)
//~ sum-for-difference: ph1 - ph2 -> ph1 + ph2
//~ one-mass: 0.5 * (m1 + m2) -> 0.5 * m1
//~ half: + m2 * l1 * l2 -> + 0.5 * m2 * l1 * l2
//~ sign: + m2 * g * l2 -> - m2 * g * l2
`);

published(LL('§5, problem 2'), 'pendulum on a sliding support', `
/**
 * @visviva ll-sliding
 * coordinates x [m], ph [rad]          ph from straight down
 * parameters  m1, m2 [kg] > 0, l [m] > 0, g [m/s^2] > 0
 * point support: mass m1 at (x, 0)
 * point bob: mass m2 at (x + l*sin(ph), -l*cos(ph))
 * gravity (0, -g)
 * checks return = L
 */
const lagrangian = (ph, xDot, phDot, { m1, m2, l, g }) =>
  ((m1 + m2) * xDot ** 2) / 2 + (m2 / 2) * (l ** 2 * phDot ** 2 + 2 * l * xDot * phDot * Math.cos(ph)) + m2 * g * l * Math.cos(ph);
//= lagrangian(ph, x', ph', { m1, m2, l, g })
//~ lost-two: 2 * l * xDot -> l * xDot
//~ sin-for-cos: phDot * Math.cos(ph) -> phDot * Math.sin(ph)
//~ wrong-mass: (m1 + m2) * xDot -> (m1) * xDot
`);

/** Part (a): L = 1/2 m l^2 ph'^2 + m l a gam^2 sin(ph - gam t) + m g l cos(ph), after dropping a total derivative. */
published(LL('§5, problem 3a'), 'pendulum whose support runs round a vertical circle', `
/**
 * @visviva ll-circle
 * coordinates ph [rad]                 from straight down
 * parameters  m [kg] > 0, l, a [m] > 0, gam [rad/s], g [m/s^2] > 0
 * point bob: mass m at (a*cos(gam*t) + l*sin(ph), a*sin(gam*t) - l*cos(ph))
 * gravity (0, -g)
 * checks return = ph''
 */
function fromPoints(t, ph, l, a, gam, g) {
  return (a * gam ** 2 * Math.cos(ph - gam * t) - g * Math.sin(ph)) / l;
}
//= fromPoints(t, ph, l, a, gam, g)
//~ sin-for-cos: Math.cos(ph - -> Math.sin(ph -
//~ power: gam ** 2 -> gam
//~ sign: ** 2 * Math.cos -> ** 2 * -Math.cos

/**
 * @visviva ll-circle-book
 * coordinates ph [rad]
 * parameters  m [kg] > 0, l, a [m] > 0, gam [rad/s], g [m/s^2] > 0
 * L = 1/2*m*l^2*ph'^2 + m*l*a*gam^2*sin(ph - gam*t) + m*g*l*cos(ph)
 * checks return = ph''
 */
function fromBook(t, ph, l, a, gam, g) {
  return (a * gam ** 2 * Math.cos(ph - gam * t) - g * Math.sin(ph)) / l;
}
//= fromBook(t, ph, l, a, gam, g)
//~ sum-for-difference: ph - gam * t -> ph + gam * t
`);

published(LL('§5, problem 3b and c'), 'pendulum whose support is shaken', `
/**
 * @visviva ll-sideways
 * coordinates ph [rad]                 from straight down
 * parameters  m [kg] > 0, l, a [m] > 0, gam [rad/s], g [m/s^2] > 0
 * point bob: mass m at (a*cos(gam*t) + l*sin(ph), -l*cos(ph))
 * gravity (0, -g)
 * checks return = ph''
 */
const sideways = (t, ph, l, a, gam, g) => (a / l) * gam ** 2 * Math.cos(gam * t) * Math.cos(ph) - (g / l) * Math.sin(ph);
//= sideways(t, ph, l, a, gam, g)
//~ sin-for-cos: * Math.cos(ph) -> * Math.sin(ph)
//~ sign: - (g / l) -> + (g / l)

/**
 * @visviva ll-up-and-down
 * coordinates ph [rad]                 from straight down
 * parameters  m [kg] > 0, l, a [m] > 0, gam [rad/s], g [m/s^2] > 0
 * point bob: mass m at (l*sin(ph), -a*cos(gam*t) - l*cos(ph))
 * gravity (0, -g)
 * checks return = ph''
 */
const upAndDown = (t, ph, l, a, gam, g) => -((a / l) * gam ** 2 * Math.cos(gam * t) + g / l) * Math.sin(ph);
//= upAndDown(t, ph, l, a, gam, g)
//~ sign: + g / l) -> - g / l)
//~ power: gam ** 2 * Math -> gam * Math
`);

published(LL('§5, problem 4'), 'two hinged masses and a sliding one on a turning axis', `
/**
 * @visviva ll-governor
 * coordinates th [rad]                 of the upper rods from straight down
 * parameters  m1, m2 [kg] > 0, a [m] > 0, Om [rad/s], g [m/s^2] > 0
 * point left:   mass m1 at (a*sin(th)*cos(Om*t), a*sin(th)*sin(Om*t), -a*cos(th))
 * point right:  mass m1 at (-a*sin(th)*cos(Om*t), -a*sin(th)*sin(Om*t), -a*cos(th))
 * point slider: mass m2 at (0, 0, -2*a*cos(th))
 * gravity (0, 0, -g)
 * checks return = L
 */
function lagrangian(th, thDot, m1, m2, a, Om, g) {
  const s2 = Math.sin(th) ** 2;
  return m1 * a ** 2 * (thDot ** 2 + Om ** 2 * s2) + 2 * m2 * a ** 2 * thDot ** 2 * s2 + 2 * (m1 + m2) * g * a * Math.cos(th);
}
//= lagrangian(th, th', m1, m2, a, Om, g)
//~ lost-sine: Om ** 2 * s2 -> Om ** 2
//~ lost-two: + 2 * m2 -> + m2
//~ wrong-mass: 2 * (m1 + m2) -> 2 * (m1)
`);

published(LL('§14, problem 1'), 'spherical pendulum', `
/**
 * @visviva ll-spherical-pendulum
 * coordinates th, ph [rad]             th from straight down
 * parameters  m [kg] > 0, l [m] > 0, g [m/s^2] > 0
 * point bob: mass m at (l*sin(th)*cos(ph), l*sin(th)*sin(ph), -l*cos(th))
 * gravity (0, 0, -g)
 * checks Mz = p[ph], E = E
 */
function integrals(th, thDot, phDot, m, l, g) {
  const Mz = m * l ** 2 * phDot * Math.sin(th) ** 2;
  const E = 0.5 * m * l ** 2 * (thDot ** 2 + phDot ** 2 * Math.sin(th) ** 2) - m * g * l * Math.cos(th);
  return { Mz, E };
}
//= integrals(th, th', ph', m, l, g)
//~ sign: - m * g * l -> + m * g * l
//~ lost-sine: phDot ** 2 * Math.sin(th) ** 2 -> phDot ** 2
//~ power: Mz = m * l ** 2 -> Mz = m * l
`);

/** Small oscillations: (m1+m2) l1 ph1'' + m2 l2 ph2'' + (m1+m2) g ph1 = 0, l1 ph1'' + l2 ph2'' + g ph2 = 0. */
published(LL('§23, problem 2'), 'small oscillations of the double pendulum', `
/**
 * @visviva ll-small-double
 * coordinates ph1, ph2 [rad]
 * parameters  m1, m2 [kg] > 0, l1, l2 [m] > 0, g [m/s^2] > 0
 * L = 1/2*(m1 + m2)*l1^2*ph1'^2 + 1/2*m2*l2^2*ph2'^2 + m2*l1*l2*ph1'*ph2'
 *     - 1/2*(m1 + m2)*g*l1*ph1^2 - 1/2*m2*g*l2*ph2^2
 * checks a1 = ph1'', a2 = ph2''
 */
function small(ph1, ph2, m1, m2, l1, l2, g) {
  const a1 = (m2 * g * ph2 - (m1 + m2) * g * ph1) / (m1 * l1);
  const a2 = ((m1 + m2) * g * (ph1 - ph2)) / (m1 * l2);
  return [a1, a2];
}
//= small(ph1, ph2, m1, m2, l1, l2, g)
//~ sign: ph1 - ph2 -> ph1 + ph2
//~ wrong-length: (m1 * l2) -> (m1 * l1)
//~ one-mass: (m2 * g * ph2 - (m1 + m2) -> (m2 * g * ph2 - (m1)

/**
 * The same as the expansion of the full pendulum.
 *
 * @visviva ll-near
 * coordinates ph1, ph2 [rad]           both from straight down
 * parameters  m1, m2 [kg] > 0, l1, l2 [m] > 0, g [m/s^2] > 0
 * point one: mass m1 at (l1*sin(ph1), -l1*cos(ph1))
 * point two: mass m2 at (l1*sin(ph1) + l2*sin(ph2), -l1*cos(ph1) - l2*cos(ph2))
 * gravity (0, -g)
 * near ph1 = 0, ph2 = 0, order 1
 * checks a1 = ph1'', a2 = ph2''
 */
function near(ph1, ph2, m1, m2, l1, l2, g) {
  const a1 = (m2 * g * ph2 - (m1 + m2) * g * ph1) / (m1 * l1);
  const a2 = ((m1 + m2) * g * (ph1 - ph2)) / (m1 * l2);
  return [a1, a2];
}
//= none: the judge knows no expansions
//~ sign: ph1 - ph2 -> ph1 + ph2
//~ wrong-length: (m1 * l1) -> (m1 * l2)
`);

/** m dv/dt = -dU/dr + 2 m v x Om + m Om x (r x Om). */
published(LL('§39, equations (39.6) and (39.8)'), 'particle in a uniformly turning frame', `
/**
 * @visviva ll-turning
 * coordinates x, y, z [m]              in the turning frame
 * parameters  m [kg] > 0, k [N/m] > 0, Om [rad/s]
 * where r = (x, y, z), w = (0, 0, Om)
 * L = 1/2*m*dot(r', r') + m*dot(r', cross(w, r)) + 1/2*m*dot(cross(w, r), cross(w, r)) - 1/2*k*dot(r, r)
 * checks return = [x'', y'', z'']
 */
function turning([x, y, z], [xDot, yDot], m, k, Om) {
  return [2 * Om * yDot + Om ** 2 * x - (k / m) * x, -2 * Om * xDot + Om ** 2 * y - (k / m) * y, (-k / m) * z];
}
//= turning([x, y, z], [x', y', z'], m, k, Om)
//~ sign-of-coriolis: -2 * Om * xDot -> 2 * Om * xDot
//~ half-coriolis: [2 * Om * yDot -> [Om * yDot
//~ sign-of-centrifugal: + Om ** 2 * x -> - Om ** 2 * x
//~ lost-centrifugal: + Om ** 2 * y - -> -
`);
