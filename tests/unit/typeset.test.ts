import { expect, test } from 'vitest';
import { createService } from '../../server/src/service';
import { Budget } from '../../server/src/text/budget';
import { withPictures } from '../../server/src/lsp/pictures';
import { dataUri, typeset, typesetWithin } from '../../server/src/typeset/typeset';
import { filesOf } from '../support/check';

const long = "m\\,l^{2}\\,\\ddot{\\theta} + m\\,g\\,l\\,\\sin\\left(\\theta\\right) + k\\,\\left(x + l\\,\\sin\\left(\\theta\\right)\\right)\\,l\\,\\cos\\left(\\theta\\right) + c\\,l^{2}\\,\\dot{\\theta} = 0";

test('a formula becomes a picture in the colour of its surroundings, without styles of its own', async () => {
  const picture = await typeset('\\frac{1}{2}\\,m\\,\\dot{x}^{2}');
  expect(picture!.svg).toContain('currentColor');
  expect(picture!.svg).not.toContain('style=');
  expect(picture!.svg).toContain(` width="${picture!.width}" height="${picture!.height}"`);
  expect(atob(dataUri(picture!, '#d4d4d4').split(',')[1]!)).toContain('#d4d4d4');
});

test('what is no TeX has no picture', async () => {
  expect(await typeset('\\nosuchcommand{')).toBeUndefined();
});

test('a long formula is broken before its terms to fit', async () => {
  const whole = (await typeset(long))!;
  expect(whole.width).toBeGreaterThan(300);
  const narrow = (await typesetWithin(long, 300))!;
  expect(narrow.width).toBeLessThanOrEqual(300);
  expect(narrow.height).toBeGreaterThan(1.7 * whole.height);
});

test('what can not be broken to fit is left to the text', async () => {
  expect(await typesetWithin(`\\mathit{${'abcdefgh'.repeat(12)}}`, 300)).toBeUndefined();
});

test('the hover shows equations as pictures no wider than 300, with the text as their description', async () => {
  const text = `/** @visviva swing
 * coordinates th [rad]
 * parameters  m, l, g > 0
 * point bob: mass m at (l*sin(th), -l*cos(th))
 * gravity (0, -g)
 * checks return = th'' */
function f(th, g, l) { return -g / l * Math.sin(th); }
`;
  const service = createService(filesOf(new Map([['a.js', text]])));
  const hover = (await service.hover('a.js', { line: 1, column: 16 }, new Budget()))!;
  const markdown = await withPictures(hover, '#123456');
  expect(markdown).toContain("![m*l^2*th'' + m*g*l*sin(th) = 0](data:image/svg+xml;base64,");
  expect(markdown).not.toContain('```text\nm*l^2');
  for (const [, data] of markdown.matchAll(/base64,([\w+/=]+)\)/g)) {
    const svg = atob(data!);
    expect(svg).toContain('#123456');
    expect(Number(/ width="(\d+)"/.exec(svg)![1])).toBeLessThanOrEqual(300);
  }
});
