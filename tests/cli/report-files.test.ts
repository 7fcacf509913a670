import { spawnSync } from 'node:child_process';
import { chmodSync, existsSync, mkdirSync, readdirSync, statSync, symlinkSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { command, Folder, RIGHT, rope, WRONG } from './support/command';

const isRoot = process.getuid?.() === 0;

describe('reports in files', () => {
  it('are written beside one another and beside the one on standard output', () => {
    using f = new Folder({ 'rope.ts': rope(WRONG) });
    mkdirSync(join(f.path, 'out'));
    const r = f.run('check', 'rope.ts', '--format', 'sarif=out/a.sarif', '--format', 'junit=out/a.xml', '--format', 'text');
    expect(r.status).toBe(1);
    expect(r.out).toContain('1 of 2 claims differs');
    expect(JSON.parse(f.read('out/a.sarif'))).toHaveProperty('version', '2.1.0');
    expect(f.read('out/a.xml')).toMatch(/^<\?xml/);
    expect(readdirSync(join(f.path, 'out')).sort()).toEqual(['a.sarif', 'a.xml']);
    expect(f.run('check', 'rope.ts', '--format', 'json=out/b.json').out).toBe('');
  });

  it('take the place of an older one, keep its mode, and follow a link', () => {
    using f = new Folder({ 'rope.ts': rope(RIGHT), 'old.json': 'older and much longer than nothing' });
    chmodSync(join(f.path, 'old.json'), 0o640);
    symlinkSync('old.json', join(f.path, 'link.json'));
    expect(f.run('check', 'rope.ts', '--format', 'json=link.json').status).toBe(0);
    expect(JSON.parse(f.read('old.json'))).toHaveProperty('schema', 1);
    expect(statSync(join(f.path, 'old.json')).mode & 0o777).toBe(0o640);
  });

  it('are refused before any work where they could not be written', () => {
    using f = new Folder({ 'rope.ts': rope(RIGHT), 'taken/x': '' });
    const refused = (...formats: string[]) => {
      const r = f.run('check', ...formats.flatMap((x) => ['--format', x]));
      expect(r.status).toBe(2);
      expect(r.out).toBe('');
      return r.log;
    };
    expect(refused('json=missing/a.json')).toMatch(/The json report cannot go to "missing\/a\.json": there is no folder .*missing; make it first\./);
    expect(refused('json=taken')).toContain('it is a folder; name a file in it');
    expect(refused('json=')).toContain('the name of the file is missing');
    expect(refused('json', 'sarif')).toContain('Only one report can go to standard output, not json and sarif');
    expect(refused('json=a', 'sarif=./a')).toContain('cannot both go to');
    expect(refused('poem')).toContain('There is no format "poem". The formats are: text, json, sarif');
    expect(refused(`json=${'x'.repeat(300)}`)).toContain('its name is too long');
    expect(readdirSync(f.path).sort()).toEqual(['rope.ts', 'taken']);
  });

  it('are whole or not there: nothing is left of one on a full disk', () => {
    if (!existsSync('/dev/full')) return;
    using f = new Folder({ 'rope.ts': rope(WRONG) });
    const r = f.run('check', '--format', 'json=/dev/full', '--format', 'text');
    expect(r.status).toBe(2);
    expect(r.out).toContain('1 of 2 claims differs');
    expect(r.log).toContain('The json report was not written to "/dev/full": there is no space left there.');
  });

  it.skipIf(isRoot)('say so where writing is not permitted, and leave the old one', () => {
    using f = new Folder({ 'rope.ts': rope(RIGHT), 'locked/old.json': '{}' });
    chmodSync(join(f.path, 'locked/old.json'), 0o444);
    chmodSync(join(f.path, 'locked'), 0o555);
    const r = f.run('check', 'rope.ts', '--format', 'json=locked/old.json');
    expect(r.status).toBe(2);
    expect(r.log).toContain('writing there is not permitted');
    expect(f.read('locked/old.json')).toBe('{}');
    expect(readdirSync(join(f.path, 'locked'))).toEqual(['old.json']);
    chmodSync(join(f.path, 'locked'), 0o755);
  });

  it.skipIf(process.platform === 'win32')('can go to a pipe', () => {
    using f = new Folder({ 'rope.ts': rope(RIGHT) });
    const line = `"${process.execPath}" "${command}" check --no-cache --format json=/dev/stdout | cat`;
    const r = spawnSync('sh', ['-c', line], { cwd: f.path, encoding: 'utf8' });
    expect(r.stderr).toBe('');
    expect(JSON.parse(r.stdout)).toHaveProperty('schema', 1);
  });
});
