import { describe, expect, test } from 'vitest';
import type { CommentText } from '../../server/src/notation/tree';
import { findBlocks, parseBlocks, wholeFile } from '../../server/src/notation/index';
import { blocksOf, errors, say, statements } from './notation-show';

/** Names and statements of the blocks of one comment. */
function found(text: string, ...marks: string[]): string[] {
  return blocksOf(text, ...marks).flatMap((b) => [`@${b.name}`, ...b.statements.map(say), ...b.errors.map((e) => `! ${e.message}`)]);
}

const EXPECTED = ['@crane', 'coordinates x [m]', "T = 1/2*m*x'^2 + a*b"];

describe('comment marks', () => {
  test.each([
    ['block with stars', "/**\n * @visviva crane\n * coordinates x [m]\n * T = 1/2*m*x'^2\n *   + a*b\n */", ['*']],
    ['block without stars', "/*\n @visviva crane\n coordinates x [m]\n T = 1/2*m*x'^2\n   + a*b\n*/", ['*']],
    ['block with a product that goes on', "/*\n @visviva crane\n coordinates x [m]\n T = 1/2*m*x'^2 + a\n   * b\n*/", ['*']],
    ['block that begins at once', "/** @visviva crane\n * coordinates x [m]\n * T = 1/2*m*x'^2\n *   + a*b */", ['*']],
    ['line comments', "// @visviva crane\n// coordinates x [m]\n// T = 1/2*m*x'^2\n//   + a*b", ['//']],
    ['documentation lines', "/// @visviva crane\n/// coordinates x [m]\n/// T = 1/2*m*x'^2\n///   + a*b", ['//']],
    ['hash', "# @visviva crane\n# coordinates x [m]\n#\n# T = 1/2*m*x'^2\n#   + a*b", ['#']],
    ['hashes', "## @visviva crane\n## coordinates x [m]\n## T = 1/2*m*x'^2\n##   + a*b", ['#']],
    ['percent', "% @visviva crane\n% coordinates x [m]\n% T = 1/2*m*x'^2\n%   + a*b", ['%']],
    ['exclamation', "!> @visviva crane\n!! coordinates x [m]\n!! T = 1/2*m*x'^2\n!!   + a*b", ['!']],
    ['docstring', "\"\"\"Rates.\n\n    @visviva crane\n    coordinates x [m]\n    T = 1/2*m*x'^2\n      + a*b\n    \"\"\"", []],
    ['docstring that begins at once', "r'''@visviva crane\n    coordinates x [m]\n    T = 1/2*m*x'^2\n      + a*b'''", []],
    ['Julia block', "#=\n@visviva crane\ncoordinates x [m]\nT = 1/2*m*x'^2\n  + a*b\n=#", ['#']],
    ['MATLAB block', "%{\n@visviva crane\ncoordinates x [m]\nT = 1/2*m*x'^2\n  + a*b\n%}", ['%']],
    ['indented lines', "    // @visviva crane\n    // coordinates x [m]\n    // T = 1/2*m*x'^2\n    //   + a*b", ['//']],
    ['tabs', "\t * @visviva crane\n\t *\tcoordinates x [m]\n\t *\tT = 1/2*m*x'^2\n\t *\t\t+ a*b", ['*']],
    ['CRLF', "/**\r\n * @visviva crane\r\n * coordinates x [m]\r\n * T = 1/2*m*x'^2\r\n *   + a*b\r\n */", ['*']],
    ['a Markdown fence', "/// @visviva crane\n/// ```text\n/// coordinates x [m]\n/// T = 1/2*m*x'^2\n///   + a*b\n/// ```", ['//']],
    ['prose before and after', "/**\n * Rates of it. 😀\n * @visviva crane\n * coordinates x [m]\n * T = 1/2*m*x'^2\n *   + a*b\n *\n * See the drawing.\n */", ['*']],
    ['another tag', "/**\n * @visviva crane\n * coordinates x [m]\n * T = 1/2*m*x'^2\n *   + a*b\n * @param x = where it is\n */", ['*']],
    ['one line', "/** @visviva crane coordinates x [m] */\n", ['*']],
  ])('%s', (name, text, marks) => expect(found(text, ...marks)).toEqual(name === 'one line' ? EXPECTED.slice(0, 2) : EXPECTED));

  test('a comment inside a document', () => {
    const text = 'let a = 1; // 😀\n/** @visviva crane\n * T = a*b\n */\nlet T = 3;';
    const comment: CommentText = { span: { start: text.indexOf('/**'), end: text.indexOf('*/') + 2 }, lineMarks: ['*'] };
    const b = findBlocks(text, comment)[0]!;
    expect([b.span, b.nameSpan, b.statements[0]!.span].map((p) => text.slice(p.start, p.end))).toEqual(['@visviva crane\n * T = a*b', 'crane', 'T = a*b']);
  });
  test('several in one comment', () => expect(found('# @visviva a\n# T = 1\n# @visviva b\n# V = 2', '#')).toEqual(['@a', 'T = 1', '@b', 'V = 2']));
  test('none', () => expect(found('/** see @visviva docs */', '*')).toEqual([]));
  test('remark lines in a file of its own', () => {
    const text = '# a remark\n@visviva a\n# checks x = y\nT = 1\n// more\nV = 2\n';
    expect(parseBlocks(text, [wholeFile(text)])[0]!.statements.map(say)).toEqual(['T = 1', 'V = 2']);
  });
});

