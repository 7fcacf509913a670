import { published } from '../support/published';

published(
  'A. G. Barto, R. S. Sutton, C. W. Anderson, "Neuronlike adaptive elements that can solve difficult learning control problems", IEEE Transactions on Systems, Man, and Cybernetics 13 (1983), appendix, from memory',
  'cart and pole with friction', `
/**
 * @visviva barto
 * coordinates x [m], th [rad]          th from upright, clockwise; the pole is a rod of half length l
 * parameters  mc, m [kg] > 0, l [m] > 0, g [m/s^2] > 0, muc [N], mup [N m s]
 * inputs      F [N]
 * where G = (x + l*sin(th), l*cos(th))
 * T = 1/2*mc*x'^2 + 1/2*m*dot(G', G') + 1/2*(m*l^2/3)*th'^2
 * V = m*g*G.y
 * Q[x] = F - muc*sign(x')
 * Q[th] = -mup*th'
 * checks return = [x'', th'']
 */
function cartPole(th, xDot, thDot, F, { mc, m, l, g, muc, mup }) {
  const s = Math.sin(th), c = Math.cos(th), total = mc + m;
  const thDotDot =
    (g * s + c * ((-F - m * l * thDot ** 2 * s + muc * Math.sign(xDot)) / total) - (mup * thDot) / (m * l)) /
    (l * (4 / 3 - (m * c ** 2) / total));
  const xDotDot = (F + m * l * (thDot ** 2 * s - thDotDot * c) - muc * Math.sign(xDot)) / total;
  return [xDotDot, thDotDot];
}
//= cartPole(th, x', th', F, { mc, m, l, g, muc, mup })
//~ sign-of-friction: + muc * Math.sign(xDot)) -> - muc * Math.sign(xDot))
//~ point-mass: 4 / 3 -> 1
//~ lost-length: (mup * thDot) / (m * l) -> (mup * thDot) / m
//~ friction-without-sign: - muc * Math.sign(xDot)) / total -> - muc) / total
//~ cart-for-pole: (m * c ** 2) -> (mc * c ** 2)
//~ sign-of-reaction: - thDotDot * c -> + thDotDot * c
`);

published('R. V. Florian, "Correct equations for the dynamics of the cart-pole system" (2007), equations (23) and (24), from memory', 'cart and pole without friction', `
/**
 * @visviva florian
 * coordinates x [m], th [rad]          th from upright, clockwise; the pole is a rod of half length l
 * parameters  mc, mp [kg] > 0, l [m] > 0, g [m/s^2] > 0
 * inputs      F [N]
 * T = 1/2*(mc + mp)*x'^2 + mp*l*cos(th)*x'*th' + 1/2*(4/3)*mp*l^2*th'^2
 * V = mp*g*l*cos(th)
 * Q[x] = F
 * checks thAcc = th'', xAcc = x''
 */
function florian(th, thDot, F, mc, mp, l, g) {
  const sin = Math.sin(th);
  const cos = Math.cos(th);
  const thAcc = (g * sin + (cos * (-F - mp * l * thDot * thDot * sin)) / (mc + mp)) / (l * (4 / 3 - (mp * cos * cos) / (mc + mp)));
  const xAcc = (F + mp * l * (thDot * thDot * sin - thAcc * cos)) / (mc + mp);
  return { thAcc, xAcc };
}
//= florian(th, th', F, mc, mp, l, g)
//~ sign-of-force: (-F - mp -> (F - mp
//~ lost-square: mp * l * thDot * thDot * sin)) / (mc -> mp * l * thDot * sin)) / (mc
//~ wrong-mass: (F + mp * l -> (F + mc * l
//~ four-thirds: 4 / 3 -> 3 / 4
`);

