import { chmodSync, readdirSync, symlinkSync } from 'node:fs';
import { join } from 'node:path';
import type { Report } from '@visviva/shared';
import { describe, expect, it } from 'vitest';
import { Folder, RIGHT, rope, WRONG } from './support/command';

const jsonOf = (out: string) => JSON.parse(out) as Report;

describe('visviva check', () => {
  it('says in one line that all is well, and ends with 0', () => {
    using f = new Folder({ 'src/rope.ts': rope(RIGHT) });
    const r = f.run('check');
    expect(r.log).toBe('');
    expect(r.out).toBe(
      [
        'rope-weight  rates  2 claims hold   src/rope.ts:7',
        '  holds: identity, failure chance below 1e-15',
        '',
        '1 file, 1 system, 2 claims: all hold.',
        'A claim that holds means that code and declaration agree, not that the model is right or a machine safe.',
        '',
      ].join('\n'),
    );
    expect(r.status).toBe(0);
  });

  it('shows what differs with its place, witness and source line, and ends with 1', () => {
    using f = new Folder({ 'rope.ts': rope(WRONG) });
    const r = f.run('check', 'rope.ts');
    expect(r.status).toBe(1);
    expect(r.out).toContain('rope-weight  rates  1 of 2 claims differs   rope.ts:7');
    expect(r.out).toMatch(/\n {2}rope\.ts:10:\d+ {3}sign\n {2}th'': [^]*the\s+code\s+gives/);
    const [, column] = /rope\.ts:10:(\d+)/.exec(r.out)!;
    // Two columns of the line are its own indentation, which gives way to that of the report.
    const rule = ' '.repeat(6 + Number(column) - 1 - 2);
    expect(r.out).toContain(`      return [thd, (g / l) * Math.sin(th)];\n${rule}‾`);
  });

  it('keeps the rule under the place behind tabs, wide letters and emoji', () => {
    using f = new Folder({ 'rope.ts': rope(`/* 幅🏗️\t */ ${WRONG}`) });
    const lines = f.run('check').out.split('\n');
    const rule = lines.findIndex((l) => l.includes('‾'));
    const source = lines[rule - 1]!;
    const [, place] = /rope\.ts:10:(\d+)/.exec(lines.join('\n'))!;
    const marked = f.read('rope.ts').split('\n')[9]!.slice(Number(place) - 1).slice(0, 5);
    const columns = (s: string) => [...s.replace('\ufe0f', '')].reduce((n, c) => n + (/[幅🏗]/u.test(c) ? 2 : 1), 0);
    expect(lines[rule]!.indexOf('‾')).toBe(columns(source.slice(0, source.indexOf(marked))));
    expect(source).not.toContain('\t');
  });

  it('writes JSON with the documented keys in their order', () => {
    using f = new Folder({ 'b.ts': rope(WRONG, 'second'), 'a.ts': rope(RIGHT, 'first') });
    const r = f.run('check', '--format', 'json');
    const report = jsonOf(r.out);
    expect(Object.keys(report)).toEqual(['schema', 'tool', 'summary', 'claims', 'problems', 'skipped']);
    expect(report.summary).toEqual({ files: 2, systems: 2, claims: 4, holds: 3, differs: 1, unread: 0, problems: 0 });
    expect(report.claims.map((c) => `${c.file} ${c.output}`)).toEqual(['a.ts return[0]', 'a.ts return[1]', 'b.ts return[0]', 'b.ts return[1]']);
    const wrong = report.claims[3]!;
    expect(Object.keys(wrong)).toEqual([
      'file', 'language', 'system', 'function', 'output', 'quantity', 'line', 'verdict', 'evidence', 'witness', 'findings',
    ]);
    expect(wrong).toMatchObject({ language: 'typescript', system: 'second', function: 'rates', quantity: "th''", line: 7, verdict: 'differs' });
    expect(wrong.findings[0]).toMatchObject({ code: 'sign', range: { start: { line: 10 } } });
    expect(f.run('check', '--format', 'json').out).toBe(r.out);
  });

  it('takes one system or one function', () => {
    using f = new Folder({ 'b.ts': rope(WRONG, 'second'), 'a.ts': rope(RIGHT, 'first') });
    expect(f.run('check', '--system', 'first').status).toBe(0);
    expect(f.run('check', '--function', 'rates').status).toBe(1);
    const unknown = f.run('check', '--system', 'third');
    expect(unknown.status).toBe(2);
    expect(unknown.log).toContain('No system "third" is declared in the given paths. Known: first, second.');
    expect(f.run('check', '--function', 'nothing').status).toBe(2);
  });

  it('says clearly when nothing is declared', () => {
    using f = new Folder({ 'a.ts': 'export const a = 1;\n' });
    const r = f.run('check');
    expect(r.out).toBe('Nothing is declared: no `@visviva` declaration in 1 file. Nothing was checked.\n');
    expect(r.status).toBe(0);
    expect(f.run('check', '--require-claims').status).toBe(1);
    using empty = new Folder();
    expect(empty.run('check').status).toBe(0);
  });

  it('ends with 1 for claims that are unread and for wrong declarations', () => {
    using f = new Folder({
      'unread.ts': rope('lookUp(th)'),
      'wrong.ts': rope(RIGHT, 'other').replace('gravity (0, -g)', 'gravity (0, -h)'),
    });
    const unread = f.run('check', 'unread.ts');
    expect(unread.status).toBe(1);
    expect(unread.out).toContain('1 of 2 claims not read');
    expect(unread.out).toContain('lookUp');
    const wrong = f.run('check', 'wrong.ts');
    expect(wrong.status).toBe(1);
    expect(wrong.out).toMatch(/wrong\.ts:6:\d+ {3}undeclared/);
  });

  it('ends with 2 for a path that does not exist and for wrong usage', () => {
    using f = new Folder();
    const missing = f.run('check', 'no-such.ts');
    expect(missing.status).toBe(2);
    expect(missing.out).toBe('');
    expect(missing.log).toContain('There is no file or folder "no-such.ts"');
    expect(f.run('check', '--format', 'poem').status).toBe(2);
    expect(f.run('ckeck').status).toBe(2);
    expect(f.run().status).toBe(2);
    expect(f.run('--help').status).toBe(0);
    expect(f.run('--version').out).toMatch(/^\d+\.\d+\.\d+\n$/);
  });

  it('skips what git ignores, hidden folders, built output and packages', () => {
    using f = new Folder({
      'src/rope.ts': rope(RIGHT),
      'node_modules/x/rope.ts': rope(WRONG),
      'dist/rope.js': rope(WRONG),
      '.cache/rope.ts': rope(WRONG),
      'made/rope.ts': rope(WRONG),
      '.gitignore': 'made/\n',
    });
    const r = f.run('check', '--format', 'json');
    expect(jsonOf(r.out).claims.map((c) => c.file)).toEqual(['src/rope.ts', 'src/rope.ts']);
    expect(f.run('check', 'made/rope.ts').status).toBe(1);
    f.write('src/made/rope.ts', rope(WRONG));
    expect(f.run('check', 'src').out).toContain('1 file, 1 system');
    expect(f.run('check', 'made').status).toBe(1);
  });

  it('notes what it left out and goes on', () => {
    using f = new Folder({
      'src/rope.ts': rope(RIGHT),
      'binary.ts': new Uint8Array([64, 0, 1, 2]),
      'big.ts': `${rope(WRONG)}${'// filler\n'.repeat(1_000_000)}`,
      'notes.txt': 'no code',
    });
    symlinkSync('loop.ts', join(f.path, 'loop.ts'));
    symlinkSync('..', join(f.path, 'src/up'));
    if (process.getuid?.() !== 0) {
      f.write('locked.ts', rope(WRONG));
      chmodSync(join(f.path, 'locked.ts'), 0);
    }
    const before = readdirSync(f.path).sort();
    const r = f.run('check', '.', 'notes.txt', 'src/rope.ts', '--format', 'json');
    const report = jsonOf(r.out);
    const reasons = Object.fromEntries(report.skipped.map((s) => [s.file, s.reason]));
    expect(reasons['binary.ts']).toBe('it is a binary file');
    expect(reasons['big.ts']).toContain('files above 8 MB are not read');
    expect(reasons['notes.txt']).toBe('files of this kind are not read');
    expect(Object.keys(reasons)).toContain('loop.ts');
    expect(report.claims.filter((c) => c.file === 'src/rope.ts')).toHaveLength(2);
    expect(report.summary.claims).toBe(2);
    expect(r.status).toBe(0);
    expect(readdirSync(f.path).sort()).toEqual(before);
    expect(f.run('check').out).toContain('left out\n');
  });

  it('refers to a system that another file of the project declares', () => {
    const [declaration, code] = rope(RIGHT).split('export');
    using f = new Folder({
      'package.json': '{}',
      'physics/rope.visviva': declaration!.replace(/^\/\*\*\n| \*\/\n?| \* ?/gm, '').replace(/checks.*\n/, ''),
      'src/rope.ts': `/**\n * @visviva rope-weight\n * checks return = [th', th'']\n */\nexport${code!}`,
    });
    const r = f.run('check', 'src/rope.ts');
    expect(r.out).toContain('rope-weight  rates  2 claims hold   src/rope.ts:3');
    expect(r.status).toBe(0);
  });

  it('survives hostile input without a crash', () => {
    using f = new Folder({
      'deep.ts': rope('('.repeat(500) + 'th' + ')'.repeat(500)),
      'names.ts': rope('__proto__ + constructor + toString').replaceAll(' g', ' __proto__'),
      'zero.ts': rope('1 / (l - l)'),
      'open.ts': '/** @visviva open\n * coordinates x [m\n * T = ((((',
      'half.ts': rope('-(g / l) * Math.si'),
      'crlf.ts': '\ufeff' + rope(WRONG, 'crlf').replaceAll('\n', '\r\n'),
      'twice.ts': rope(RIGHT, 'twice') + rope(RIGHT, 'twice'),
    });
    const r = f.run('check', '--format', 'json');
    expect(r.log).toBe('');
    expect(r.status).toBe(1);
    const crlf = jsonOf(r.out).claims.find((c) => c.system === 'crlf' && c.verdict === 'differs')!;
    expect(crlf.findings[0]!.range.start.line).toBe(10);
    expect([16, 17]).toContain(crlf.findings[0]!.range.start.column);
    expect(jsonOf(r.out).claims.filter((c) => c.file !== 'crlf.ts' && c.file !== 'twice.ts').every((c) => c.output === 'return[0]' || c.verdict !== 'holds')).toBe(true);
  });
});
