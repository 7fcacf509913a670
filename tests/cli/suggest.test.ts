import { describe, expect, it } from 'vitest';
import { Folder, RIGHT, rope } from './support/command';

const PLAIN = `export function rates(s: number[], m: number, l: number, g: number) {
  const [th, thDot] = s;
  return [thDot, -(g / l) * Math.sin(th)];
}
`;

describe('visviva suggest', () => {
  it('prints a first declaration as a comment of the language', () => {
    using f = new Folder({ 'swing.ts': PLAIN });
    const r = f.run('suggest', 'swing.ts');
    expect(r.status).toBe(0);
    expect(r.out).toContain('rates, line 1\n\n/**\n * @visviva rates\n');
    expect(r.out).toContain(" * checks       return = [th', th'']\n */");
  });

  it('has nothing to say where all is declared, or under a name that is not there', () => {
    using f = new Folder({ 'rope.ts': rope(RIGHT), 'swing.ts': PLAIN });
    expect(f.run('suggest', 'rope.ts')).toMatchObject({ status: 1, out: '' });
    expect(f.run('suggest', 'swing.ts', '--function', 'other').status).toBe(1);
    expect(f.run('suggest', 'gone.ts').status).toBe(2);
  });
});
