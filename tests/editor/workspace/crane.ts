interface Crane {
  trolley: number;
  load: number;
  l: number;
  g: number;
}

/**
 * @visviva quay-crane
 * coordinates  x [m], th [rad]            th from straight down, counter-clockwise
 * parameters   M, m [kg] > 0, l [m] > 0, g [m/s^2] > 0
 * inputs       F [N]
 * point trolley: mass M at (x, 0)
 * point load: mass m at (x + l*sin(th), -l*cos(th))
 * gravity (0, -g)
 * Q[x] = F
 * reads        s = [x, th, x', th'], p.trolley = M, p.load = m
 * checks       return = [x', th', x'', th'']
 */
export function rates(s: number[], p: Crane, F: number): number[] {
  const sine = Math.sin(s[1]);
  const cosine = Math.cos(s[1]);
  const moving = p.trolley + p.load * sine * sine;
  const ax = (F + p.load * sine * (p.l * s[3] * s[3] + p.g * cosine)) / moving;
  const ath = (ax * cosine - p.g * sine) / p.l;
  return [s[2], s[3], ax, ath];
}
