/**
 * Which folder may import from which: the house's one-way streets. A folder may always import from itself. `packages`
 * are those from outside; `node` allows Node's own modules, all (which is to say input and output) or those named.
 */
export const directions = {
  'shared/src': { from: [], packages: [] },

  'server/src/text': { from: [], packages: [] },
  'server/src/expression': { from: ['text'], packages: [] },
  'server/src/notation': { from: ['text', 'expression', 'shared'], packages: ['unitmath'] },
  'server/src/program': { from: ['text', 'expression'], packages: [] },
  'server/src/mechanics': { from: ['text', 'expression', 'notation', 'shared'], packages: [] },
  // Compiled parsers are found by their path; reading them is their package's doing.
  'server/src/languages': {
    from: ['text', 'expression', 'program'],
    packages: ['typescript', 'htmlparser2', 'web-tree-sitter'],
    node: ['module', 'url'],
  },
  'server/src/comparison': {
    from: ['text', 'expression', 'notation', 'program', 'mechanics', 'shared'],
    packages: [],
  },
  'server/src/diagnosis': {
    from: ['text', 'expression', 'notation', 'program', 'mechanics', 'comparison', 'shared'],
    packages: [],
  },
  'server/src/workspace': {
    from: ['text', 'expression', 'notation', 'program', 'mechanics', 'languages', 'comparison', 'shared'],
    packages: [],
  },
  'server/src/service': {
    from: [
      'text', 'expression', 'notation', 'program', 'mechanics', 'languages', 'comparison', 'diagnosis', 'workspace',
      'shared',
    ],
    packages: ['decimal.js'],
  },
  // The service's contract names what the host has to give; nothing else of it is used there.
  'server/src/host': { from: ['text', 'shared', 'service/api'], packages: ['ignore', 'tinyglobby', 'jsonc-parser', 'smol-toml'], node: true },
  'server/src/typeset': { from: [], packages: ['mathjax-full'] },
  'server/src/lsp': {
    from: ['text', 'service', 'host', 'typeset', 'shared'],
    packages: ['vscode-languageserver', 'vscode-languageserver-textdocument'],
    node: true,
  },
  'server/src/cli': {
    from: ['text', 'service', 'host', 'diagnosis', 'lsp', 'shared'],
    packages: ['commander', 'picocolors', 'tinyglobby', 'ignore', 'mathjax-full', 'sarif', 'chokidar'],
    node: true,
  },

  'client/src': { from: ['shared'], packages: ['vscode', 'vscode-languageclient'] },
  // The page inside the panel: no editor and no server there.
  'client/panel': { from: ['shared'], packages: ['odex', 'uplot'] },
};

/** Where a name in a `from` list lies. */
export function folderOf(name) {
  return name === 'shared' ? 'shared/src' : `server/src/${name}`;
}
