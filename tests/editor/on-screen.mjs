/** A person's way through the editor with the packed extension, seen by a browser; pictures go to .artifacts/editor. */
import assert from 'node:assert/strict';
import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { packageExtension } from '../../scripts/package.mjs';
import { openBrowser } from './browser.mjs';
import { startHost } from './host-server.mjs';

const root = fileURLToPath(new URL('../..', import.meta.url));
const artifacts = join(root, '.artifacts', 'editor');

/** @param {import('./results.mjs').Results} results */
export async function runOnScreen(results) {
  mkdirSync(artifacts, { recursive: true });
  const vsix = await packageExtension(artifacts);
  const host = await startHost({ workspace: join(root, 'tests', 'editor', 'workspace'), vsix });
  const browser = await openBrowser();
  const { page } = browser;
  let pictures = 0;
  const picture = (name) => page.screenshot({ path: join(artifacts, `${++pictures}-${name}.png`) });
  const step = (name, run) =>
    results.check(`on screen: ${name}`, async () => {
      try {
        await run();
      } finally {
        await picture(name.replaceAll(/\W+/g, '-'));
      }
    });

  try {
    await page.goto(`${host.url}/?folder=${encodeURIComponent(host.folder)}`);
    await page.locator('.explorer-folders-view .monaco-list-row').first().waitFor({ timeout: 90_000 });

    await step('a wrong sign is underlined', async () => {
      await page.locator('.explorer-folders-view .monaco-list-row', { hasText: 'crane.ts' }).dblclick();
      await page.locator('.squiggly-error').first().waitFor({ timeout: 60_000 });
    });

    await step('the status item counts the claims', async () => {
      const item = page.locator('.statusbar-item', { hasText: 'Visviva' });
      await item.waitFor();
      assert.match((await item.innerText()).replaceAll(/\s+/g, ' '), /Visviva 3 1/);
    });

    await step('the hover over the finding says what differs', async () => {
      await hoverOver(page, page.locator('.squiggly-error').first());
      const hover = page.locator('.monaco-hover:not(.hidden)', { hasText: 'visviva' }).first();
      await hover.waitFor();
      assert.match(await hover.innerText(), /th''.*visviva/s);
    });

    await step('the hover over the declaration shows the system', async () => {
      await page.keyboard.press('Escape');
      await hoverOver(page, page.locator('.view-line', { hasText: '@visviva' }).locator('span span').last());
      const hover = page.locator('.monaco-hover:not(.hidden)', { hasText: 'quay-crane' }).first();
      await hover.waitFor();
    });

    await step('its equations are pictures', async () => {
      await page.locator('.monaco-hover:not(.hidden) img[src^="data:image/svg+xml"]').first().waitFor();
    });

    await step('the lens above the function opens the panel beside the code', async () => {
      await page.keyboard.press('Escape');
      await page.locator('.codelens-decoration a', { hasText: 'show' }).first().click();
      const panel = page.frameLocator('iframe.webview').frameLocator('iframe#active-frame');
      await panel.locator('.equation .term.differs').first().waitFor();
      await panel.locator('.uplot').nth(2).waitFor();
      await page.waitForTimeout(300);
    });

    await step('the panel follows the code', async () => {
      const panel = page.frameLocator('iframe.webview').frameLocator('iframe#active-frame');
      await page.locator('.view-line', { hasText: /const\sath/ }).click();
      await page.keyboard.press('End');
      await page.keyboard.press('ArrowLeft');
      await page.keyboard.type(' * 2');
      await panel.locator('.summary', { hasText: /differ/ }).waitFor();
      await page.keyboard.press('Control+Z');
    });

    await step('the problems panel lists it with its claim', async () => {
      await page.keyboard.press('Escape');
      await page.keyboard.press('Control+Shift+M');
      await page.locator('.markers-panel .monaco-list-row', { hasText: 'visviva' }).first().waitFor();
    });

    await step('correcting the code takes the underline away', async () => {
      await page.keyboard.press('Control+J');
      await page.locator('.view-line', { hasText: /const\sath/ }).click(); // the editor draws blanks as unbreakable ones
      await page.keyboard.press('Home');
      await page.keyboard.press('Shift+End');
      await page.keyboard.type('  const ath = (-ax * cosine - p.g * sine) / p.l;');
      await page.locator('.squiggly-error').first().waitFor({ state: 'detached' });
      await page.locator('.statusbar-item', { hasText: /Visviva\s*4/ }).waitFor();
    });

    await step('no notification pops up on the way', async () => {
      const toasts = await page.locator('.notification-toast').allInnerTexts();
      assert.deepEqual(toasts.filter((text) => /visviva/i.test(text)), []);
    });

    await step('a click on the status item shows the output', async () => {
      await page.locator('.statusbar-item', { hasText: 'Visviva' }).click();
      await page.locator('.panel .composite.title', { hasText: /output/i }).first().waitFor();
    });
  } catch (error) {
    await picture('failure').catch(() => undefined);
    results.fail('on screen', `${error.stack}\n${host.output()}`);
  } finally {
    await browser.close();
    host.stop();
  }
}

/** Puts the mouse on the middle of a thing, from beside it: the editor shows a hover only when the mouse moves. */
async function hoverOver(page, locator) {
  const box = await locator.boundingBox();
  assert.ok(box, 'there is nothing to hover over');
  const [x, y] = [box.x + box.width / 2, box.y + box.height / 2];
  await page.mouse.move(x + 40, y + 60);
  await page.waitForTimeout(300);
  await page.mouse.move(x, y, { steps: 5 });
}
