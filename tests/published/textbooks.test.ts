import { published } from '../support/published';

/** All from memory: the numbers of examples are those of the editions named. */
const TAYLOR = 'J. R. Taylor, "Classical Mechanics" (2005), section 7.5';
const MARION = 'S. T. Thornton, J. B. Marion, "Classical Dynamics of Particles and Systems", 5th edition, section 7.4';

published(`${TAYLOR}, the Atwood machine, from memory`, 'two weights over a pulley', `
/**
 * @visviva atwood
 * coordinates x [m]                    how far m1 has gone down
 * parameters  m1, m2 [kg] > 0, g [m/s^2] > 0, l [m] > 0
 * point one: mass m1 at (0, -x)
 * point two: mass m2 at (0, x - l)
 * gravity (0, -g)
 * checks return/g = x''/g
 */
const ratio = (m1, m2, g) => (g * (m1 - m2)) / (m1 + m2);
//= ratio(m1, m2, g)
//~ swapped-masses: m1 - m2 -> m2 - m1
//~ difference-below: (m1 + m2) -> (m1 - m2)
//~ factor: (g * (m1 -> (2 * g * (m1
`);

/** x'' = -m/(M+m) q'' cos(al), q'' = g sin(al) / (1 - m cos^2(al)/(M+m)). */
published(`${TAYLOR}, a block sliding on a wedge, from memory`, 'block on a wedge that slides itself', `
/**
 * @visviva wedge
 * coordinates x, q [m]                 wedge along the table, block down the slope
 * parameters  M, m [kg] > 0, al [rad] in [0.3, 1.2], g [m/s^2] > 0
 * point wedge: mass M at (x, 0)
 * point block: mass m at (x + q*cos(al), -q*sin(al))
 * gravity (0, -g)
 * checks return.q = q'', return.x = x''
 */
function wedge({ M, m, al, g }) {
  const qdd = (g * Math.sin(al)) / (1 - (m * Math.cos(al) ** 2) / (M + m));
  const xdd = -(m / (M + m)) * qdd * Math.cos(al);
  return { q: qdd, x: xdd };
}
//= wedge({ M, m, al, g })
//~ sign: xdd = -(m -> xdd = (m
//~ square: Math.cos(al) ** 2 -> Math.cos(al)
//~ sign-below: (1 - (m -> (1 + (m
//~ cos-for-sin: g * Math.sin(al) -> g * Math.cos(al)
`);

published(`${TAYLOR}, a bead on a spinning wire hoop, from memory`, 'bead on a turning hoop', `
/**
 * @visviva hoop
 * coordinates th [rad]                 from straight down
 * parameters  m [kg] > 0, R [m] > 0, om [rad/s], g [m/s^2] > 0
 * point bead: mass m at (R*sin(th)*cos(om*t), R*sin(th)*sin(om*t), -R*cos(th))
 * gravity (0, 0, -g)
 * checks return = th''
 */
const hoop = (th, om, g, R) => (om ** 2 * Math.cos(th) - g / R) * Math.sin(th);
//= hoop(th, om, g, R)
//~ sign: - g / R -> + g / R
//~ lost-cosine: om ** 2 * Math.cos(th) -> om ** 2
//~ power: om ** 2 -> om
`);

/** r'' - r th'^2 sin^2(al) + g sin(al) cos(al) = 0. */
published(`${MARION}, particle inside a smooth cone, from memory`, 'particle inside a smooth cone', `
/**
 * @visviva cone
 * coordinates r [m] > 0, th [rad]      r from the axis
 * parameters  m [kg] > 0, al [rad] in [0.3, 1.2], g [m/s^2] > 0
 * point particle: mass m at (r*cos(th), r*sin(th), r*cos(al)/sin(al))
 * gravity (0, 0, -g)
 * checks return = r''
 */
function cone(r, thDot, al, g) {
  return r * thDot ** 2 * Math.sin(al) ** 2 - g * Math.sin(al) * Math.cos(al);
}
//= cone(r, th', al, g)
//~ sign: - g * -> + g *
//~ lost-sine: thDot ** 2 * Math.sin(al) ** 2 -> thDot ** 2
//~ half-sine: Math.sin(al) ** 2 -> Math.sin(al)
//~ lost-cosine: Math.sin(al) * Math.cos(al) -> Math.sin(al)
`);

