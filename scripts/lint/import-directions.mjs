/** The lint rule that holds the import directions of `directions.mjs`. */
import { isBuiltin } from 'node:module';
import { posix, sep } from 'node:path';
import { directions, folderOf } from './directions.mjs';

/** @type {import('eslint').Rule.RuleModule} */
export const importDirections = {
  meta: {
    type: 'problem',
    docs: { description: 'Imports go one way through the folders, and only the rim does input and output.' },
    schema: [],
    messages: {
      direction: '{{here}} must not import from {{there}}: imports go one way (scripts/lint/directions.mjs).',
      node: "{{here}} must not use Node's '{{name}}': only the host, the server's wiring and the command do I/O.",
      package: "{{here}} must not use the package '{{name}}' (scripts/lint/directions.mjs).",
      unknown: '{{here}} is in no folder that scripts/lint/directions.mjs knows.',
    },
  },

  create(context) {
    const file = /^(?:.*\/)?((?:server|client|shared)\/src\/.*)$/.exec(context.filename.split(sep).join('/'))?.[1];
    if (file === undefined) return {};
    const here = Object.keys(directions).find((folder) => file.startsWith(`${folder}/`));
    const rule = here === undefined ? undefined : directions[here];

    const check = (source) => {
      if (!source || source.type !== 'Literal' || typeof source.value !== 'string') return;
      const fault = rule ? judge(source.value, file, here, rule) : { messageId: 'unknown', data: { here: file } };
      if (fault) context.report({ node: source, ...fault });
    };
    return {
      ImportDeclaration: (node) => check(node.source),
      ExportNamedDeclaration: (node) => check(node.source),
      ExportAllDeclaration: (node) => check(node.source),
      ImportExpression: (node) => check(node.source),
      TSImportType: (node) => check(node.source ?? node.argument?.literal),
      TSExternalModuleReference: (node) => check(node.expression),
      'CallExpression[callee.name="require"]': (node) => check(node.arguments[0]),
    };
  },
};

function judge(name, file, here, rule) {
  if (isBuiltin(name)) {
    const allowed = rule.node === true || rule.node?.includes(name.replace(/^node:/, ''));
    return allowed ? undefined : { messageId: 'node', data: { here, name } };
  }
  if (!name.startsWith('.') && !name.startsWith('@visviva/')) {
    const wanted = name.split('/').slice(0, name.startsWith('@') ? 2 : 1).join('/');
    return rule.packages.includes(wanted) ? undefined : { messageId: 'package', data: { here, name: wanted } };
  }
  const there = name.startsWith('@visviva/')
    ? name.replace(/^@visviva\/(\w+)/, '$1/src')
    : posix.join(posix.dirname(file), name);
  if (there === 'package.json' && here === 'shared/src') return undefined;
  const allowed = [here, ...rule.from.map(folderOf)];
  if (allowed.some((folder) => there === folder || there.startsWith(`${folder}/`))) return undefined;
  return { messageId: 'direction', data: { here, there } };
}
