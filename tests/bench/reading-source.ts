/** A made-up plant's code of 2,000 lines in several styles, every fourth function with a declaration. */
export function readingSource(): string {
  const parts = ["import type { Plot } from './plot';", ''];
  for (let k = 0; k < 40; k++) {
    const claimed = k % 4 === 0;
    parts.push(claimed ? CLAIMED[(k / 4) % CLAIMED.length]!(k) : unclaimed(k));
  }
  let text = parts.join('\n');
  for (let k = 0; text.split('\n').length < 2000; k++) text += `\nexport const setting${k} = { gain: ${k + 1}, bias: ${k} / 7, name: 'setting ${k}' };`;
  return text;
}

const HOIST = (name: string): string => ` * @visviva ${name}
 * coordinates x [m], th [rad]
 * parameters  M, m [kg] > 0, l [m] > 0, g [m/s^2] > 0, c [N s/m] >= 0
 * inputs      F [N]
 * point trolley: mass M at (x, 0)
 * point load:    mass m at (x + l*sin(th), -l*cos(th))
 * gravity (0, -g)
 * D = 1/2*c*x'^2
 * Q[x] = F`;

const CLAIMED: readonly ((k: number) => string)[] = [
  (k) => `
/**
${HOIST(`hoist-${k}`)}
 * reads  s = [x, th, x', th'], p.trolley = M, p.load = m
 * checks return = [x', th', x'', th'']
 */
export function hoist${k}(s: number[], p: { trolley: number; load: number; l: number; g: number; c: number }, F: number): number[] {
  const [, th, xd, thd] = s;
  const sin = Math.sin(th);
  const cos = Math.cos(th);
  const { trolley: M, load: m, l, g, c } = p;
  const xdd = (F - c * xd + m * sin * (l * thd * thd + g * cos)) / (M + m * sin * sin);
  const thdd = -(xdd * cos + g * sin) / l;
  return [xd, thd, xdd, thdd];
}`,
  (k) => `
export class Hoist${k} {
  x = 0;
  th = 0.1;
  xDot = 0;
  thDot = 0;
  constructor(private readonly M = 10, private readonly m = 2, private readonly l = 3, private readonly g = 9.81, private readonly c = 1) {}

  private get total(): number {
    return this.M + this.m;
  }

  /**
${HOIST(`class-hoist-${k}`).replaceAll('\n', '\n  ')}
   * checks return.x = x'', return.th = th''
   */
  accelerations(F: number): { x: number; th: number } {
    const A = [[this.total, this.m * this.l * Math.cos(this.th)], [this.m * this.l * Math.cos(this.th), this.m * this.l ** 2]];
    const b = [F - this.c * this.xDot + this.m * this.l * this.thDot ** 2 * Math.sin(this.th), -this.m * this.g * this.l * Math.sin(this.th)];
    const det = A[0][0] * A[1][1] - A[0][1] * A[1][0];
    return { x: (b[0] * A[1][1] - A[0][1] * b[1]) / det, th: (A[0][0] * b[1] - A[1][0] * b[0]) / det };
  }
}`,
  (k) => `
/**
 * @visviva row-${k}
 * coordinates q1, q2, q3, q4, q5 [m]
 * parameters  m [kg] > 0, k [N/m] > 0
 * T = 1/2*m*(q1'^2 + q2'^2 + q3'^2 + q4'^2 + q5'^2)
 * V = 1/2*k*(q1^2 + (q2 - q1)^2 + (q3 - q2)^2 + (q4 - q3)^2 + (q5 - q4)^2)
 * reads  q = [q1, q2, q3, q4, q5]
 * checks return = [q1'', q2'', q3'', q4'', q5'']
 */
export function row${k}(q: number[], m: number, k: number): number[] {
  const a = new Array(q.length).fill(0);
  for (let i = 0; i < q.length; i++) {
    const stretch = q[i] - (i > 0 ? q[i - 1] : 0);
    a[i] -= (k * stretch) / m;
    if (i > 0) a[i - 1] += (k * stretch) / m;
  }
  return a;
}`,
];

function unclaimed(k: number): string {
  const lines = Array.from({ length: 40 }, (_, i) => {
    const kind = (i + k) % 5;
    if (kind === 0) return `  const a${i} = Math.sin(input.angle + ${i}) * input.scale - (${i} / 3) * input.offset;`;
    if (kind === 1) return `  for (let j = 0; j < rows.length; j++) total += rows[j].value * Math.hypot(j, input.scale);`;
    if (kind === 2) return `  if (total > limit${k}) { marks.push({ x: total, y: ${i} }); total -= limit${k}; }`;
    if (kind === 3) return `  settings.colour = total > ${i} ? 'red' : \`hsl(\${${i} * 3}, 50%, 50%)\`;`;
    return `  marks.forEach((mark, n) => { mark.y += rows.map((r) => r.value ** 2).reduce((s, v) => s + v, n); });`;
  });
  return `
let limit${k} = ${k + 1};
export function show${k}(input: { angle: number; scale: number; offset: number }, rows: { value: number }[], settings: Plot): number {
  const marks: { x: number; y: number }[] = [];
  let total = 0;
${lines.join('\n')}
  limit${k} = total;
  return total;
}`;
}