describe('names', () => {
  test.each([
    ['harbour-crane.v2_b', 'harbour-crane.v2_b'],
    ['Kran_é', 'Kran_é'],
    ['crane:', 'crane'],
    ['crane   the big one', 'crane'],
  ])('%s', (typed, name) => expect(found(`@visviva ${typed}\nT = 1`)).toEqual([`@${name}`, 'T = 1']));
  test.each([
    ['@visviva\nT = 1', 'the name of the system is missing'],
    ['@visviva a/b\nT = 1', '`a/b` is no name for a system'],
    ['@visviva my crane\nT = 1', 'the name of a system is one word'],
    ['@visiva crane\nT = 1', '`@visiva`: the tag is spelt `@visviva`'],
    ['@Visviva crane\nT = 1', 'the tag is spelt `@visviva`'],
    ['@visviva crane', 'nothing is declared here'],
  ])('%j', (text, message) => expect(found(text).join('\n')).toContain(message));
});

describe('where a declaration ends', () => {
  test.each([
    ['prose', ['T = 1', 'The rest is prose.', 'V = 2'], ['T = 1'], 'the declaration ended at line 2; this line is not part of it'],
    ['prose and claims', ['T = 1', 'The crane.', "checks a = x''"], ['T = 1'], 'this line is not part of it'],
    ['a sentence that begins like a statement', ['T = 1', 'where the angle is small'], ['T = 1'], ''],
    ['point as a word', ['T = 1', 'point masses are assumed'], ['T = 1'], ''],
    ['parameters as a word', ['T = 1', 'parameters are given in SI units'], ['T = 1'], ''],
    ['numpy sections', ['T = 1', '', 'Parameters', '----------', 'x : float'], ['T = 1'], ''],
    ['google sections', ['T = 1', '', 'Parameters:', '  x: float'], ['T = 1'], ''],
    ['returns', ['T = 1', 'Returns', '-------', 'array'], ['T = 1'], ''],
    ['blank lines', ['T = 1', '', '', 'V = 2'], ['T = 1', 'V = 2'], ''],
    ['a misspelt word', ['cordinates x [m]', 'V = 2'], ['coordinates x [m]', 'V = 2'], 'unknown statement `cordinates`: did you mean `coordinates`?'],
    ['another case', ['Parameters m [kg]', 'V = 2'], ['parameters m [kg]', 'V = 2'], 'did you mean `parameters`?'],
    ['singular', ['check a = x', 'read b = y'], ['checks a = x', 'reads b = y'], 'did you mean `checks`?'],
    ['one of a kind', ['coordinate x [m]', 'parameter m [kg] > 0', 'input F'], ['coordinates x [m]', 'parameters m [kg] > 0', 'inputs F'], ''],
    ['a colon after the word', ['coordinates: x, y [m]', 'parameters: m > 0', "checks: a = x''"], ['coordinates x [m]; y [m]', 'parameters m > 0', "checks a = x''"], ''],
    ['a colon, and one item to a line below', ['coordinates:', '  x [m]', '  y [m]', 'T = 1'], ['coordinates x [m]; y [m]', 'T = 1'], ''],
    ['a section with a colon', ['T = 1', 'parameters: what the crane weighs'], ['T = 1'], ''],
    ['one coordinate in prose', ['T = 1', 'coordinate x is measured from the wall'], ['T = 1'], ''],
    ['U', ['U = m*g*y', 'T = 1'], ['T = 1'], 'unknown statement `U`: energies are T, V, L or D; for a shorthand write `where U = ...`'],
    ['Q_x', ['Q_x = F', 'T = 1'], ['T = 1'], 'a generalized force is written `Q[x] = ...`'],
    ['U over lines', ['U = a +', '  b', 'T = 1'], ['T = 1'], 'unknown statement `U`'],
    ['a statement after an open bracket', ['T = (a +', 'V = 2'], ['T = a + ?', 'V = 2'], 'this bracket is not closed'],
    ['a variable named like a statement', ['T = a', '  + force*x'], ['T = a + force*x'], ''],
  ])('%s', (_, lines, said, message) => {
    expect(statements(...lines)).toEqual(said);
    expect(errors(...lines).join('\n')).toContain(message);
    if (message === '') expect(errors(...lines)).toEqual([]);
  });

  test('an unclosed comment', () => expect(found('/**\n * @visviva a\n * T = 1', '*')).toContain('! this comment is not closed: `*/` is missing'));
  test('an unclosed docstring', () => expect(found('"""\n@visviva a\nT = 1')).toContain('! this comment is not closed: `"""` is missing'));
  test('an unclosed bracket at the end', () => expect(found('@visviva a\nT = sin(')[2]).toContain('this bracket is not closed'));
});
