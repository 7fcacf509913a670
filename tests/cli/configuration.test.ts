import { describe, expect, it } from 'vitest';
import { Folder, RIGHT, rope, WRONG } from './support/command';

const shown = (f: Folder, ...args: string[]) => JSON.parse(f.run('check', '--show-config', ...args).out) as { from: string; settings: object; leftOut?: string };

describe('configuration', () => {
  it('comes from the nearest file that has any, as JSON with comments, from package.json or from pyproject.toml', () => {
    using f = new Folder({
      '.git/HEAD': '',
      'package.json': '{ "name": "x", "visviva": { "maxFindings": 1 } }',
      'py/pyproject.toml': '[project]\nname = "x"\n[tool.visviva]\npython = 2\nallowUnread = true\n',
      'py/deep/a.py': '',
      'plain/package.json': '{ "name": "y" }',
      'own/visviva.json': '{\n  // ours\n  "exclude": ["old/"],\n}\n',
      'own/package.json': '{ "visviva": { "maxFindings": 9 } }',
      'own/old/a.ts': '',
    });
    expect(shown(f)).toMatchObject({ from: `${f.path}/package.json`, settings: { maxFindings: 1 } });
    expect(shown(f, 'py/deep/a.py')).toMatchObject({ from: `${f.path}/py/pyproject.toml`, settings: { python: 2, allowUnread: true } });
    expect(shown(f, 'plain')).toMatchObject({ from: `${f.path}/package.json` });
    expect(shown(f, 'own/old/a.ts')).toMatchObject({ settings: { exclude: ['old/'] }, leftOut: expect.stringContaining('"exclude" of') as string });
  });

  it('leaves files out and gives findings their severity', () => {
    using f = new Folder({
      'visviva.json': JSON.stringify({ include: ['src/'], exclude: ['*.gen.ts'], severity: { sign: 'warning' } }),
      'src/rope.ts': rope(WRONG, 'one'),
      'src/rope.gen.ts': rope(WRONG, 'two'),
      'other/rope.ts': rope(WRONG, 'three'),
    });
    const r = f.run('check', '--format', 'github');
    expect(r.out.trimEnd().split('\n')).toEqual([expect.stringMatching(/^::warning file=src\/rope\.ts/)]);
    expect(r.status).toBe(0);
    expect(f.run('check', 'other/rope.ts').out).toMatch(/left out\n {2}other\/rope\.ts: "include" of .*visviva\.json does not take it/);
  });

  it('decides what is a failure, unless the command line says so', () => {
    using f = new Folder({ 'visviva.json': '{ "allowUnread": true, "maxFindings": 1 }', 'a.ts': rope('lookUp(th)', 'a'), 'b.ts': rope(WRONG, 'b') });
    expect(f.run('check').status).toBe(0);
    expect(f.run('check', '--max-findings', '0').status).toBe(1);
    f.write('visviva.json', '{ "requireClaims": true }');
    expect(f.run('check', 'a.ts').status).toBe(1);
    expect(f.run('check', 'a.ts', '--allow-unread').status).toBe(0);
    f.write('c.ts', 'export const c = 1;\n');
    expect(f.run('check', 'c.ts').status).toBe(1);
  });

  it('with a fault ends the run before it begins', () => {
    using f = new Folder({ 'visviva.json': '{ "exlude": [] }', 'a.ts': rope(RIGHT) });
    const r = f.run('check');
    expect(r.status).toBe(2);
    expect(r.out).toBe('');
    expect(r.log).toMatch(/visviva\.json: there is no setting "exlude"; the settings are include, exclude/);
    f.write('visviva.json', '{\n "include": [\n');
    expect(f.run('check').log).toMatch(/visviva\.json: line \d: it is not JSON/);
  });
});
