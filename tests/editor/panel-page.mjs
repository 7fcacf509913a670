/**
 * The panel's page by itself in a browser, with data from the built server and the colours of three themes: what it shows,
 * how it is used without a mouse, and what axe-core says of it.
 */
import assert from 'node:assert/strict';
import { spawn } from 'node:child_process';
import { mkdirSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { createMessageConnection, StreamMessageReader, StreamMessageWriter } from 'vscode-languageserver-protocol/node';
import { openBrowser } from './browser.mjs';

const require = createRequire(import.meta.url);
const root = fileURLToPath(new URL('../..', import.meta.url));
const artifacts = join(root, '.artifacts', 'panel');

/** Colours as the editor gives them to a page, near those of its own plain themes. */
const themes = {
  light: { kind: 'vscode-light', foreground: '#3b3b3b', background: '#ffffff', border: '#d0d0d0', error: '#b01011', blue: '#1a5fb4', orange: '#a64b00', green: '#2f6f2f', description: '#5f5f5f', link: '#005fb8', button: '#005fb8', onButton: '#ffffff', secondary: '#e5e5e5', focus: '#005fb8' },
  dark: { kind: 'vscode-dark', foreground: '#cccccc', background: '#1f1f1f', border: '#3f3f3f', error: '#f88070', blue: '#5aa7f0', orange: '#e8a05c', green: '#73c991', description: '#9d9d9d', link: '#4daafc', button: '#0067b8', onButton: '#ffffff', secondary: '#313131', focus: '#2488db' },
  contrast: { kind: 'vscode-high-contrast', foreground: '#ffffff', background: '#000000', border: '#6fc3df', error: '#ff9b90', blue: '#7cc0ff', orange: '#ffb35c', green: '#89d185', description: '#ffffff', link: '#21a6ff', button: '#000000', onButton: '#ffffff', secondary: '#000000', focus: '#f38518' },
};

/** @param {import('./results.mjs').Results} results */
export async function runPanelPage(results) {
  mkdirSync(artifacts, { recursive: true });
  const data = await panelData('crane.ts', 'export function rates');
  const right = await panelData('pendulum.js', 'function');
  const browser = await openBrowser();
  try {
    for (const [name, theme] of Object.entries(themes)) {
      await results.check(`panel: all parts, ${name}`, async () => {
        const page = await browser.page.context().newPage();
        await page.setViewportSize({ width: 1180, height: 1250 });
        const failures = [];
        page.on('pageerror', (error) => failures.push(error.message));
        page.on('console', (m) => m.type() === 'error' && failures.push(m.text()));
        await open(page, theme);
        await page.evaluate((d) => window.postMessage({ kind: 'data', data: d }, '*'), data);
        await page.locator('.uplot').nth(2).waitFor({ timeout: 15_000 });
        await page.screenshot({ path: join(artifacts, `panel-${name}.png`), fullPage: true });
        assert.deepEqual(failures, []);
        assert.match(await page.locator('.summary').innerText(), /3 of 4 claims hold, 1 differs/);
        assert.equal(await page.locator('.equation .term.differs').count(), 1);
        assert.ok((await page.locator('.picture .mass').count()) >= 4, 'code and derived are both drawn');
        const found = await violations(page);
        assert.deepEqual(found, []);
        await page.close();
      });
    }

    await results.check('panel: narrow, and right code', async () => {
      const page = await browser.page.context().newPage();
      await page.setViewportSize({ width: 420, height: 900 });
      await open(page, themes.light);
      await page.evaluate((d) => window.postMessage({ kind: 'data', data: d }, '*'), right);
      await page.locator('.uplot').first().waitFor();
      await page.screenshot({ path: join(artifacts, 'panel-narrow.png'), fullPage: true });
      assert.equal(await page.locator('.term.differs').count(), 0);
      assert.equal(await page.evaluate(() => document.documentElement.scrollWidth <= window.innerWidth), true);
      assert.deepEqual(await violations(page), []);
      await page.close();
    });

    await results.check('panel: keys move sliders, and what they move is drawn anew', async () => {
      const page = await browser.page.context().newPage();
      await open(page, themes.dark);
      await page.evaluate((d) => window.postMessage({ kind: 'data', data: d }, '*'), data);
      const slider = page.getByLabel('th', { exact: true });
      await slider.focus();
      const before = await page.locator('.picture svg').getAttribute('aria-label');
      for (let k = 0; k < 12; k++) await page.keyboard.press('ArrowRight');
      await page.waitForFunction((label) => document.querySelector('.picture svg')?.getAttribute('aria-label') !== label, before);
      // Edits that leave the start as it is leave the slider where it was put, and the focus on it.
      const moved = await slider.inputValue();
      await page.evaluate((d) => window.postMessage({ kind: 'data', data: { ...d, version: 2 } }, '*'), data);
      await page.waitForTimeout(100);
      assert.equal(await page.getByLabel('th', { exact: true }).inputValue(), moved);
      assert.equal(await page.evaluate(() => document.activeElement?.id), await page.getByLabel('th', { exact: true }).getAttribute('id'));
      await page.close();
    });

    await results.check('panel: a claim leads to the code, pictures are handed over', async () => {
      const page = await browser.page.context().newPage();
      await open(page, themes.light);
      await page.evaluate((d) => window.postMessage({ kind: 'data', data: d }, '*'), data);
      await page.locator('.claim').last().press('Enter');
      for (const name of ['Save drawing as SVG', 'Save drawing as PNG', 'Save plots as PNG']) await page.getByRole('button', { name }).click();
      await page.waitForFunction(() => window.told.length >= 5);
      const told = await page.evaluate(() => window.told);
      assert.equal(told[0].kind, 'ready');
      assert.equal(told[1].kind, 'reveal');
      const saved = told.filter((t) => t.kind === 'save').map((t) => Buffer.from(t.base64, 'base64'));
      assert.match(saved.find((b) => b[0] === 0x3c).toString('utf8'), /^<svg [^]*<circle/);
      assert.equal(saved.filter((b) => b.subarray(1, 4).toString() === 'PNG').length, 2);
      await page.close();
    });

    await results.check('panel: nothing to show says what to do', async () => {
      const page = await browser.page.context().newPage();
      await open(page, themes.light);
      await page.evaluate(() => window.postMessage({ kind: 'empty', title: 'No declaration here', hint: 'Put the cursor into a function.', action: { label: 'Propose one', command: 'x' } }, '*'));
      await page.getByRole('button', { name: 'Propose one' }).click();
      assert.deepEqual(await page.evaluate(() => window.told.at(-1)), { kind: 'command', command: 'x' });
      assert.deepEqual(await violations(page), []);
      await page.close();
    });
  } finally {
    await browser.close();
  }
}

/** The page as the extension makes it, in a theme. */
async function open(page, t) {
  const variables = {
    foreground: t.foreground, 'panel-border': t.border, contrastBorder: t.border, errorForeground: t.error, 'charts-blue': t.blue, 'charts-orange': t.orange,
    'charts-green': t.green, 'testing-iconPassed': t.green, descriptionForeground: t.description, 'textLink-foreground': t.link, 'button-background': t.button,
    'button-foreground': t.onButton, 'button-secondaryBackground': t.secondary, 'button-secondaryForeground': t.foreground, 'dropdown-background': t.background,
    'dropdown-foreground': t.foreground, focusBorder: t.focus, 'font-family': 'system-ui, sans-serif', 'font-weight': '400', 'editor-font-family': 'monospace',
  };
  const rules = Object.entries(variables).map(([k, v]) => `--vscode-${k}: ${v};`).join('');
  const script = readFileSync(join(root, 'dist', 'panel.js'), 'utf8');
  const sheet = readFileSync(join(root, 'dist', 'panel.css'), 'utf8');
  await page.goto('about:blank');
  await page.setContent(`<!DOCTYPE html><html lang="en"><head><title>Visviva</title><style>:root{${rules}} body{background:${t.background}} ${sheet}</style></head><body class="${t.kind}"><main id="panel"></main></body></html>`);
  await page.evaluate(() => {
    window.told = [];
    window.acquireVsCodeApi = () => ({ postMessage: (m) => window.told.push(m) });
  });
  await page.addScriptTag({ content: script });
}

async function violations(page) {
  await page.addScriptTag({ path: require.resolve('axe-core/axe.min.js') });
  const found = await page.evaluate(async () => (await window.axe.run(document, { rules: { 'page-has-heading-one': { enabled: true } } })).violations);
  return found.map((v) => `${v.id}: ${v.nodes.map((n) => n.html.slice(0, 120)).join(' | ')}`);
}

/** What the built server gives the panel for a place of a file of the test workspace. */
async function panelData(name, before) {
  const child = spawn(process.execPath, [join(root, 'dist', 'server.mjs'), '--stdio'], { stdio: ['pipe', 'pipe', 'inherit'] });
  const connection = createMessageConnection(new StreamMessageReader(child.stdout), new StreamMessageWriter(child.stdin));
  connection.listen();
  const file = join(root, 'tests', 'editor', 'workspace', name);
  const text = readFileSync(file, 'utf8');
  const uri = pathToFileURL(file).href;
  const line = text.slice(0, text.indexOf(before)).split('\n').length - 1;
  await connection.sendRequest('initialize', { processId: process.pid, rootUri: null, capabilities: {} });
  await connection.sendNotification('initialized', {});
  await connection.sendNotification('textDocument/didOpen', { textDocument: { uri, languageId: name.endsWith('.ts') ? 'typescript' : 'javascript', version: 1, text } });
  const data = await connection.sendRequest('visviva/panel', { textDocument: { uri }, position: { line, character: 0 } });
  await connection.sendRequest('shutdown');
  await connection.sendNotification('exit');
  connection.dispose();
  assert.ok(data, `the server has nothing for ${name}`);
  return data;
}
