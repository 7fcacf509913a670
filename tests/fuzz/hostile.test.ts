import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { createService } from '../../server/src/service';
import { Budget } from '../../server/src/text/budget';
import { checkText, filesOf } from '../support/check';

const folder = join(__dirname, '../fixtures/typescript');
const fixtures = readdirSync(folder)
  .filter((f) => /\.(ts|js|mjs|tsx|html)$/.test(f))
  .map((f) => ({ name: f, text: readFileSync(join(folder, f), 'utf8') }));

/** A small seeded generator: the same texts in every run. */
function random(seed: number): () => number {
  let s = seed;
  return () => {
    s = (Math.imul(s, 1103515245) + 12345) & 0x7fffffff;
    return s / 0x7fffffff;
  };
}

const SNIPPETS = ['(', ')', '[', ']', '{', '}', "'", '"', '`', '/*', '*/', '//', '\n', '\r', '\u0000', '@visviva', '/ 0', '= =', '...', '\uD83D\uDE80', 'θ̇', '\uFEFF', '\uD800', ' * checks return =', ' * where a = a', '0/0', '1e999', '**'];

function damage(text: string, next: () => number): string {
  let out = text;
  const times = 1 + Math.floor(next() * 4);
  for (let k = 0; k < times; k++) {
    const at = Math.floor(next() * out.length);
    const kind = next();
    if (kind < 0.4) out = out.slice(0, at) + SNIPPETS[Math.floor(next() * SNIPPETS.length)]! + out.slice(at);
    else if (kind < 0.7) out = out.slice(0, at) + out.slice(at + 1 + Math.floor(next() * 30));
    else if (kind < 0.85) out = out.slice(0, at);
    else {
      const from = Math.floor(next() * out.length);
      out = out.slice(0, at) + out.slice(from, from + 60) + out.slice(at);
    }
  }
  return out;
}

describe('damaged files', () => {
  test('every finding stays inside the file, and nothing throws', async () => {
    const next = random(7);
    for (let round = 0; round < 120; round++) {
      const { name, text } = fixtures[Math.floor(next() * fixtures.length)]!;
      const broken = damage(text, next);
      const service = createService(filesOf(new Map([[name, broken]])));
      const result = await service.check(name, new Budget({ milliseconds: 3000 }), 'verdicts');
      const lines = broken.split(/\r\n|\r|\n/);
      const ranges = [...result.problems.map((p) => p.range), ...result.claims.flatMap((c) => c.findings.map((f) => f.range))];
      for (const r of ranges) {
        expect(r.start.line).toBeGreaterThanOrEqual(1);
        expect(r.end.line).toBeLessThanOrEqual(lines.length);
        expect(r.end.column).toBeLessThanOrEqual((lines[r.end.line - 1] ?? '').length + 1);
      }
      await service.symbols(name);
      await service.hover(name, { line: 3, column: 8 }, new Budget({ milliseconds: 1000 }));
    }
  });
});

const SYSTEM = `/** @visviva osc
 * coordinates x
 * parameters m, k > 0
 * T = 1/2*m*x'^2
 * V = 1/2*k*x^2
 * checks return = x''
 */
`;

async function verdict(code: string, declaration = SYSTEM): Promise<string> {
  const result = await checkText('a.ts', declaration + code);
  return result.claims.map((c) => c.verdict).join() || result.problems.map((p) => p.code).join();
}

