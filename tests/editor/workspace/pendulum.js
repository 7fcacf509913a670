/**
 * @visviva swing-boat
 * coordinates th [rad]                    th from straight down
 * parameters m [kg] > 0, l [m] > 0, g [m/s^2] > 0
 * point boat: mass m at (l*sin(th), -l*cos(th))
 * gravity (0, -g)
 * checks return = th''
 */
export function swing(th, l, g) {
  return (-g / l) * Math.sin(th);
}
