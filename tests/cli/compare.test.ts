import { execFileSync } from 'node:child_process';
import { describe, expect, it } from 'vitest';
import type { Comparison } from '../../server/src/cli/report/changes';
import { Folder } from './support/command';

const trolley = (more = '', force = '(F - c * xd) / M', name = 'trolley') => `/**
 * @visviva ${name}
 * coordinates  x [m]
 * parameters   M [kg] > 0, c [N s/m] >= 0, k [N/m] >= 0
 * inputs       F [N]
 * T = 1/2*M*x'^2
${more} * D = 1/2*c*x'^2
 * Q[x] = F
 * checks return = [x', x'']
 */
export function roll(x: number, xd: number, F: number, M: number, c: number, k: number) {
  return [xd, ${force}];
}
`;

const SPRING = ' * V = k/2*x^2\n';
const WITH_SPRING = '(F - c * xd - k * x) / M';

function repository(files: Record<string, string>): { f: Folder; commit: (message: string) => void } {
  const f = new Folder(files);
  const git = (...args: string[]) => void execFileSync('git', ['-c', 'user.name=Quay', '-c', 'user.email=quay@example.org', ...args], { cwd: f.path });
  git('init', '-q', '-b', 'main');
  const commit = (message: string) => {
    git('add', '-A');
    git('commit', '-q', '-m', message);
  };
  commit('first');
  return { f, commit };
}

describe('visviva compare', () => {
  it('tells between revisions what a declaration gained, in its energies and in its motion', () => {
    const { f, commit } = repository({ 'a file.ts': trolley() });
    using _ = f;
    f.write('a file.ts', trolley(SPRING, WITH_SPRING));
    commit('spring');
    const r = f.run('compare', 'HEAD~1', 'HEAD');
    expect(r.log).toBe('');
    expect(r.out).toContain('trolley  moves differently   a file.ts');
    expect(r.out).toMatch(/V of trolley gained (k\*x\^2\/2|1\/2\*k\*x\^2|k\/2\*x\^2)\n/);
    expect(r.out).toContain("x'' gained -k*x/M\n");
    expect(r.out).toContain('the code of roll changed; its claims have the same verdicts');
    expect(r.status).toBe(1);
    const markdown = f.run('compare', 'HEAD~1', 'HEAD', '--format', 'markdown').out;
    expect(markdown).toContain('#### <code>trolley</code> moves differently');
    // The working tree stands for what is not given.
    f.write('a file.ts', trolley(SPRING, WITH_SPRING.replace('- k', '+ k')));
    const now = JSON.parse(f.run('compare', 'HEAD', '--format', 'json').out) as Comparison;
    expect(now.systems[0]).toMatchObject({ status: 'changed', equations: 'same', quantities: [], claims: [{ function: 'roll', output: 'return[1]', before: 'holds', after: 'differs' }] });
    expect(f.run('compare', 'no-such').log).toContain('"no-such" is no folder, and as a revision: there is no revision');
  });

  it('says so when only the writing changed', () => {
    using f = new Folder({
      'before/a.ts': trolley(SPRING, WITH_SPRING),
      'after/moved/b.ts': trolley(' * V = 1/2*k*x*x + 3\n', '-(c * xd + k * x - F) / M'),
    });
    const r = f.run('compare', 'before', 'after');
    expect(r.out).toContain('trolley');
    expect(r.out).toMatch(/the Lagrangians differ by a constant/);
    f.write('after/moved/b.ts', trolley(' * V = 1/2*k*x*x\n', '-(c * xd + k * x - F) / M'));
    const same = f.run('compare', 'before', 'after');
    expect(same.out).toContain('trolley  is written differently; the physics is as it was   moved/b.ts');
    expect(same.status).toBe(0);
  });

  it('tells of systems that came, went and got another name, and of what names in code mean', () => {
    using f = new Folder({
      'before/a.ts': trolley(),
      'before/b.ts': trolley(SPRING, WITH_SPRING, 'buffer').replace(' * checks', ' * reads x = x\n * checks'),
      'after/a.ts': trolley('', '(F - c * xd) / M', 'wagon'),
      'after/b.ts': trolley(SPRING, WITH_SPRING, 'buffer').replace(' * checks', ' * reads x = -x\n * checks'),
      'after/c.ts': trolley(' * V = k*x\n', '(F - c * xd - k) / M', 'weight'),
    });
    const { systems } = JSON.parse(f.run('compare', 'before', 'after', '--format', 'json').out) as Comparison;
    expect(systems.map((s) => [s.name, s.status, s.before])).toEqual([['buffer', 'changed', undefined], ['wagon', 'renamed', 'trolley'], ['weight', 'added', undefined]]);
    expect(systems[0]!.bindings).toEqual([{ function: 'roll', code: 'x', before: 'x', after: '-x' }]);
    expect(systems[0]!.claims).toEqual([expect.objectContaining({ before: 'holds', after: 'differs' })]);
  });
});
