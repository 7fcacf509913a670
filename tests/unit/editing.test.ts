import type { ReportRange } from '@visviva/shared';
import { describe, expect, test } from 'vitest';
import { createService } from '../../server/src/service';
import type { Service } from '../../server/src/service/api';
import { Budget } from '../../server/src/text/budget';
import { LineIndex } from '../../server/src/text/line-index';
import { checkText, filesOf } from '../support/check';
import { marked } from '../support/marked';

const swing = `/**
 * @visviva swing
 * coordinates th [rad]      th from straight down
 * parameters  m [kg] > 0, l [m] > 0, g [m/s^2] > 0
 * where h = -l*cos(th)
 * T = 1/2*m*l^2*th'^2
 * V = m*g*h
 * reads len = l
 * checks return = th''
 */
function acceleration(th, g, len) {
  const pull = -g * Math.sin(th);
  return pull / len;
}
`;

function serviceOf(...files: readonly (readonly [string, string])[]): Service {
  return createService(filesOf(new Map(files)));
}

/** The labels offered at the mark. */
async function offered(source: string, file = 'a.js'): Promise<string[]> {
  const { text, position } = marked(source);
  return (await serviceOf([file, text]).complete(file, position)).map((c) => c.label);
}

function slice(text: string, { start, end }: ReportRange): string {
  const lines = new LineIndex(text);
  return text.slice(lines.offset(start), lines.offset(end));
}

describe('completion', () => {
  test('statement words at the beginning of a line, with snippets', async () => {
    const { text, position } = marked(swing.replace(' * where', ' * sp‸\n * where'));
    const items = await serviceOf(['a.js', text]).complete('a.js', position);
    const spring = items.find((i) => i.label === 'spring');
    expect(spring?.snippet).toContain('between ${3:A}');
    expect(slice(text, spring!.range)).toBe('sp');
  });

  test('symbols, their derivatives and functions in formulas', async () => {
    const labels = await offered(swing.replace("th'^2", "t‸"));
    expect(labels).toEqual(expect.arrayContaining(['th', "th'", 'm', 'h', 'sin']));
    expect(labels).not.toContain('mass matrix');
    expect(labels).not.toContain('len');
  });

  test('units inside the brackets of a declared name only', async () => {
    expect(await offered(swing.replace('m [kg]', 'm [k‸]'))).toContain('kg');
    expect(await offered(swing.replace('m [kg]', 'm‸ [kg]'))).not.toContain('kg');
  });

  test('names of the code left of `reads` and `checks`, physics right', async () => {
    const left = await offered(swing.replace('reads len = l', 'reads len = l, ‸'));
    expect(left).toEqual(expect.arrayContaining(['th', 'len', 'pull']));
    expect(left).not.toContain('m');
    expect(await offered(swing.replace('reads len = l', 'reads len = ‸'))).toContain('l');
    expect(await offered(swing.replace('checks return', 'checks ‸'))).toContain('return');
    expect(await offered(swing.replace("return = th''", 'return = ‸'))).toEqual(expect.arrayContaining(["th''", 'mass matrix', 'E']));
  });

  test('fields and slots are offered as the code writes them, called functions are not', async () => {
    const source = swing.replace('reads len = l', 'reads ‸').replace('acceleration(th, g, len)', 'acceleration(s, p)').replace('-g * Math.sin(th)', '-p.g * Math.sin(s[0])');
    const labels = await offered(source);
    expect(labels).toEqual(expect.arrayContaining(['s', 'p', 'p.g', 's[0]']));
    expect(labels).not.toContain('Math.sin');
  });

  test('a block that only names its system knows the symbols of the other file', async () => {
    const { text, position } = marked("// @visviva swing\n// checks return = ‸\nfunction f(th) { return 0; }\n");
    const items = await serviceOf(['a.js', text], ['swing.js', swing]).complete('a.js', position);
    expect(items.map((i) => i.label)).toContain("th''");
  });

  test('nothing outside of declarations', async () => {
    expect(await offered(swing.replace('const pull', '‸const pull'))).toEqual([]);
    expect(await offered('/** ‸ */\nfunction f() {}\n')).toEqual([]);
    expect(await offered('/** @v‸ */\nfunction f() {}\n')).toEqual(['@visviva']);
  });
});

test('signature help of functions and statements', async () => {
  const of = async (source: string) => {
    const { text, position } = marked(source);
    return serviceOf(['a.js', text]).signature('a.js', position);
  };
  expect(await of(swing.replace('h = -l*cos(th)', 'h = atan2(l, ‸'))).toMatchObject({ label: 'atan2(y, x)', active: 1 });
  expect(await of(swing.replace('where h', 'point bob: mass ‸\n * where h'))).toMatchObject({ label: 'point name: mass m at (x, y)' });
  expect(await of(swing.replace('const pull', '‸const pull'))).toBeUndefined();
});

