/** Slewing jib crane with a load that swings along the jib. Used to size the slew brake. */

export interface Jib {
  readonly slewInertia: number;
  readonly radius: number;
  readonly rope: number;
  readonly load: number;
  readonly g: number;
}

/** [slew angle, sway angle, slew speed, sway speed] */
export type JibState = readonly [number, number, number, number];

/**
 * @visviva slewing-crane
 * coordinates  a, th [rad]                     a of the jib about the tower, th of the rope outward from straight down
 * parameters   J [kg m^2] > 0, R, l [m] > 0, m [kg] > 0, g [m/s^2] > 0
 * inputs       tau [N m]
 * T = 1/2*J*a'^2
 * point load: mass m at ((R + l*sin(th))*cos(a), (R + l*sin(th))*sin(a), -l*cos(th))
 * gravity (0, 0, -g)
 * torque tau on a
 * reads  state = [a, th, a', th']
 * reads  jib.slewInertia = J, jib.radius = R, jib.rope = l, jib.load = m
 * checks return = [a', th', a'', th'']
 */
export function slew(state: JibState, jib: Jib, tau: number): JibState {
  const [, th, slewSpeed, swaySpeed] = state;
  const { slewInertia, radius, rope, load, g } = jib;

  const reach = radius + rope * Math.sin(th);
  const outward = swaySpeed * rope * Math.cos(th);

  const slewAcceleration = (tau - load * reach * outward * slewSpeed) / (slewInertia + load * reach ** 2);
  const swayAcceleration = (slewSpeed ** 2 * reach * Math.cos(th) - g * Math.sin(th)) / rope;

  return [slewSpeed, swaySpeed, slewAcceleration, swayAcceleration];
}
