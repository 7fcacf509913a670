import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { chromium, type Browser, type Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { Folder, RIGHT, rope, WRONG } from './support/command';

const browserPath = [process.env['CHROMIUM'], '/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome'].find((p) => p && existsSync(p));

describe.skipIf(!browserPath)('--format html, opened in a browser', () => {
  let browser: Browser;
  beforeAll(async () => {
    browser = await chromium.launch({ executablePath: browserPath!, args: ['--no-sandbox'] });
  });
  afterAll(() => browser?.close());

  /** The page, with everything it complained of or asked for. */
  async function open(f: Folder): Promise<{ page: Page; said: string[]; asked: string[] }> {
    expect(f.run('check', '--format', 'html=report.html').log).toBe('');
    const context = await browser.newContext({ viewport: { width: 900, height: 900 }, offline: true });
    const page = await context.newPage();
    const said: string[] = [];
    const asked: string[] = [];
    page.on('console', (m) => said.push(m.text()));
    page.on('pageerror', (e) => said.push(String(e)));
    page.on('request', (r) => asked.push(r.url()));
    await page.goto(pathToFileURL(join(f.path, 'report.html')).href);
    return { page, said, asked };
  }

  it('shows equations, terms, witness and curves from one file, within a strict policy', async () => {
    using f = new Folder({ 'wrong.ts': rope(WRONG, 'wrong'), 'right.ts': rope(RIGHT, 'right') });
    const { page, said, asked } = await open(f);
    expect(said).toEqual([]);
    expect(asked).toHaveLength(1);
    const policy = await page.locator('meta[http-equiv="Content-Security-Policy"]').getAttribute('content');
    expect(policy).toContain("default-src 'none'");
    expect(policy).not.toContain('unsafe');
    expect(await page.locator('script, link, img, [style], [onclick]').count()).toBe(0);
    expect(await page.locator('h2').allTextContents()).toEqual(['right · rates', 'wrong · rates']);

    const card = page.locator('.card', { hasText: 'wrong' });
    const equation = card.getByRole('img', { name: "m*l^2*th'' + m*g*l*sin(th) = 0" });
    const box = (await equation.boundingBox())!;
    expect(box.height).toBeGreaterThan(12);
    // The letters are drawn: the style of the page reaches them, and they have outlines.
    expect(await equation.locator('use').count()).toBeGreaterThan(8);
    const letters = await page.evaluate("[...document.querySelectorAll('.math use')].every((u) => document.querySelector(u.getAttribute('xlink:href')))");
    expect(letters).toBe(true);

    const rows = await card.locator('tr.blamed').allTextContents();
    expect(rows).toHaveLength(1);
    expect(await card.locator('tr.sum', { hasText: 'zero along the motion' }).allTextContents()).toEqual([expect.stringMatching(/zero along the motion0[^0]/)]);
    expect(await card.locator('mark').textContent()).toContain('g / l');

    const plot = card.locator('svg.plot');
    expect(await plot.getAttribute('aria-label')).toContain('The witness is at th =');
    for (const side of ['expected', 'found']) {
      const line = (await plot.locator(`path.${side}`).boundingBox())!;
      expect(line.width).toBeGreaterThan(300);
      expect(line.height).toBeGreaterThan(50);
    }
    const width = (await page.evaluate('document.documentElement.scrollWidth')) as number;
    expect(width).toBeLessThanOrEqual(900);
  });

  it('shows hostile names and code as text', async () => {
    const name = '<script>document.title = 1<&script>.ts';
    using f = new Folder({ [name]: rope(`/* <script>document.title = 2</script><b> */ ${WRONG}`) });
    const { page, said } = await open(f);
    expect(said).toEqual([]);
    expect(await page.title()).toBe('Code against declared physics');
    expect(await page.locator('.place').first().textContent()).toContain('<script>');
    expect(await page.locator('b, script').count()).toBe(0);
  });
});