describe('where names are declared and used', () => {
  const places = async (source: string) => {
    const { text, position } = marked(source);
    const service = serviceOf(['a.js', text]);
    const found = await service.references('a.js', position, new Budget());
    const definition = await service.definition('a.js', position, new Budget());
    return {
      uses: found?.places.map((p) => `${p.range.start.line}:${slice(text, p.range)}`),
      definition: definition && `${definition.range.start.line}:${slice(text, definition.range)}`,
    };
  };

  test('from the declaration', async () => {
    const { uses, definition } = await places(swing.replace('m*g*h', 'm*g‸*h'));
    expect(uses).toEqual(['4:g', '7:g', '11:g', '12:g']);
    expect(definition).toBe('4:g');
  });

  test('from the code, through `reads`', async () => {
    const { uses, definition } = await places(swing.replace('pull / len', 'pull / le‸n'));
    expect(definition).toBe('4:l');
    expect(uses).toEqual(expect.arrayContaining(['4:l', '5:l', '6:l', '8:l', '13:len']));
  });

  test('a claim leads to the place that makes its output', async () => {
    expect((await places(swing.replace('checks return', 'checks ret‸urn'))).definition).toBe('13:pull / len');
  });

  test('a shorthand', async () => {
    expect((await places(swing.replace('m*g*h', 'm*g*‸h'))).definition).toBe('5:h');
  });

  test('a system in another file', async () => {
    const { text, position } = marked("// @visviva sw‸ing\n// reads len = l\n// checks return = th''\nfunction f(th, g, len) { return -g / len * Math.sin(th); }\n");
    const service = serviceOf(['b.js', text], ['a.js', swing]);
    expect(await service.definition('b.js', position, new Budget())).toMatchObject({ file: 'a.js', range: { start: { line: 2 } } });
  });

  test('a word of no declaration has none', async () => {
    expect(await places(swing.replace('const pull', 'const pu‸ll'))).toEqual({ uses: undefined, definition: undefined });
  });
});

describe('renaming', () => {
  const renamed = async (source: string, name: string): Promise<string> => {
    const { text, position } = marked(source);
    const result = await serviceOf(['a.js', text]).rename('a.js', position, name, new Budget());
    if ('failure' in result) return result.failure;
    const lines = new LineIndex(text);
    const edits = result.edits.map((e) => ({ ...e, at: lines.offset(e.range.start), to: lines.offset(e.range.end) })).sort((a, b) => b.at - a.at);
    return edits.reduce((t, e) => t.slice(0, e.at) + e.text + t.slice(e.to), text);
  };

  test('changes the declaration and the parameter that agreed with it', async () => {
    const text = await renamed(swing.replace('V = m*g*h', 'V = m*g‸*h'), 'grav');
    expect(text).toContain('grav [m/s^2] > 0');
    expect(text).toContain('V = m*grav*h');
    expect(text).toContain('acceleration(th, grav, len)');
    expect(text).toContain('-grav * Math.sin(th)');
    expect((await checkText('a.js', text)).claims.map((c) => c.verdict)).toEqual(['holds']);
  });

  test('binds what it does not rename: a field keeps its name and its meaning', async () => {
    const source = swing.replace('acceleration(th, g, len)', 'acceleration(th, p, len)').replace('-g * Math', '-p.g * Math');
    const text = await renamed(source.replace('V = m*g*h', 'V = m*‸g*h'), 'grav');
    expect(text).toContain('-p.g * Math');
    expect(text).toContain('reads len = l, p.g = grav');
    expect((await checkText('a.js', text)).claims.map((c) => c.verdict)).toEqual(['holds']);
  });

  test('a shorthand of a destructured field is bound too', async () => {
    const source = swing.replace('acceleration(th, g, len) {', 'acceleration(th, p, len) {\n  const { g } = p;');
    const text = await renamed(source.replace('V = m*g*h', 'V = m*‸g*h'), 'grav');
    expect(text).toContain('const { g } = p');
    expect((await checkText('a.js', text)).claims.map((c) => c.verdict)).toEqual(['holds']);
  });

  test('a name without `reads` above gets a line of its own', async () => {
    const source = swing.replace(' * reads len = l\n', '').replaceAll('len', 'p.l').replace('(th, g, p.l)', '(th, g, p)');
    const text = await renamed(source.replace('m*l^2', 'm*‸l^2'), 'rope');
    expect(text).toContain("\n * checks return = th''\n * reads p.l = rope\n */");
    expect((await checkText('a.js', text)).claims.map((c) => c.verdict)).toEqual(['holds']);
  });

  test('refuses what is no name, and names that are taken', async () => {
    expect(await renamed(swing.replace('V = m', 'V = ‸m'), '2x')).toContain('is no name');
    expect(await renamed(swing.replace('V = m', 'V = ‸m'), 'l')).toContain('is declared already');
    expect(await renamed(swing.replace('const pull', 'const p‸ull'), 'x')).toContain('no name of a declaration here');
  });

  test('a system in every file that names it', async () => {
    const { text, position } = marked(swing.replace('@visviva swing', '@visviva sw‸ing'));
    const other = "// @visviva swing\n// reads len = l\n// checks return = th''\nfunction f(th, g, len) { return -g / len * Math.sin(th); }\n";
    const result = await serviceOf(['a.js', text], ['b.js', other]).rename('a.js', position, 'boat', new Budget());
    expect(result).toMatchObject({ edits: [{ file: 'a.js', text: 'boat' }, { file: 'b.js', text: 'boat' }] });
  });
});

test('folding, words and symbols of the project', async () => {
  const service = serviceOf(['a.js', swing], ['b.js', 'const x = 1;']);
  expect(await service.folds('a.js')).toEqual([{ startLine: 2, endLine: 9 }]);
  const tokens = (await service.tokens('a.js')).map((t) => `${slice(swing, t.range)} ${t.kind}`);
  expect(tokens).toEqual(expect.arrayContaining(['@visviva keyword', 'swing system', 'coordinates keyword', 'th coordinate', '[rad] unit', 'g parameter', 'cos function', 'h shorthand', 'len code', 'return code']));
  const symbols = await service.workspaceSymbols('sg');
  expect(symbols.map((s) => s.symbol.name)).toEqual(['swing']);
  expect((await service.workspaceSymbols('th')).map((s) => s.system)).toEqual(['swing']);
});
