import { describe, expect, it } from 'vitest';
import { Folder, rope, RIGHT, WRONG } from './support/command';

describe('visviva check --fix', () => {
  it('makes the verified repair and reports on the repaired file', () => {
    using f = new Folder({ 'rope.ts': rope(WRONG) });
    const r = f.run('check', '--fix', 'rope.ts');
    expect(f.read('rope.ts')).toBe(rope(RIGHT));
    expect(r.log).toContain('rope.ts is repaired:');
    expect(r.status).toBe(0);
  });

  it('keeps line ends and the byte order mark', () => {
    using f = new Folder({ 'rope.ts': '\ufeff' + rope(WRONG).replace(/\n/g, '\r\n') });
    f.run('check', '--fix');
    expect(f.read('rope.ts')).toBe('\ufeff' + rope(RIGHT).replace(/\n/g, '\r\n'));
  });

  it('prints a diff and changes nothing with --dry-run', () => {
    using f = new Folder({ 'rope.ts': rope(WRONG) });
    const r = f.run('check', '--fix', '--dry-run');
    expect(r.out).toContain(`-  return [thd, ${WRONG}];\n+  return [thd, ${RIGHT}];\n`);
    expect(f.read('rope.ts')).toBe(rope(WRONG));
    expect(r.status).toBe(1);
  });

  it('wants both options for a diff', () => {
    using f = new Folder({ 'rope.ts': rope(WRONG) });
    expect(f.run('check', '--dry-run').status).toBe(2);
  });
});
