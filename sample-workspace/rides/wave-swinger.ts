/** Wave swinger: chairs on chains under a crown that turns and rises. Only the outward swing of one chair is followed. */

export interface Swinger {
  /** Crown radius at the chain's upper end, m. */
  readonly crown: number;
  readonly chain: number;
  readonly seat: number;
  readonly drag: number;
}

/**
 * @visviva wave-swinger
 * coordinates  th [rad]                        outward from straight down
 * parameters   m [kg] > 0, R, l [m] > 0, g [m/s^2] > 0, b [N m s] >= 0
 * inputs       ps [rad], h [m]                 turn and height of the crown, as driven
 * point chair: mass m at ((R + l*sin(th))*cos(ps), (R + l*sin(th))*sin(ps), h - l*cos(th))
 * gravity (0, 0, -g)
 * D = 1/2*b*th'^2
 * reads  ride.crown = R, ride.chain = l, ride.seat = m, ride.drag = b, angle = th, rate = th'
 * reads  spin = ps', lift = h''
 * checks return = th''
 */
export const swingAcceleration = (ride: Swinger, angle: number, rate: number, spin: number, lift: number, g = 9.81): number => {
  const reach = ride.crown + ride.chain * Math.sin(angle);
  const centrifugal = spin * spin * reach * Math.cos(angle);
  const weight = (g + lift) * Math.sin(angle);
  const drag = (ride.drag * rate) / (ride.seat * ride.chain);
  return (centrifugal - weight - drag) / ride.chain;
};
