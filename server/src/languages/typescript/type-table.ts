import ts from 'typescript';
import type { TypeOrigin, TypeTable } from '../../program/form';
import { nameText, type Context } from './context';
import { declaredNote } from './types';

/** The types that a file declares, imports and exports; gathered when first asked for. */
export function typeTable(c: Context): TypeTable {
  let found: Gathered | undefined;
  const gathered = (): Gathered => (found ??= gather(c.source));
  return {
    declared: (name) => declaredNote(c, name),
    imported: (name) => gathered().imports.get(name),
    exported: (name) => gathered().exports.get(name),
    get passedOn() {
      return gathered().passedOn;
    },
  };
}

interface Gathered {
  readonly imports: Map<string, TypeOrigin>;
  readonly exports: Map<string, TypeOrigin | { readonly local: string }>;
  readonly passedOn: string[];
}

function gather(source: ts.SourceFile): Gathered {
  const imports = new Map<string, TypeOrigin>();
  const exports = new Map<string, TypeOrigin | { readonly local: string }>();
  const passedOn: string[] = [];
  for (const s of source.statements) {
    if (ts.isImportDeclaration(s) && ts.isStringLiteral(s.moduleSpecifier)) {
      const from = s.moduleSpecifier.text;
      const clause = s.importClause;
      if (clause?.name) imports.set(nameText(clause.name.text), { from, name: 'default' });
      const bindings = clause?.namedBindings;
      if (!bindings || !ts.isNamedImports(bindings)) continue;
      for (const e of bindings.elements) imports.set(nameText(e.name.text), { from, name: nameText((e.propertyName ?? e.name).text) });
    } else if (ts.isExportDeclaration(s)) {
      const from = s.moduleSpecifier && ts.isStringLiteral(s.moduleSpecifier) ? s.moduleSpecifier.text : undefined;
      if (!s.exportClause && from !== undefined) passedOn.push(from);
      if (!s.exportClause || !ts.isNamedExports(s.exportClause)) continue;
      for (const e of s.exportClause.elements) {
        const local = nameText((e.propertyName ?? e.name).text);
        exports.set(nameText(e.name.text), from === undefined ? { local } : { from, name: local });
      }
    } else if (ts.isExportAssignment(s) && ts.isIdentifier(s.expression)) {
      exports.set('default', { local: nameText(s.expression.text) });
    } else if ((ts.isInterfaceDeclaration(s) || ts.isClassDeclaration(s)) && s.name && isDefault(s)) {
      exports.set('default', { local: nameText(s.name.text) });
    }
  }
  return { imports, exports, passedOn };
}

function isDefault(node: ts.InterfaceDeclaration | ts.ClassDeclaration): boolean {
  return node.modifiers?.some((m) => m.kind === ts.SyntaxKind.DefaultKeyword) ?? false;
}
