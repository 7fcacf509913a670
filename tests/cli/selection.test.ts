import { execFileSync, spawn } from 'node:child_process';
import type { Report } from '@visviva/shared';
import { describe, expect, it } from 'vitest';
import { command, Folder, RIGHT, rope, WRONG } from './support/command';

const filesOf = (out: string) => [...new Set((JSON.parse(out) as Report).claims.map((c) => c.file))];

/** A working tree with one commit of what is in the folder. */
function committed(f: Folder): (...args: string[]) => void {
  const git = (...args: string[]) => void execFileSync('git', ['-c', 'user.name=Quay', '-c', 'user.email=quay@example.org', ...args], { cwd: f.path });
  git('init', '-q', '-b', 'main');
  git('add', '-A');
  git('commit', '-q', '-m', 'first');
  return git;
}

const helped = (name: string) => `import { pull } from './helper';\n${rope('pull(th, l, g)', name)}`;
const HELPER = `export function pull(th: number, l: number, g: number) {\n  return ${RIGHT};\n}\n`;

describe('--changed-since', () => {
  it('takes changed and new files, and those whose helpers or declarations changed', () => {
    const [declaration] = rope(RIGHT, 'shared').split('export');
    const elsewhere = declaration!.replace(/^\/\*\*\n| \*\/\n?| \* ?/gm, '').replace(/checks.*\n/, '');
    using f = new Folder({
      'helper.ts': HELPER,
      'helped.ts': helped('helped'),
      'alone.ts': rope(RIGHT, 'alone'),
      'shared.visviva': elsewhere,
      'named.ts': `/**\n * @visviva shared\n * checks return = [th', th'']\n */\nexport${rope(RIGHT).split('export')[1]!}`,
    });
    const git = committed(f);
    const since = (revision = 'HEAD') => f.run('check', '--changed-since', revision, '--format', 'json');
    expect((JSON.parse(since().out) as Report).summary).toMatchObject({ files: 0, claims: 0 });
    f.write('helper.ts', HELPER.replace('-(g', '-(2 * g'));
    f.write('new file.ts', rope(RIGHT, 'new'));
    const changed = since();
    expect(filesOf(changed.out)).toEqual(['helped.ts', 'new file.ts']);
    expect(changed.status).toBe(1);
    git('add', '-A');
    git('commit', '-q', '-m', 'second');
    f.write('shared.visviva', elsewhere.replace('mass m at', 'mass 2*m at'));
    expect(filesOf(since().out)).toEqual(['named.ts']);
    expect(filesOf(since('HEAD~1').out)).toEqual(['helped.ts', 'named.ts', 'new file.ts']);
  });

  it('says what is wrong with a revision or with the place', () => {
    using f = new Folder({ 'a.ts': rope(RIGHT) });
    expect(f.run('check', '--changed-since', 'HEAD')).toMatchObject({ status: 2, log: expect.stringContaining('--changed-since HEAD: ') as string });
    committed(f);
    expect(f.run('check', '--changed-since', '--output=x').log).toContain('there is no revision "--output=x" here');
  });
});

describe('what is checked', () => {
  it('can be patterns, less what ignore files leave out', () => {
    using f = new Folder({ 'a/one.ts': rope(RIGHT, 'one'), 'a/b/two.ts': rope(RIGHT, 'two'), 'a/made/three.ts': rope(WRONG), 'a/four.js': '', '.visvivaignore': 'made/\n' });
    expect(filesOf(f.run('check', 'a/**/*.ts', '--format', 'json').out)).toEqual(['a/b/two.ts', 'a/one.ts']);
    expect(f.run('check', 'x/*.ts').log).toContain('No source file matches "x/*.ts"');
  });

  it('can be text on standard input under a name', () => {
    using f = new Folder({ 'helper.ts': HELPER, 'a.ts': rope(RIGHT) });
    const r = f.runTyped(helped('typed'), 'check', '-', '--stdin-filename', 'a.ts');
    expect(r.out).toContain('typed  rates  2 claims hold   a.ts:8');
    expect(f.runTyped(rope(WRONG), 'check', '-', '--stdin-filename', 'a.ts').out).toMatch(/a\.ts:10:.*sign[^]*g \/ l/);
    expect(f.run('check', '-').log).toContain('give "-" as the path and its name by --stdin-filename');
    expect(f.runTyped('', 'check', '-', '--stdin-filename', 'a.txt').log).toContain('files of this kind are not read');
  });

  it('is checked again when it changes, with --watch', async () => {
    using f = new Folder({ 'a.ts': rope(RIGHT) });
    const child = spawn(process.execPath, [command, 'check', '--watch'], { cwd: f.path, env: { ...process.env, NO_COLOR: '1' } });
    let out = '';
    child.stdout.setEncoding('utf8').on('data', (text: string) => (out += text));
    const shown = async (text: RegExp) => {
      for (let i = 0; i < 600 && !text.test(out); i++) await new Promise((done) => setTimeout(done, 100));
      expect(out).toMatch(text);
    };
    try {
      await shown(/2 claims hold/);
      f.write('a.ts', rope(WRONG));
      await shown(/1 of 2 claims differs/);
      const ended = new Promise((done) => child.once('exit', done));
      child.kill('SIGINT');
      expect(await ended).toBe(0);
    } finally {
      child.kill('SIGKILL');
    }
  });
});

describe('--shard and merge', () => {
  it('give together what one run gives', () => {
    const files = Object.fromEntries(Array.from({ length: 7 }, (_, i) => [`r${i}.ts`, `${'// long\n'.repeat(i * 40)}${rope(i % 3 === 1 ? WRONG : RIGHT, `r${i}`)}`]));
    using f = new Folder({ ...files, 'broken.ts': new Uint8Array([64, 0]) });
    const whole = JSON.parse(f.run('check', '--format', 'json').out) as Report;
    const sizes = [1, 2, 3].map((i) => {
      expect(f.run('check', '--shard', `${i}/3`, '--format', `json=part${i}.out`).status).toBeLessThan(2);
      return filesOf(f.read(`part${i}.out`)).length;
    });
    expect(Math.max(...sizes)).toBeLessThanOrEqual(3);
    const merged = f.run('merge', 'part3.out', 'part1.out', 'part2.out', '--format', 'json');
    expect(JSON.parse(merged.out)).toEqual(whole);
    expect(merged.status).toBe(1);
    expect(f.run('merge', 'part1.out', 'part3.out').log).toContain('Of a run in 3 parts, part 2 is missing.');
    expect(f.run('merge', 'r1.ts').log).toContain('it is not JSON');
    expect(f.run('check', '--shard', '4/3').status).toBe(2);
  });
});
