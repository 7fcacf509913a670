/** Trolley and load of the STS-60 container crane, for the operator trainer. */

export interface CraneState {
  /** Trolley along the boom, m. */
  position: number;
  /** Sway of the load, rad. */
  sway: number;
  velocity: number;
  swayRate: number;
}

export interface CraneData {
  trolleyMass: number;
  loadMass: number;
  ropeLength: number;
  /** Rolling resistance of the trolley wheels, N s/m. */
  rolling: number;
}

const GRAVITY = 9.81;

/**
 * Rates of change of the state under the drive force.
 *
 * @visviva ship-to-shore
 * coordinates  x [m], th [rad]                 th from straight down, positive when the load leads
 * parameters   M, m [kg] > 0, l [m] > 0, g [m/s^2] > 0, c [N s/m] >= 0
 * inputs       F [N]
 * point trolley: mass M at (x, 0)
 * point load: mass m at (x + l*sin(th), -l*cos(th))
 * gravity (0, -g)
 * D = 1/2*c*x'^2
 * Q[x] = F
 * reads  s.position = x, s.sway = th, s.velocity = x', s.swayRate = th'
 * reads  crane.trolleyMass = M, crane.loadMass = m, crane.ropeLength = l, crane.rolling = c
 * reads  GRAVITY = g, drive = F
 * checks return.position = x', return.sway = th', return.velocity = x'', return.swayRate = th''
 */
export function rates(s: CraneState, crane: CraneData, drive: number): CraneState {
  const sin = Math.sin(s.sway);
  const cos = Math.cos(s.sway);
  const { trolleyMass, loadMass, ropeLength } = crane;

  // Both equations solved for the accelerations; the mass matrix has this determinant over m l^2.
  const effective = trolleyMass + loadMass * sin ** 2;
  const push = drive - crane.rolling * s.velocity;
  const acceleration = (push + loadMass * sin * (ropeLength * s.swayRate ** 2 + GRAVITY * cos)) / effective;
  const swayAcceleration = -(acceleration * cos + GRAVITY * sin) / ropeLength;

  return { position: s.velocity, sway: s.swayRate, velocity: acceleration, swayRate: swayAcceleration };
}
