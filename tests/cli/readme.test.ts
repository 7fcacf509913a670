import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { Folder } from './support/command';

const readme = readFileSync(fileURLToPath(new URL('../../README.md', import.meta.url)), 'utf8');
const example = /```ts\n(.*?)```/s.exec(readme)![1]!;

describe('the example of the README', () => {
  it('differs where the page says so', () => {
    using f = new Folder({ 'src/crane.ts': example });
    const r = f.run('check');
    expect(r.status).toBe(1);
    const shown = /```\n(harbour-crane .*?)\n\n.*?```/s.exec(readme)![1]!;
    expect(r.out).toContain(shown);
    expect(r.out).toMatch(/src\/crane\.ts:\d+:\d+ {3}sign\n/);
    expect(readme).toContain('1 file, 1 system, 4 claims: 3 hold, 1 differs.');
    expect(r.out).toContain('1 file, 1 system, 4 claims: 3 hold, 1 differs.');
  });

  it('holds with the sign put right', () => {
    using f = new Folder({ 'src/crane.ts': example.replace('(xdd * cos + g * sin)', '-(xdd * cos + g * sin)') });
    const r = f.run('check');
    expect(readme).toContain(r.out.split('\n').slice(0, 2).join('\n'));
    expect(r.status).toBe(0);
  });

  it('names every option of the command', () => {
    using f = new Folder();
    for (const command of ['check', 'derive', 'serve']) {
      const help = f.run(command, '--help').out;
      for (const option of help.match(/--(?!help)[a-z-]+/g)!) expect(readme).toContain(option);
    }
  });
});
