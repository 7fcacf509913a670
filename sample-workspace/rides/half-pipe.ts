/** Car in a parabolic trough, taken as a point on the curve y = a x^2, with a level push from the launch rail. */

/**
 * @visviva half-pipe
 * coordinates  x [m]                           from the lowest point
 * parameters   m [kg] > 0, a [1/m] > 0, g [m/s^2] > 0
 * inputs       P [N]                           push of the launch rail, level
 * point car: mass m at (x, a*x^2)
 * gravity (0, -g)
 * force (P, 0) at (x, a*x^2)
 * reads  y = [x, x'], push = P
 * checks return[0] = x', return[1] = x''
 */
export function trough(y: number[], push: number, m: number, a: number, g: number): number[] {
  const [x, v] = y;
  const slope = 2 * a * x;
  const along = push / m - slope * (2 * a * v * v + g);
  return [v, along / (1 + slope ** 2)];
}
