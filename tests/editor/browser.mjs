/** A headless browser that sees nothing but this machine. */
import { existsSync } from 'node:fs';
import { chromium } from 'playwright-core';

const places = ['/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome', '/opt/google/chrome/chrome'];

export function findBrowser() {
  const found = [process.env['CHROMIUM'], ...places].find((path) => path && existsSync(path));
  if (!found) {
    throw new Error('No Chromium here. Install one (Debian: apt-get install chromium), or set CHROMIUM to its path.');
  }
  return found;
}

export async function openBrowser() {
  const context = await chromium.launchPersistentContext('', {
    executablePath: findBrowser(),
    headless: true,
    viewport: { width: 1280, height: 800 },
    args: ['--no-sandbox', '--disable-dev-shm-usage', '--host-resolver-rules=MAP * ~NOTFOUND, EXCLUDE 127.0.0.1'],
  });
  context.setDefaultTimeout(60_000);
  return { page: context.pages()[0] ?? (await context.newPage()), close: () => context.close() };
}
