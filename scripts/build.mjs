/**
 * Bundles the product into dist/: the extension (client.cjs), the language server (server.mjs) and the command
 * (visviva.mjs). Server and command share their code through chunks, and what is imported dynamically (the TypeScript
 * parser) stays a chunk of its own that is loaded at the first file that needs it.
 */
import { build } from 'esbuild';
import { chmod, copyFile, mkdir, rename, rm } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { basename, join } from 'node:path';
import { fileURLToPath } from 'node:url';

const root = fileURLToPath(new URL('..', import.meta.url));
const require = createRequire(join(root, 'server', 'package.json'));

/**
 * @param {{ production?: boolean, outdir?: string }} [options] production: smaller, without source maps.
 */
export async function buildAll({ production = false, outdir = join(root, 'dist') } = {}) {
  // Built beside the old one and then put in its place: a build that fails leaves what runs alone.
  const next = `${outdir.replace(/[\\/]+$/, '')}.next-${process.pid}`;
  try {
    await bundle(next, production);
    await rm(outdir, { recursive: true, force: true });
    await rename(next, outdir);
  } finally {
    await rm(next, { recursive: true, force: true });
  }
}

async function bundle(outdir, production) {
  await mkdir(outdir, { recursive: true });
  /** @type {import('esbuild').BuildOptions} */
  const common = {
    absWorkingDir: root,
    bundle: true,
    platform: 'node',
    target: 'node20',
    logLevel: 'warning',
    legalComments: 'none',
    minifySyntax: true,
    minifyWhitespace: true,
    minifyIdentifiers: production,
    keepNames: production,
    sourcemap: production ? false : 'linked',
    sourcesContent: false,
    // The form that the package gives to `require` loads its parts in a way that no bundler follows.
    alias: { 'jsonc-parser': require.resolve('jsonc-parser').replace(/umd([\\/]main\.js)$/, 'esm$1') },
  };
  await Promise.all([
    build({
      ...common,
      entryPoints: { client: 'client/src/extension.ts' },
      outdir,
      outExtension: { '.js': '.cjs' },
      format: 'cjs',
      external: ['vscode'],
    }),
    build({
      ...common,
      entryPoints: { panel: 'client/panel/main.ts' },
      outdir,
      platform: 'browser',
      target: 'es2022',
      format: 'iife',
    }),
    build({
      ...common,
      entryPoints: {
        server: 'server/src/lsp/main.ts',
        'check-worker': 'server/src/lsp/working/worker.ts',
        'pool-worker': 'server/src/cli/checking/pool-worker.ts',
        visviva: 'server/src/cli/main.ts',
      },
      outdir,
      outExtension: { '.js': '.mjs' },
      format: 'esm',
      splitting: true,
      chunkNames: 'chunks/[name]-[hash]',
      banner: { js: namesForCommonJs },
    }),
  ]);
  await chmod(join(outdir, 'visviva.mjs'), 0o755);
  await Promise.all(compiled.map((file) => copyFile(require.resolve(file), join(outdir, basename(file)))));
}

/** Parsers that come as compiled code, from their packages; they are loaded from beside the bundles. */
const compiled = ['web-tree-sitter/web-tree-sitter.wasm', 'tree-sitter-python/tree-sitter-python.wasm'];

/** CommonJS packages inside an ES module bundle still use the names that Node gives to every CommonJS module. */
const namesForCommonJs = [
  "import { createRequire as visvivaRequire } from 'node:module';",
  "import { dirname as visvivaDirname } from 'node:path';",
  "import { fileURLToPath as visvivaPath } from 'node:url';",
  'const require = visvivaRequire(import.meta.url);',
  'const __filename = visvivaPath(import.meta.url);',
  'const __dirname = visvivaDirname(__filename);',
].join('');

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  await buildAll({ production: process.argv.includes('--production') });
}
