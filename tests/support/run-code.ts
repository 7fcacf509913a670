import { transformSync } from 'esbuild';
import ts from 'typescript';
import { extension } from './source-text';
import { splitOutside } from './formula';

/**
 * Runs fixture code with numbers. Only tests do this: the product reads code and never runs it.
 */
export interface Claimed {
  readonly left: string;
  readonly op: '=' | '+=' | '-=';
}

/** Values of `symbols` in; the values of the claims' left sides out, increments as differences. */
export type Run = (symbols: ReadonlyMap<string, number>) => number[];

/** A name in a run line: `th''` is `th_2`. */
const primed = (code: string): string =>
  code.replace(/([\p{L}_][\p{L}\p{N}_]*)('+)/gu, (_, name: string, primes: string) => `${name}_${primes.length}`);

export function compileRun(
  file: string,
  text: string,
  lines: readonly string[],
  claims: readonly Claimed[],
  symbols: readonly string[],
  constants: ReadonlySet<string>,
  others: ReadonlyMap<string, string> = new Map(),
): Run {
  const source = extension(file) === 'html' ? scriptsOf(text) : text;
  const setup = lines.slice(0, -1).join('\n');
  const call = lines.at(-1)!.replace(/;\s*$/, '').replace(/^return /, '');
  const declared = new Set([...setup.matchAll(/\b(?:const|let|var)\s+(\w+|\{[^}]*\}|\[[^\]]*\])/g)].flatMap((m) => m[1]!.match(/\w+/g) ?? []));
  const roots = claims.map((c) => rootsOf(c.left)).flat();
  const probes = new Set(roots.filter((name) => name !== 'return' && name !== 'this' && !declared.has(name)));
  const module = toCommonJs(file, prepare(source, probes, constants));
  const left = (code: string): string => {
    const inner = code.replace(/\breturn\b/g, '__result').replace(/\bthis\b/g, 'self');
    return [...probes].reduce((c, p) => c.replace(new RegExp(`(?<![.\\p{L}\\p{N}_])${p}(?![\\p{L}\\p{N}_])`, 'gu'), `__get(${JSON.stringify(p)}, () => ${p})`), inner);
  };
  const values = `[${claims.map((c) => left(primed(c.left))).join(', ')}]`;
  const before = `[${claims.map((c) => (c.op === '=' ? '0' : left(primed(c.left)))).join(', ')}]`;
  const names = symbols.map(primed);
  const body = `
    const exports = {}, module = { exports }, require = __require, React = { createElement: () => null };
    const __seen = Object.create(null);
    const __get = (name, other) => (name in __seen ? __seen[name] : other());
    ${module}
    return (function (${names.join(', ')}) {
      let __result;
      ${primed(setup)}
      const __before = ${before};
      __result = (${primed(call)});
      return ${values}.map((v, i) => v - __before[i]);
    })(${names.map((_, i) => `__values[${i}]`).join(', ')});`;
  let compiled: (values: readonly number[], known: (name: string) => number, load: (from: string) => unknown) => number[];
  try {
    compiled = new Function('__values', '__known', '__require', body) as typeof compiled;
  } catch (error) {
    throw new Error(`${file}: the run lines do not compile: ${String(error)}`, { cause: error });
  }
  return (given) => compiled(symbols.map((s) => given.get(s)!), (name) => given.get(name)!, (from) => load(from, file, others));
}

function toCommonJs(file: string, source: string): string {
  return transformSync(source, { loader: file.endsWith('x') ? 'tsx' : 'ts', format: 'cjs', target: 'es2022' }).code;
}

/** What an import of a file beside the fixture gives; nothing for packages. */
function load(from: string, importer: string, others: ReadonlyMap<string, string>): unknown {
  const path = new URL(from, `file:///${importer}`).pathname.slice(1);
  const file = ['', '.ts', '.js', '.mjs', '/index.ts'].map((end) => path + end).find((name) => others.has(name));
  const exports = {};
  if (!from.startsWith('.') || !file) return exports;
  const module = { exports };
  const body = toCommonJs(file, others.get(file)!);
  new Function('exports', 'module', 'require', body)(exports, module, (next: string) => load(next, file, others));
  return module.exports;
}

/** `a[1]` and `2*b - x''`: the names a claim's left side starts its paths with, the declared symbols among them. */
function rootsOf(left: string): string[] {
  return [...left.matchAll(/(?<![.\p{L}\p{N}_])([\p{L}_$][\p{L}\p{N}_$]*)(?!['\p{L}\p{N}_(])/gu)].map((m) => m[1]!);
}

function scriptsOf(html: string): string {
  return [...html.matchAll(/<script[^>]*>([\s\S]*?)<\/script>/g)].map((m) => m[1]!).join('\n');
}

/** Literals of declared constants give way to drawn numbers, and watched locals are recorded where they are assigned. */
function prepare(text: string, probes: ReadonlySet<string>, constants: ReadonlySet<string>): string {
  const tree = ts.createSourceFile('module.tsx', text, ts.ScriptTarget.ES2022, true, ts.ScriptKind.TSX);
  const edits: { at: number; end: number; text: string }[] = [];
  const visit = (node: ts.Node): void => {
    if (ts.isVariableDeclaration(node) || ts.isPropertyDeclaration(node) || ts.isPropertyAssignment(node)) {
      const name = node.name.getText(tree);
      if (constants.has(name) && node.initializer && ts.isNumericLiteral(node.initializer)) {
        edits.push({ at: node.initializer.getStart(tree), end: node.initializer.end, text: `__known(${JSON.stringify(name)})` });
      }
    }
    if (insideFunction(node)) for (const name of assigned(node, tree)) {
      if (probes.has(name)) edits.push({ at: node.end, end: node.end, text: `; __seen[${JSON.stringify(name)}] = ${name};` });
    }
    ts.forEachChild(node, visit);
  };
  visit(tree);
  edits.sort((a, b) => b.at - a.at);
  return edits.reduce((out, e) => out.slice(0, e.at) + e.text + out.slice(e.end), text);
}

function insideFunction(node: ts.Node): boolean {
  for (let p: ts.Node | undefined = node.parent; p; p = p.parent) if (ts.isFunctionLike(p)) return true;
  return false;
}

function assigned(node: ts.Node, tree: ts.SourceFile): string[] {
  if (ts.isVariableStatement(node)) {
    return node.declarationList.declarations.flatMap((d) =>
      d.initializer ? (d.name.getText(tree).match(/[\p{L}_$][\p{L}\p{N}_$]*/gu) ?? []) : [],
    );
  }
  if (ts.isExpressionStatement(node) && ts.isBinaryExpression(node.expression) && ts.isBlock(node.parent)) {
    const { left, operatorToken } = node.expression;
    if (/=$/.test(operatorToken.getText(tree)) && ts.isIdentifier(left)) return [left.text];
    if (ts.isArrayLiteralExpression(left)) return splitOutside(left.getText(tree).slice(1, -1), ',');
  }
  return [];
}
