import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { parseTypeScript } from '../../server/src/languages/typescript/parse';
import { TypeScriptParser } from '../../server/src/languages/typescript/parser';

/** A file of about `lines` lines: declared systems, classes, literals and comments of every sort. */
function source(lines: number): string {
  const parts: string[] = [];
  for (let i = 0; parts.join('').split('\n').length < lines; i++) {
    parts.push(
      `/**\n * @visviva hoist-${i}\n * coordinates x [m], th [rad]\n * parameters M, m [kg] > 0, l [m] > 0, g [m/s^2] > 0\n` +
        ` * point load: mass m at (x + l*sin(th), -l*cos(th))\n * checks return = [x', th', x'', th'']\n */\n` +
        `export function rates${i}(s: readonly number[], p: Hoist, F: number): number[] {\n  const [x, th, v, w] = s;\n` +
        `  const sn = Math.sin(th), cs = Math.cos(th);\n  const den = p.M + p.m * sn ** 2; // slack\n` +
        `  const a = (F + p.m * sn * (p.l * w * w + p.g * cs)) / den;\n  return [v, w, a, -(a * cs + p.g * sn) / p.l];\n}\n\n` +
        `class Rig${i} extends Base<number> {\n  private m = ${i}.5;\n  step(dt: number): void {\n    // @visviva hoist-${i}\n` +
        `    this.v += dt * \`\${x}\`.length;\n  }\n}\nconst t${i} = { f: /a[/]b/g, g() { return 1 }, [k]: \`a\${\`b\`}\` };\n\n`,
    );
  }
  return parts.join('');
}

const plain = (value: unknown) =>
  JSON.stringify(value, (_key, v: unknown) => (typeof v === 'bigint' ? String(v) : v));

describe('parsing again after an edit', () => {
  test('gives what parsing anew gives, whatever the edits', () => {
    const start = source(800);
    const bits = ['a', '(', ')', '{', '}', '`', '/*', '*/', '//', '\n', '"', '=>', ' + 1', ';', '/** @visviva z */', 'function f() {}', '<', '/', 'class ', ''];
    const edit = fc.record({ at: fc.double({ min: 0, max: 1, noNaN: true }), remove: fc.nat(12), text: fc.constantFrom(...bits) });
    fc.assert(
      fc.property(fc.array(edit, { minLength: 1, maxLength: 5 }), (edits) => {
        const parser = new TypeScriptParser();
        let text = start;
        parser.parse('a.ts', text);
        for (const e of edits) {
          const at = Math.floor(e.at * text.length);
          text = text.slice(0, at) + e.text + text.slice(at + e.remove);
          expect(plain(parser.parse('a.ts', text)) === plain(parseTypeScript('a.ts', text))).toBe(true);
        }
      }),
      { seed: 4, numRuns: 10 },
    );
  });

  test('the same text again, an empty one and one too deep leave nothing behind', () => {
    const parser = new TypeScriptParser();
    const text = source(1200);
    const fresh = plain(parseTypeScript('a.ts', text));
    for (const t of [text, text, '', text, `x = ${'('.repeat(100_000)}`, text]) {
      const program = parser.parse('a.ts', t);
      if (t === text) expect(plain(program) === fresh).toBe(true);
    }
  });

  test('a file of 200 lines is read within 6 ms when warm', () => {
    const parser = new TypeScriptParser();
    const text = source(200);
    const times: number[] = [];
    for (let i = 0; i < 80; i++) {
      const at = text.indexOf('slack');
      const edited = text.slice(0, at) + 'abcdefgh'[i % 8] + text.slice(at);
      const begin = process.cpuUsage();
      expect(parser.parse('a.ts', edited).errors).toEqual([]);
      const used = process.cpuUsage(begin);
      times.push((used.user + used.system) / 1000);
    }
    // Processor time of the cheapest run: what the work costs, whatever else the machine is doing.
    expect(Math.min(...times)).toBeLessThan(6);
  });
});
