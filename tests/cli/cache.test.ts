import { existsSync, readdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { Folder } from './support/command';

const declaration = `/**
 * @visviva swing
 * coordinates th [rad]
 * parameters  l [m] > 0, g [m/s^2] > 0, m [kg] > 0
 * point seat: mass m at (l*sin(th), -l*cos(th))
 * gravity (0, -g)
 * checks return = th''
 */
`;
const main = `import { pull } from './pull';\n${declaration}export function swing(th: number, l: number, g: number): number {\n  return pull(g, l) * Math.sin(th);\n}\n`;
const pull = (sign: string): string => `export function pull(g: number, l: number): number {\n  return ${sign}g / l;\n}\n`;

describe('results of earlier runs', () => {
  it('are taken while nothing has changed that they were made from', () => {
    using f = new Folder({ 'main.ts': main, 'pull.ts': pull('-') });
    const XDG_CACHE_HOME = join(f.path, '.cache');
    const run = (...args: string[]) => f.runWith({ XDG_CACHE_HOME }, 'check', 'main.ts', ...args);
    const first = run();
    expect(first.status).toBe(0);
    expect(run().out).toBe(first.out);
    // An imported file.
    f.write('pull.ts', pull(''));
    expect(run().status).toBe(1);
    f.write('pull.ts', pull('-'));
    expect(run().out).toBe(first.out);
    // Entries that are damaged.
    const folder = join(XDG_CACHE_HOME, 'visviva');
    for (const name of readdirSync(folder)) writeFileSync(join(folder, name), 'damaged');
    expect(run().out).toBe(first.out);
  });

  it('see a file that was not there before, and leave nothing with --no-cache', () => {
    using f = new Folder({ 'main.ts': main });
    const XDG_CACHE_HOME = join(f.path, '.cache');
    const run = (...args: string[]) => f.runWith({ XDG_CACHE_HOME }, 'check', 'main.ts', ...args);
    expect(run('--no-cache').status).toBe(1);
    expect(existsSync(join(XDG_CACHE_HOME, 'visviva'))).toBe(false);
    expect(run().out).toContain('not read');
    f.write('pull.ts', pull('-'));
    expect(run().status).toBe(0);
  });

  it('many files are spread over the processors and reported in their order', () => {
    const files = Object.fromEntries(Array.from({ length: 30 }, (_, k) => [`f${String(k).padStart(2, '0')}.ts`, main.replace('./pull', k % 3 === 0 ? './wrong' : './pull')]));
    using f = new Folder({ ...files, 'pull.ts': pull('-'), 'wrong.ts': pull('') });
    const XDG_CACHE_HOME = join(f.path, '.cache');
    const report = (...args: string[]) => f.runWith({ XDG_CACHE_HOME }, 'check', '--format', 'json', ...args);
    const cold = report();
    const claims = (JSON.parse(cold.out) as { claims: { file: string; verdict: string }[] }).claims;
    expect(claims.map((c) => c.file)).toEqual(Object.keys(files));
    expect(claims.map((c) => c.verdict)).toEqual(Object.keys(files).map((_, k) => (k % 3 === 0 ? 'differs' : 'holds')));
    expect(report().out).toBe(cold.out);
  });
});
