/** Runs the suite of `suite/` inside the editor's extension host, with the extension from this working tree. */
import { appendFileSync, existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { format } from 'node:util';
import { openBrowser } from './browser.mjs';
import { bundleSuite } from './bundle-suite.mjs';
import { startHost } from './host-server.mjs';

const root = fileURLToPath(new URL('../..', import.meta.url));
const artifacts = join(root, '.artifacts', 'editor');
const log = join(artifacts, 'in-editor.log');
const limit = 300_000;

/** @param {import('./results.mjs').Results} results */
export async function runInEditor(results) {
  mkdirSync(artifacts, { recursive: true });
  const report = join(artifacts, 'in-editor.json');
  rmSync(report, { force: true });
  rmSync(log, { force: true });
  const suite = await bundleSuite(join(artifacts, 'suite'));
  const host = await startHost({
    workspace: join(root, 'tests', 'editor', 'workspace'),
    smoke: true,
    env: { VISVIVA_EDITOR_REPORT: report },
  });
  const browser = await openBrowser();
  try {
    const code = await exitCode(browser.page, host, suite);
    const counted = existsSync(report) ? JSON.parse(readFileSync(report, 'utf8')) : undefined;
    if (!counted) results.fail('in the editor', `The suite left no report (exit code ${code}).\n${host.output()}`);
    for (const { name, failure, milliseconds } of counted?.tests ?? []) {
      if (failure) results.fail(`in the editor: ${name}`, failure);
      else results.pass(`in the editor: ${name}`, milliseconds);
    }
    // The exit code alone proves nothing: it is 0 as well when the extension host dies.
    if (counted && (!counted.complete || counted.tests.length === 0)) {
      results.fail('in the editor', `The suite did not reach its end (exit code ${code}).`);
    } else if (counted && code !== 0 && counted.tests.every((test) => !test.failure)) {
      results.fail('in the editor', `The editor ended with ${code}.`);
    }
  } catch (error) {
    await browser.page.screenshot({ path: join(artifacts, 'in-editor-failure.png') }).catch(() => undefined);
    results.fail('in the editor', `${error.message}\n${host.output()}`);
  } finally {
    await browser.close();
    host.stop();
  }
}

async function exitCode(page, host, suite) {
  const remote = (path) => `vscode-remote://${new URL(host.url).host}${path}`;
  let done;
  const ended = new Promise((resolve, reject) => {
    done = resolve;
    setTimeout(() => reject(new Error(`The suite did not end within ${limit / 1000} s.`)), limit).unref();
  });
  await page.exposeFunction('codeAutomationLog', (_type, args) => {
    appendFileSync(log, `${format(...args)}\n`);
  });
  await page.exposeFunction('codeAutomationExit', (code) => done(code));
  const payload = [
    ['extensionDevelopmentPath', remote(root.replace(/\/$/, ''))],
    ['extensionTestsPath', remote(suite)],
  ];
  const query = `folder=${encodeURIComponent(host.folder)}&payload=${encodeURIComponent(JSON.stringify(payload))}`;
  await page.goto(`${host.url}/?${query}`);
  return ended;
}
