/** The source of a checked function: a chain of n point masses on rods, in absolute angles. */
export function chainSource(n: number): string {
  return `/*
@visviva chain
coordinates th[i] [rad] over i in 1..${n}     each from straight down
parameters  m[i] [kg] > 0, l[i] [m] > 0 over i in 1..${n}
parameters  g [m/s^2] > 0
where P[0] = (0, 0)
where P[i] = P[i-1] + (l[i]*sin(th[i]), -l[i]*cos(th[i])) over i in 1..${n}
point bob[i]: mass m[i] at P[i] over i in 1..${n}
gravity (0, -g)
reads  w = th'
checks return = th''
*/
export function chain(th: number[], w: number[], m: number[], l: number[], g: number): number[] {
  const n = th.length;
  const below: number[] = new Array(n).fill(0);
  for (let i = n - 1; i >= 0; i--) below[i] = m[i] + (i + 1 < n ? below[i + 1] : 0);
  const a: number[][] = [];
  const b: number[] = [];
  for (let i = 0; i < n; i++) {
    a.push([]);
    let force = -below[i] * g * l[i] * Math.sin(th[i]);
    for (let j = 0; j < n; j++) {
      const hung = below[Math.max(i, j)];
      a[i].push(hung * l[i] * l[j] * Math.cos(th[i] - th[j]));
      force -= hung * l[i] * l[j] * Math.sin(th[i] - th[j]) * w[j] ** 2;
    }
    b.push(force);
  }
  for (let k = 0; k < n; k++) {
    for (let i = k + 1; i < n; i++) {
      const f = a[i][k] / a[k][k];
      for (let j = k; j < n; j++) a[i][j] -= f * a[k][j];
      b[i] -= f * b[k];
    }
  }
  for (let k = n - 1; k >= 0; k--) {
    for (let j = k + 1; j < n; j++) b[k] -= a[k][j] * b[j];
    b[k] /= a[k][k];
  }
  return b;
}
`;
}
