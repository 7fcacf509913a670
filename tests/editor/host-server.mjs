/** Starts and ends the editor host, each time with fresh folders of its own. */
import { execFileSync, spawn } from 'node:child_process';
import { cpSync, mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { editorHost } from './host/install.mjs';

const startLimit = 60_000;

const settings = {
  'chat.agentHost.enabled': false,
  'chat.disableAIFeatures': true,
  'editor.minimap.enabled': false,
  'extensions.autoCheckUpdates': false,
  'extensions.autoUpdate': false,
  'files.autoSave': 'off',
  'security.workspace.trust.enabled': false,
  'telemetry.telemetryLevel': 'off',
  'update.mode': 'none',
  'workbench.secondarySideBar.defaultVisibility': 'hidden',
  'workbench.startupEditor': 'none',
  'workbench.tips.enabled': false,
};

/**
 * @param {{ workspace: string, env?: Record<string, string>, smoke?: boolean, vsix?: string }} options smoke: lets the
 *   editor run a test suite, and hides notifications and dialogs. vsix: an extension to install first.
 */
export async function startHost({ workspace, env = {}, smoke = false, vsix }) {
  const home = mkdtempSync(join(tmpdir(), 'visviva-editor-'));
  const folder = join(home, 'workspace');
  const data = join(home, 'data');
  const extensions = join(home, 'extensions');
  cpSync(workspace, folder, { recursive: true });
  mkdirSync(join(data, 'data', 'User'), { recursive: true });
  mkdirSync(extensions);
  writeFileSync(join(data, 'data', 'User', 'settings.json'), JSON.stringify(settings));
  const environment = { ...process.env, HOME: home, EXTENSIONS_GALLERY: '{}', ...env };
  if (vsix) {
    execFileSync(
      editorHost.node,
      [editorHost.server, '--install-extension', vsix, '--extensions-dir', extensions, '--server-data-dir', data],
      { env: environment, stdio: ['ignore', 'pipe', 'inherit'], timeout: startLimit },
    );
  }

  const port = await freePort();
  const child = spawn(
    editorHost.node,
    [
      editorHost.server,
      '--host', '127.0.0.1',
      '--port', String(port),
      '--without-connection-token',
      '--accept-server-license-terms',
      '--disable-telemetry',
      '--disable-workspace-trust',
      '--server-data-dir', data,
      '--extensions-dir', extensions,
      ...(smoke ? ['--enable-smoke-test-driver'] : []),
    ],
    { env: environment, detached: true, stdio: ['ignore', 'pipe', 'pipe'] },
  );
  let output = '';
  const stop = () => {
    try {
      process.kill(-child.pid);
    } catch {
      // It has ended by itself.
    }
    try {
      rmSync(home, { recursive: true, force: true, maxRetries: 5, retryDelay: 200 });
    } catch {
      // A leftover in the temporary folder harms nobody.
    }
  };
  try {
    await new Promise((resolve, reject) => {
      const timer = setTimeout(() => reject(new Error('The editor host did not start in time.')), startLimit);
      const look = (chunk) => {
        output += chunk;
        if (output.includes('Extension host agent listening')) {
          clearTimeout(timer);
          resolve();
        }
      };
      child.stdout.on('data', look);
      child.stderr.on('data', look);
      child.on('exit', (code) => {
        clearTimeout(timer);
        reject(new Error(`The editor host ended with ${code}.`));
      });
    });
  } catch (error) {
    stop();
    throw new Error(`${error.message}\n${output}`, { cause: error });
  }
  return { url: `http://127.0.0.1:${port}`, folder, home, data, stop, output: () => output };
}

function freePort() {
  return new Promise((resolve, reject) => {
    const server = createServer();
    server.on('error', reject);
    server.listen(0, '127.0.0.1', () => {
      const { port } = server.address();
      server.close(() => resolve(port));
    });
  });
}