published('M. W. Spong, S. Hutchinson, M. Vidyasagar, "Robot Modeling and Control" (2006), section 7.4, planar elbow manipulator, from memory', 'planar elbow manipulator', `
/**
 * @visviva elbow
 * coordinates q1, q2 [rad]             q1 from the horizontal, q2 from the first link
 * parameters  m1, m2 [kg] > 0, l1, lc1, lc2 [m] > 0, I1, I2 [kg m^2] > 0, g [m/s^2] > 0
 * inputs      tau1, tau2 [N m]
 * where C1 = (lc1*cos(q1), lc1*sin(q1))
 * where C2 = (l1*cos(q1) + lc2*cos(q1 + q2), l1*sin(q1) + lc2*sin(q1 + q2))
 * T = 1/2*m1*dot(C1', C1') + 1/2*I1*q1'^2 + 1/2*m2*dot(C2', C2') + 1/2*I2*(q1' + q2')^2
 * V = g*(m1*C1.y + m2*C2.y)
 * torque tau1 on q1
 * torque tau2 on q2
 * reads   q1d = q1', q2d = q2'
 * checks  d11*q1'' + d12*q2'' + c1 + g1 - tau1 = 0, d12*q1'' + d22*q2'' + c2 + g2 - tau2 = 0
 */
function elbow(q1, q2, q1d, q2d, m1, m2, l1, lc1, lc2, I1, I2, g) {
  const d11 = m1 * lc1 ** 2 + m2 * (l1 ** 2 + lc2 ** 2 + 2 * l1 * lc2 * Math.cos(q2)) + I1 + I2;
  const d12 = m2 * (lc2 ** 2 + l1 * lc2 * Math.cos(q2)) + I2;
  const d22 = m2 * lc2 ** 2 + I2;
  const h = -m2 * l1 * lc2 * Math.sin(q2);
  const c1 = h * q2d * q1d + (h * q2d + h * q1d) * q2d;
  const c2 = -h * q1d * q1d;
  const g1 = (m1 * lc1 + m2 * l1) * g * Math.cos(q1) + m2 * lc2 * g * Math.cos(q1 + q2);
  const g2 = m2 * lc2 * g * Math.cos(q1 + q2);
  return { d11, d12, d22, c1, c2, g1, g2 };
}
//= elbow(q1, q2, q1', q2', m1, m2, l1, lc1, lc2, I1, I2, g)
//~ sign-of-h: h = -m2 -> h = m2
//~ lost-inertia: Math.cos(q2)) + I1 + I2 -> Math.cos(q2)) + I1
//~ lost-two: + 2 * l1 * lc2 -> + l1 * lc2
//~ half-coriolis: (h * q2d + h * q1d) * q2d -> h * q2d * q2d
//~ whole-link: m1 * lc1 ** 2 -> m1 * l1 ** 2
//~ relative-angle: g2 = m2 * lc2 * g * Math.cos(q1 + q2) -> g2 = m2 * lc2 * g * Math.cos(q2)
`);

published('R. S. Sutton, A. G. Barto, "Reinforcement Learning: An Introduction" (1998), section 11.3, the acrobot, from memory', 'acrobot', `
/**
 * @visviva acrobot
 * coordinates th1, th2 [rad]           th1 from straight down, th2 from the first link
 * parameters  m1, m2 [kg] > 0, l1, lc1, lc2 [m] > 0, I1, I2 [kg m^2] > 0, g [m/s^2] > 0
 * inputs      tau [N m]
 * where C1 = (lc1*sin(th1), -lc1*cos(th1))
 * where C2 = (l1*sin(th1) + lc2*sin(th1 + th2), -l1*cos(th1) - lc2*cos(th1 + th2))
 * T = 1/2*m1*dot(C1', C1') + 1/2*I1*th1'^2 + 1/2*m2*dot(C2', C2') + 1/2*I2*(th1' + th2')^2
 * V = g*(m1*C1.y + m2*C2.y)
 * torque tau on th2
 * checks ddth1 = th1'', ddth2 = th2''
 */
function acrobot(th1, th2, dth1, dth2, tau, { m1, m2, l1, lc1, lc2, I1, I2, g }) {
  const { sin, cos, PI } = Math;
  const d1 = m1 * lc1 ** 2 + m2 * (l1 ** 2 + lc2 ** 2 + 2 * l1 * lc2 * cos(th2)) + I1 + I2;
  const d2 = m2 * (lc2 ** 2 + l1 * lc2 * cos(th2)) + I2;
  const phi2 = m2 * lc2 * g * cos(th1 + th2 - PI / 2);
  const phi1 =
    -m2 * l1 * lc2 * dth2 ** 2 * sin(th2) -
    2 * m2 * l1 * lc2 * dth2 * dth1 * sin(th2) +
    (m1 * lc1 + m2 * l1) * g * cos(th1 - PI / 2) +
    phi2;
  const ddth2 =
    (tau + (d2 / d1) * phi1 - m2 * l1 * lc2 * dth1 ** 2 * sin(th2) - phi2) / (m2 * lc2 ** 2 + I2 - d2 ** 2 / d1);
  const ddth1 = -(d2 * ddth2 + phi1) / d1;
  return [ddth1, ddth2];
}
//= acrobot(th1, th2, th1', th2', tau, { m1, m2, l1, lc1, lc2, I1, I2, g })
//~ lost-centrifugal: - m2 * l1 * lc2 * dth1 ** 2 * sin(th2) - phi2 -> - phi2
//~ half-coriolis: 2 * m2 * l1 * lc2 * dth2 -> m2 * l1 * lc2 * dth2
//~ quarter-turn: cos(th1 - PI / 2) -> cos(th1)
//~ sign: ddth1 = -(d2 -> ddth1 = (d2
//~ inverted: (d2 / d1) * phi1 -> (d1 / d2) * phi1
`);

