import type { Finding } from '@visviva/shared';
import { checkText } from '../../support/check';

const PENDULUM = `/**
 * @visviva bob
 * coordinates th [rad]   from straight down
 * parameters  m [kg] > 0, l [m] > 0, g [m/s^2] > 0, b [N m s] >= 0
 * inputs      tau [N m]
 * point bob: mass m at (l*sin(th), -l*cos(th))
 * gravity (0, -g)
 * D = 1/2*b*th'^2
 * torque tau on th
 * checks return = th''
 */
`;

/** The bodies of the tests are the last lines of this function, of a damped and driven pendulum. */
export const pendulum = (body: string): string =>
  `${PENDULUM}export function f(th: number, thDot: number, tau: number, m: number, l: number, g: number, b: number): number {
${body}
}
`;

const CART = `/**
 * @visviva cart
 * coordinates x [m], th [rad]   th from straight down
 * parameters  M, m [kg] > 0, l [m] > 0, g [m/s^2] > 0
 * inputs      F [N]
 * point trolley: mass M at (x, 0)
 * point load: mass m at (x + l*sin(th), -l*cos(th))
 * gravity (0, -g)
 * Q[x] = F
 * reads  s = [x, th, x', th']
 * checks return = [x', th', x'', th'']
 */
`;

export const cart = (body: string): string =>
  `${CART}export function rates(s: number[], F: number, p: { M: number; m: number; l: number; g: number }): number[] {
  const [x, th, v, w] = s;
  const { M, m, l, g } = p;
${body}
}
`;

export const RIGHT_CART = `  const sn = Math.sin(th);
  const cs = Math.cos(th);
  const a = (F + m * sn * (l * w * w + g * cs)) / (M + m * sn * sn);
  return [v, w, a, -(a * cs + g * sn) / l];`;

export interface Seen {
  readonly code: string;
  readonly line: number;
  readonly repair: string | undefined;
}

/** Findings of a file, each once, with the line they stand on and what the repair makes of that line. */
export async function faults(source: string, file = 'yard/code.ts'): Promise<Seen[]> {
  const seen = new Map<string, Seen>();
  for (const f of await findings(source, file)) {
    const { line } = f.range.start;
    const repaired = f.repair && applied(source, f.repair.edits).split('\n')[line - 1]!.trim();
    seen.set(`${f.code} ${line}`, { code: f.code, line: line - firstLine(source), repair: repaired });
  }
  return [...seen.values()];
}

export async function findings(source: string, file = 'yard/code.ts'): Promise<Finding[]> {
  return (await checkText(file, source)).claims.flatMap((c) => c.findings);
}

/** Lines of the body count from 1. */
function firstLine(source: string): number {
  return source.slice(0, source.lastIndexOf(' {\n')).split('\n').length;
}

export function applied(text: string, edits: NonNullable<Finding['repair']>['edits']): string {
  const lines = text.split('\n');
  const offset = (p: { readonly line: number; readonly column: number }): number =>
    lines.slice(0, p.line - 1).reduce((t, l) => t + l.length + 1, 0) + p.column - 1;
  return edits
    .map((e) => ({ start: offset(e.range.start), end: offset(e.range.end), text: e.text }))
    .sort((a, b) => b.start - a.start)
    .reduce((t, e) => t.slice(0, e.start) + e.text + t.slice(e.end), text);
}