/** th'' = om^2 a/b cos(th - om t) - g/b sin(th). */
published(`${MARION}, pendulum on a turning rim, from memory`, 'pendulum hung on a turning rim', `
/**
 * @visviva rim
 * coordinates th [rad]                 from straight down
 * parameters  m [kg] > 0, a, b [m] > 0, om [rad/s], g [m/s^2] > 0
 * point bob: mass m at (a*cos(om*t) + b*sin(th), a*sin(om*t) - b*cos(th))
 * gravity (0, -g)
 * checks return = th''
 */
const rim = (t, th, a, b, om, g) => ((om ** 2 * a) / b) * Math.cos(th - om * t) - (g / b) * Math.sin(th);
//= rim(t, th, a, b, om, g)
//~ inverted: (om ** 2 * a) / b -> (om ** 2 * b) / a
//~ sum-for-difference: th - om * t -> th + om * t
//~ sign: - (g / b) -> + (g / b)
`);

/** r''(1 + 4 c^2 r^2) + r'^2 (4 c^2 r) + r (2 g c - om^2) = 0. */
published(`${MARION}, bead on a parabola that turns, from memory`, 'bead on a turning parabola', `
/**
 * @visviva parabola
 * coordinates r [m] > 0
 * parameters  m [kg] > 0, c [1/m] > 0, om [rad/s], g [m/s^2] > 0
 * point bead: mass m at (r*cos(om*t), r*sin(om*t), c*r^2)
 * gravity (0, 0, -g)
 * reads  rDotDot = r''
 * checks left = 0
 */
function residual(r, rDot, rDotDot, c, om, g) {
  const left = rDotDot * (1 + 4 * c ** 2 * r ** 2) + rDot ** 2 * (4 * c ** 2 * r) + r * (2 * g * c - om ** 2);
  return left;
}
//= residual(r, r', r'', c, om, g)
//~ sign: 2 * g * c - om -> 2 * g * c + om
//~ half: (4 * c ** 2 * r) -> (2 * c ** 2 * r)

/**
 * @visviva parabola
 * checks return = r''
 */
function solved(r, rDot, c, om, g) {
  return (-(rDot ** 2) * 4 * c ** 2 * r - r * (2 * g * c - om ** 2)) / (1 + 4 * c ** 2 * r ** 2);
}
//= solved(r, r', c, om, g)
//~ sign-in-bracket: 2 * g * c - om -> 2 * g * c + om
//~ lost-speed: (-(rDot ** 2) * 4 * c ** 2 * r - r * -> (-r *
//~ factor: 1 + 4 * c -> 1 + 2 * c
`);

published('J. P. Den Hartog, "Mechanical Vibrations", 4th edition, section 3.2, from memory', 'tuned absorber', `
/**
 * @visviva absorber
 * coordinates x1, x2 [m]               main mass, absorber
 * parameters  M, m [kg] > 0, K, k [N/m] > 0, P0 [N], om [rad/s]
 * T = 1/2*M*x1'^2 + 1/2*m*x2'^2
 * V = 1/2*K*x1^2 + 1/2*k*(x2 - x1)^2
 * Q[x1] = P0*sin(om*t)
 * checks return = [x1'', x2'']
 */
function absorber(t, x1, x2, M, m, K, k, P0, om) {
  return [(P0 * Math.sin(om * t) - (K + k) * x1 + k * x2) / M, (k * (x1 - x2)) / m];
}
//= absorber(t, x1, x2, M, m, K, k, P0, om)
//~ sign: + k * x2 -> - k * x2
//~ lost-stiffness: (K + k) * x1 -> K * x1
//~ swapped-masses: / M, -> / m, && / m] -> / M]
`);

published('H. H. Jeffcott, "The lateral vibration of loaded shafts in the neighbourhood of a whirling speed", Philosophical Magazine 37 (1919), from memory', 'unbalanced rotor', `
/**
 * @visviva jeffcott
 * coordinates x, y [m]
 * parameters  m [kg] > 0, k [N/m] > 0, c [N s/m] >= 0, ecc [m], om [rad/s]
 * point disc: mass m at (x + ecc*cos(om*t), y + ecc*sin(om*t))
 * V = 1/2*k*(x^2 + y^2)
 * D = 1/2*c*(x'^2 + y'^2)
 * checks return = [x'', y'']
 */
function rotor(t, x, y, xDot, yDot, m, k, c, ecc, om) {
  return [
    ecc * om ** 2 * Math.cos(om * t) - (c * xDot + k * x) / m,
    ecc * om ** 2 * Math.sin(om * t) - (c * yDot + k * y) / m,
  ];
}
//= rotor(t, x, y, x', y', m, k, c, ecc, om)
//~ power: ecc * om ** 2 * Math.cos -> ecc * om * Math.cos
//~ wrong-speed: c * yDot -> c * xDot
//~ sign: - (c * xDot + k * x) -> - (c * xDot - k * x)
`);