published('J. Hauser, S. Sastry, P. Kokotovic, "Nonlinear control via approximate input-output linearization: the ball and beam example", IEEE Transactions on Automatic Control 37 (1992), from memory', 'ball and beam', `
/**
 * @visviva ball-and-beam
 * coordinates r [m], th [rad]
 * parameters  M [kg] > 0, J, Jb [kg m^2] > 0, R [m] > 0, G [m/s^2] > 0
 * inputs      tau [N m]
 * where P = (r*cos(th), r*sin(th))
 * T = 1/2*M*dot(P', P') + 1/2*Jb*(r'/R)^2 + 1/2*(J + Jb)*th'^2
 * V = M*G*P.y
 * torque tau on th
 * checks return[0] = r'', return[1] = th''
 */
function ballAndBeam(r, th, rDot, thDot, tau, { M, J, Jb, R, G }) {
  const B = M / (Jb / R ** 2 + M);
  return [B * (r * thDot ** 2 - G * Math.sin(th)), (tau - 2 * M * r * rDot * thDot - M * G * r * Math.cos(th)) / (M * r ** 2 + J + Jb)];
}
//= ballAndBeam(r, th, r', th', tau, { M, J, Jb, R, G })
//~ power: Jb / R ** 2 -> Jb / R
//~ lost-inertia: + J + Jb) -> + J)
//~ half-coriolis: 2 * M * r * rDot -> M * r * rDot
//~ sign: thDot ** 2 - G -> thDot ** 2 + G
`);

published('M. Hénon, C. Heiles, "The applicability of the third integral of motion: some numerical experiments", The Astronomical Journal 69 (1964), equation (11), from memory', 'motion in a galactic potential', `
/**
 * @visviva galaxy
 * coordinates x, y
 * T = 1/2*(x'^2 + y'^2)
 * V = 1/2*(x^2 + y^2 + 2*x^2*y - 2/3*y^3)
 * checks return = [x'', y'']
 */
const field = (x, y) => [-x - 2 * x * y, -y - x * x + y * y];
//= field(x, y)
//~ sign: + y * y -> - y * y
//~ half: 2 * x * y -> x * y
//~ power: - x * x -> - x
`);

published('V. Szebehely, "Theory of Orbits" (1967), section 1.5, from memory', 'restricted problem of three bodies', `
/**
 * @visviva restricted
 * coordinates x, y
 * parameters  mu [1] in [0.1, 0.5]
 * ranges x in [1.2, 1.8], y in [0.4, 1]
 * where r1 = sqrt((x - mu)^2 + y^2), r2 = sqrt((x + 1 - mu)^2 + y^2)
 * L = 1/2*((x' - y)^2 + (y' + x)^2) + (1 - mu)/r1 + mu/r2
 * checks return = [x'', y'']
 */
function restricted(x, y, xDot, yDot, mu) {
  const r1 = Math.hypot(x - mu, y);
  const r2 = Math.hypot(x + 1 - mu, y);
  const ax = 2 * yDot + x - ((1 - mu) * (x - mu)) / r1 ** 3 - (mu * (x + 1 - mu)) / r2 ** 3;
  const ay = -2 * xDot + y - ((1 - mu) * y) / r1 ** 3 - (mu * y) / r2 ** 3;
  return [ax, ay];
}
//= restricted(x, y, x', y', mu)
//~ sign-of-coriolis: -2 * xDot -> 2 * xDot
//~ swapped-masses: ((1 - mu) * y) -> (mu * y)
//~ power: (mu * y) / r2 ** 3 -> (mu * y) / r2 ** 2
//~ wrong-distance: (mu * (x + 1 - mu)) / r2 -> (mu * (x + 1 - mu)) / r1
//~ lost-centrifugal: yDot + x - -> yDot -
`);