describe('hostile files', () => {
  test('500 brackets in code and in a declaration', async () => {
    const deep = `${'('.repeat(500)}-k*x/m${')'.repeat(500)}`;
    expect(await verdict(`function f(x, m, k) { return ${deep}; }`)).toBe('holds');
    const energy = SYSTEM.replace('1/2*k*x^2', `${'('.repeat(500)}1/2*k*x^2${')'.repeat(500)}`);
    expect(await verdict('function f(x, m, k) { return -k*x/m; }', energy)).toBe('holds');
  });

  test('brackets without end, by the hundred thousand', async () => {
    const result = await checkText('a.ts', `${SYSTEM}function f(x, m, k) { return ${'('.repeat(100_000)}`);
    expect(result.claims.every((c) => c.verdict === 'unread')).toBe(true);
    expect(await verdict('function f(x, m, k) { return -k*x/m; }', SYSTEM.replace('1/2*k*x^2', '('.repeat(100_000)))).toMatch(/unread|syntax/);
  });

  test.each(['__proto__', 'constructor', 'toString', 'hasOwnProperty', 'valueOf'])('a symbol called %s', async (name) => {
    const declaration = SYSTEM.replace('m, k > 0', `m, k, ${name} > 0`).replace('1/2*k*x^2', `1/2*k*x^2 + ${name}*x`);
    expect(await verdict(`function f(x, m, k, ${name}) { return -(k*x + ${name})/m; }`, declaration)).toBe('holds');
    expect(await verdict(`function f(x, m, k, p) { return -(k*x + p.${name})/m; }`, declaration)).toMatch(/holds|unread/);
    expect(await verdict(`function f(x, m, k, p) { return p["${name}"](x) / m; }`)).toBe('unread');
  });

  test('division by zero everywhere', async () => {
    expect(await verdict('function f(x, m, k) { return -k*x/m + 0/0; }')).toBe('unread');
    expect(await verdict('function f(x, m, k) { return 1/0; }')).toBe('unread');
    expect(await verdict('function f(x, m, k) { return -k*x/m; }', SYSTEM.replace('1/2*k*x^2', '1/2*k*x^2/0'))).toBe('unread');
    expect(await verdict('function f(x, m, k) { return -k*x/(m - m); }')).toBe('unread');
  });

  test('numbers beyond all bounds', async () => {
    expect(await verdict('function f(x, m, k) { return -k*x/m * 1e400; }')).toMatch(/unread|differs/);
    expect(await verdict('function f(x, m, k) { return -k*x/m + 10**(10**9)*0; }')).toMatch(/unread|holds|differs/);
    expect(await verdict(`function f(x, m, k) { return -k*x/m * ${'9'.repeat(5000)}; }`)).toMatch(/unread|differs/);
  });

  test('endless loops and recursion', async () => {
    expect(await verdict('function f(x, m, k) { let i = 0; while (true) i++; return -k*x/m + 0*i; }')).toMatch(/unread|holds/);
    expect(await verdict('function f(x, m, k) { return f(x, m, k); }')).toBe('unread');
    expect(await verdict('function f(x, m, k) { const g = () => g(); return g() - k*x/m; }')).toBe('unread');
    expect(await verdict('const f = (x, m, k) => { for (let i = 0; i < 1e12; i++) x += 0; return -k*x/m; }')).toMatch(/unread|holds/);
  });

  test('a block without end, at the end of the file', async () => {
    const result = await checkText('a.ts', '/** @visviva osc\n * coordinates x\n * T = 1/2*');
    expect(result.problems.map((p) => p.code)).toContain('syntax');
  });

  test('columns stay right after emoji, Greek, tabs, CRLF and a byte order mark', async () => {
    const code = '\tfunction f(x, m, k) { const θ = "🚀🚀"; return k*x/m; }';
    const result = await checkText('a.ts', `\uFEFF${(SYSTEM + code).replace(/\n/g, '\r\n')}`);
    const finding = result.claims[0]!.findings[0]!;
    expect(result.claims[0]!.verdict).toBe('differs');
    const line = code;
    expect(finding.range.start.line).toBe(8);
    const marked = line.slice(finding.range.start.column - 1, finding.range.end.column - 1);
    expect('k*x/m').toContain(marked);
    expect(marked.length).toBeGreaterThan(0);
  });

  test('a large file of one line, and one of very many', async () => {
    const filler = 'const a = [' + '1,'.repeat(200_000) + '];\n';
    expect(await verdict(`function f(x, m, k) { return -k*x/m; }\n${filler}`)).toBe('holds');
    expect(await verdict(`function f(x, m, k) { return -k*x/m; }\n${'// nothing\n'.repeat(100_000)}`)).toBe('holds');
  });
});
