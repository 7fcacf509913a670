import type { Report } from '@visviva/shared';
import { describe, expect, it } from 'vitest';
import { Folder, RIGHT, rope, WRONG } from './support/command';

const report = (out: string) => JSON.parse(out) as Report;

describe('--baseline', () => {
  it('accepts the findings of today, fails on new ones, and tells those that are gone', () => {
    using f = new Folder({ 'old.ts': rope(WRONG, 'old'), 'right.ts': rope(RIGHT, 'right') });
    const args = ['check', '--baseline', 'known.json'];
    expect(f.run(...args, '--update-baseline').status).toBe(0);
    expect(f.read('known.json')).toContain('"code": "sign"');
    // Moved, it is the same finding.
    f.write('old.ts', `// moved\n${rope(WRONG, 'old')}`);
    const same = f.run(...args);
    expect(same.status).toBe(0);
    expect(same.out).toContain('accepted by the baseline');

    f.write('right.ts', rope(WRONG, 'right'));
    const worse = f.run(...args, '--format', 'json');
    expect(worse.status).toBe(1);
    expect(report(worse.out).summary.accepted).toBe(1);

    f.write('right.ts', rope(RIGHT, 'right'));
    f.write('old.ts', rope(RIGHT, 'old'));
    const better = f.run(...args, '--format', 'json');
    expect(better.status).toBe(0);
    expect(report(better.out).gone).toEqual([expect.objectContaining({ file: 'old.ts', code: 'sign', output: 'return[1]' })]);
    // What was not looked at is not gone.
    expect(report(f.run(...args, 'right.ts', '--format', 'json').out).gone).toBeUndefined();
  });

  it('that cannot be read is an error', () => {
    using f = new Folder({ 'a.ts': rope(RIGHT), 'bad.json': '{', 'other.json': '{"schema":2}' });
    for (const [file, why] of [['none.json', 'there is no such file; --update-baseline makes it'], ['bad.json', 'it is not JSON'], ['other.json', 'it is none that this version reads']]) {
      const r = f.run('check', '--baseline', file!);
      expect(r.status).toBe(2);
      expect(r.log).toContain(why);
    }
  });
});

describe('comments with a reason', () => {
  it('accept a finding, which every format then tells as accepted, in the editor and here', () => {
    const code = rope(WRONG).replace('  return [', '  // visviva: accept sign because the winch turns the other way\n  return [');
    using f = new Folder({ 'a.ts': code });
    const r = f.run('check', '--format', 'sarif=a.sarif', '--format', 'junit=a.xml', '--format', 'text');
    expect(r.status).toBe(0);
    expect(r.out).toContain('accepted: the winch turns the other way');
    expect(f.read('a.sarif')).toMatch(/"kind": "inSource",\s+"justification": "the winch turns the other way"/);
    expect(f.read('a.xml')).toContain('<skipped message="accepted: the winch turns the other way"/>');
  });

  it('are told when nothing needs them, or when they give no reason', () => {
    const code = (comment: string, force = RIGHT) => rope(force).replace('  return [', `  // ${comment}\n  return [`);
    using f = new Folder({ 'a.ts': code('visviva: accept sign because it was so'), 'b.ts': code('visviva: accept sign', WRONG).replaceAll('rope-weight', 'b') });
    const { problems, claims } = report(f.run('check', '--format', 'json').out);
    expect(problems).toEqual([
      expect.objectContaining({ file: 'a.ts', code: 'unused', severity: 'warning' }),
      expect.objectContaining({ file: 'b.ts', code: 'syntax', severity: 'error' }),
    ]);
    expect(claims.flatMap((c) => c.findings).filter((x) => x.accepted)).toEqual([]);
  });
});
