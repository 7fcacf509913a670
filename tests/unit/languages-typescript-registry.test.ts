import { expect, test } from 'vitest';
import { languageOf, languages, mayDeclare } from '../../server/src/languages';

test.each([
  ['a.ts', 'typescript'],
  ['C:\\rig\\a.MTS', 'typescript'],
  ['/rig.d/a.cts', 'typescript'],
  ['a.tsx', 'typescript'],
  ['a.b.js', 'javascript'],
  ['a.mjs', 'javascript'],
  ['a.cjs', 'javascript'],
  ['a.jsx', 'javascript'],
  ['a.htm', 'html'],
  ['a.html', 'html'],
  ['harbour.visviva', 'visviva'],
  ['a.txt', undefined],
  ['rig.ts/readme', undefined],
  ['ts', undefined],
  ['', undefined],
])('%s is %s', (file, id) => expect(languageOf(file)?.id).toBe(id));

test('each language names in its programs what the list calls it', async () => {
  for (const language of languages.filter((l) => ['typescript', 'javascript', 'html', 'visviva'].includes(l.id))) {
    const core = await language.load();
    for (const extension of language.extensions) expect(core.parse(`a${extension}`, '').language).toBe(language.id);
  }
});

test('a .visviva file is one declaration comment and no code', async () => {
  const core = await languageOf('a.visviva')!.load();
  const text = '@visviva crane\ncoordinates x [m]\n';
  expect(core.parse('a.visviva', text)).toMatchObject({ body: [], errors: [], comments: [{ span: { start: 0, end: text.length } }] });
  expect(core.parse('a.visviva', 'nothing').comments).toEqual([]);
});

test('a cheap look says whether there may be a declaration', () => {
  expect(mayDeclare('x /* @visviva a */')).toBe(true);
  expect(mayDeclare('x /* @vis viva */')).toBe(false);
  expect(mayDeclare(Buffer.from('θ // @visviva a'))).toBe(true);
  expect(mayDeclare(new Uint8Array([0, 255, 64]))).toBe(false);
  expect(mayDeclare(Buffer.from('@visviva').subarray(1))).toBe(false);
});
