import { spawnSync } from 'node:child_process';
import { readFileSync, symlinkSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { Folder, RIGHT, rope, WRONG } from './support/command';

const modules = fileURLToPath(new URL('../../node_modules', import.meta.url));
const crane = /```ts\n(.*?)```/s.exec(readFileSync(fileURLToPath(new URL('../../README.md', import.meta.url)), 'utf8'))![1]!;

const PYTHON = (force: string) => `from math import cos, sin

def rates(state, p, motor):
    """
    @visviva slew-arm
    coordinates  a [rad]
    parameters   J [kg m^2] > 0, m [kg] > 0, r [m] > 0, g [m/s^2] = 9.81 > 0
    inputs       tau [N m]
    T = 1/2*(J + m*r^2)*a'^2
    V = m*g*r*sin(a)
    Q[a] = tau
    reads  state = [a, a'], p["arm"] = J, p["load"] = m, p["reach"] = r, motor = tau, GRAVITY = g
    checks return = [a', a'']
    """
    a, w = state
    inertia = p["arm"] + p["load"] * p["reach"]**2
    return [w, ${force}]

GRAVITY = 9.81
`;
const GOOD = '(motor - p["load"] * GRAVITY * p["reach"] * cos(a)) / inertia';

function python(...args: string[]) {
  return (folder: string) => spawnSync('python3', ['-B', ...args], { cwd: folder, encoding: 'utf8' });
}
const has = (module: string) => spawnSync('python3', ['-c', `import ${module}`]).status === 0;

describe('visviva derive --as test', () => {
  it('writes a test for vitest that passes with right code and fails with wrong code', () => {
    using f = new Folder({ 'crane.ts': crane.replace('(xdd * cos', '-(xdd * cos'), 'rope.ts': rope(RIGHT), 'package.json': '{ "type": "module" }' });
    symlinkSync(modules, join(f.path, 'node_modules'));
    for (const name of ['crane', 'rope']) {
      const r = f.run('derive', `${name}.ts`, '--as', 'test', '--for', 'vitest');
      expect(r.log).toBe('');
      f.write(`${name}.test.ts`, r.out);
    }
    const run = () => spawnSync(process.execPath, [join(modules, 'vitest/vitest.mjs'), 'run', '--root', f.path, '--config', 'none.config.ts'], { cwd: f.path, encoding: 'utf8', env: { ...process.env, NO_COLOR: '1', VITEST: '' } });
    f.write('none.config.ts', 'export default {};\n');
    const right = run();
    expect(right.stdout + right.stderr).toMatch(/Tests\s+2 passed/);
    f.write('rope.ts', rope(WRONG));
    const wrong = run();
    expect(wrong.status).toBe(1);
    expect(wrong.stdout + wrong.stderr).toMatch(/th'' at /);
  });

  it.skipIf(!has('sys'))('writes tests for Python, with a constant that the declaration gives a value', () => {
    using f = new Folder({ 'arm.py': PYTHON(GOOD) });
    f.write('guard.py', f.run('derive', 'arm.py', '--as', 'test', '--for', 'unittest').out);
    f.write('test_arm.py', f.run('derive', 'arm.py', '--as', 'test', '--for', 'pytest').out);
    const runs = [python('guard.py'), ...(has('pytest') ? [python('-m', 'pytest', '-q', 'test_arm.py')] : [])];
    for (const run of runs) {
      const r = run(f.path);
      expect(r.status, r.stdout + r.stderr).toBe(0);
    }
    f.write('arm.py', PYTHON(GOOD.replace('cos(a)', 'sin(a)')));
    for (const run of runs) expect(run(f.path).status).not.toBe(0);
  });

  it('computes values that agree with doubles to the last digits', () => {
    using f = new Folder({ 'rope.js': rope(RIGHT).replace(/: number/g, '') });
    const { out } = f.run('derive', 'rope.js', '--as', 'test', '--for', 'node');
    const cases = [...out.matchAll(/\/\/ (th\b.*|.*\bth = .*)$[^]*?isClose\(found\[1\], (\S+)\)/gm)];
    expect(cases.length).toBeGreaterThan(2);
    for (const [, state, expected] of cases.slice(0, 3)) {
      const at = (name: string) => Number(new RegExp(`(?:^|, )${name} = ([-\\d.]+)`).exec(state!)![1]);
      const near = -(at('g') / at('l')) * Math.sin(at('th'));
      expect(Math.abs(Number(expected) - near)).toBeLessThanOrEqual(4 * Number.EPSILON * Math.abs(near));
    }
    f.write('rope.test.mjs', out);
    f.write('package.json', '{ "type": "module" }');
    const r = spawnSync(process.execPath, ['--test', 'rope.test.mjs'], { cwd: f.path, encoding: 'utf8', env: { ...process.env, NODE_TEST_CONTEXT: undefined } });
    expect(r.status, r.stdout).toBe(0);
  });

  it('says what it does not cover, and why', () => {
    using f = new Folder({ 'a.ts': rope('lookUp(th)'), 'b.py': PYTHON(GOOD).replace('= 9.81 > 0', '> 0') });
    const unread = f.run('derive', 'a.ts', '--as', 'test', '--for', 'vitest');
    expect(unread).toMatchObject({ status: 1, out: '' });
    expect(unread.log).toContain('rates is not covered: the claim about return[1] is unread');
    expect(f.run('derive', 'b.py', '--as', 'test', '--for', 'pytest').log).toContain('`GRAVITY` is no parameter of it: give g its value');
    expect(f.run('derive', 'b.py', '--as', 'test', '--for', 'vitest').status).toBe(2);
    expect(f.run('derive', 'b.py', '--as', 'test').log).toContain('the runners are vitest, node, pytest, unittest');
  });
});
