import { expect, test } from 'vitest';
import { scriptsOnly } from '../../server/src/languages/typescript/html';
import { parseTypeScript } from '../../server/src/languages/typescript/parse';
import { showAll } from './languages-typescript-show';

function form(text: string): string {
  const program = parseTypeScript('page.html', text);
  expect(program.errors).toEqual([]);
  return showAll(program.body);
}

test('only scripts remain, at their places', () => {
  const text = '<!doctype html>\r\n<p onclick="f()">θ 🎡</p>\n<script>\nconst g = 9.81;\n</script>\n<style>a{}</style>';
  const code = scriptsOnly(text);
  expect(code).toHaveLength(text.length);
  expect(code.indexOf('const g')).toBe(text.indexOf('const g'));
  expect(code.replace(/\s+/g, ' ').trim()).toBe('const g = 9.81; ;');
  expect(code.split('\n')).toHaveLength(text.split('\n').length);
});

test('scripts share one scope and do not run into each other', () => {
  expect(form('<script>var a = 1</script><div></div><script>(function () {})()</script>')).toBe('var a = 1; <anonymous>() {}();');
});

test.each([
  ['<script type="module">a()</script>', 'a();'],
  ['<SCRIPT TYPE="Text/JavaScript">a()</SCRIPT>', 'a();'],
  ['<script type="text/babel">a(<p/>)</script>', 'a(‹JSX markup›);'],
  ['<script type="application/javascript; charset=utf-8">a()</script>', 'a();'],
  ['<script type="x-shader/x-fragment">void main() {}</script>', ''],
  ['<script type="application/json">{"a": 1}</script>', ''],
  ['<script type="importmap">{"imports": {}}</script>', ''],
  ['<script src="a.js">b()</script>', ''],
  ['<!-- <script>a()</script> -->', ''],
  ['<script><!--\na()\n//-->\n</script>', 'a();'],
  ['<script>\n<!--\na()\n-->\n</script>', 'a();'],
  ['<script>if (a < b) c("</p>")</script>', 'if (a < b) {c("</p>");} else {}'],
  ['<script>a("&amp;")</script>', 'a("&amp;");'],
  ['<script>a()', 'a();'],
  ['<textarea><script>a()</script></textarea>', ''],
  ['<svg><script>a()</script></svg>', 'a();'],
  ['<script></script>', ''],
  ['', ''],
  ['<script', ''],
])('%s', (text, expected) => expect(form(text)).toBe(expected));

test('comments of the page declare nothing, comments of scripts do', () => {
  const text = '<!-- @visviva a -->\n<script>\n// @visviva b\nfunction rates() {}\n</script>\n<p>// @visviva c</p>';
  const { comments, language } = parseTypeScript('dir/page.HTM', text);
  expect(language).toBe('html');
  expect(comments.map((c) => text.slice(c.span.start, c.span.end))).toEqual(['// @visviva b']);
  expect(comments[0]!.subject).toMatchObject({ kind: 'function', path: 'rates' });
});
