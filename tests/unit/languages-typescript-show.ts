import type { ClassNode, Expression, Field, FunctionNode, Pattern, PatternItem, Statement } from '../../server/src/program/form';

/** Program form on one line, for assertions: every bracket is written, opaque parts stand in `‹ ›`. */
export function showAll(body: readonly Statement[]): string {
  return body.map(showStatement).join(' ');
}

export function show(e: Expression): string {
  const optional = 'optional' in e && e.optional ? '?.' : '';
  switch (e.kind) {
    case 'number':
      return e.value.toString();
    case 'string':
      return JSON.stringify(e.value);
    case 'boolean':
      return String(e.value);
    case 'name':
      return e.name;
    case 'nothing':
    case 'self':
    case 'super':
      return `#${e.kind}`;
    case 'member':
      return `${show(e.object)}${optional || '.'}${e.name}`;
    case 'index':
      return `${show(e.object)}${optional}[${e.indices.map(show).join(', ')}]`;
    case 'slice':
      return ':';
    case 'call':
      return `${e.isNew ? 'new ' : ''}${show(e.callee)}${optional}(${e.args.map((a) => (a.spread ? '...' : '') + show(a.value)).join(', ')})`;
    case 'unary':
      return `${e.op}(${show(e.operand)})`;
    case 'binary':
    case 'logical':
      return `(${show(e.left)} ${e.op} ${show(e.right)})`;
    case 'conditional':
      return `(${show(e.condition)} ? ${show(e.whenTrue)} : ${show(e.whenFalse)})`;
    case 'assign':
      return `(${showPattern(e.target)} ${e.op ?? ''}= ${show(e.value)}${e.yields === 'old' ? ' old' : ''})`;
    case 'function':
      return showFunction(e.node);
    case 'class':
      return showClass(e.node);
    case 'list':
      return `[${e.items.map((i) => (i.spread ? '...' : '') + show(i.value)).join(', ')}]`;
    case 'record':
      return `{${e.fields.map(showField).join(', ')}}`;
    case 'sequence':
      return `(${e.items.map(show).join(', ')})`;
    case 'opaque':
      return `‹${e.reason}›`;
    default:
      return e.kind;
  }
}

function showField(f: Field): string {
  if (f.kind === 'spread') return `...${show(f.value)}`;
  if (f.kind === 'computed') return `[${show(f.name)}]: ${show(f.value)}`;
  return f.kind === 'field' ? `${f.name}: ${show(f.value)}` : `${f.kind} ${f.name}: ${showFunction(f.node)}`;
}

export function showPattern(p: Pattern): string {
  switch (p.kind) {
    case 'name':
      return p.name;
    case 'place':
      return show(p.target);
    case 'list':
      return `[${p.items.map((i) => (i ? showItem(i) : '')).join(', ')}]`;
    case 'record':
      return `{${[...p.fields.map((f) => `${f.name}: ${showItem(f.item)}`), ...(p.rest ? [`...${showPattern(p.rest)}`] : [])].join(', ')}}`;
    case 'opaque':
      return `‹${p.reason}›`;
  }
}

function showItem(i: PatternItem & { readonly field?: boolean }): string {
  return `${i.field ? 'field ' : ''}${i.rest ? '...' : ''}${showPattern(i.pattern)}${i.initial ? ` = ${show(i.initial)}` : ''}`;
}

export function showFunction(f: FunctionNode): string {
  const marks = (f.opaque ? `‹${f.opaque}› ` : '') + (f.inheritsSelf ? '=> ' : '');
  return `${marks}${f.name}(${f.parameters.map(showItem).join(', ')}) {${showAll(f.body)}}`;
}

export function showClass(c: ClassNode): string {
  const members = c.members.map((m) => {
    const value = m.node ? showFunction(m.node) : m.value ? ` = ${show(m.value)}` : '';
    return `${m.isStatic ? 'static ' : ''}${m.isConstant ? 'constant ' : ''}${m.kind} ${m.name}${m.node ? ': ' : ''}${value}`;
  });
  return `class ${c.name}${c.base ? ` of ${show(c.base)}` : ''} {${members.join('; ')}}`;
}

export function showStatement(s: Statement): string {
  switch (s.kind) {
    case 'declare':
      return `${s.scope === 'function' ? 'var' : s.mutable ? 'let' : 'const'} ${showPattern(s.target)}${s.value ? ` = ${show(s.value)}` : ''};`;
    case 'expression':
      return `${show(s.value)};`;
    case 'function':
      return showFunction(s.node);
    case 'class':
      return showClass(s.node);
    case 'enum':
      return `enum ${s.name} {${s.members.map((m) => m.name + (m.value ? ` = ${show(m.value)}` : '')).join(', ')}}`;
    case 'return':
    case 'throw':
      return `${s.kind}${s.value ? ` ${show(s.value)}` : ''};`;
    case 'if':
      return `if ${show(s.condition)} {${showAll(s.whenTrue)}} else {${showAll(s.whenFalse)}}`;
    case 'loop':
      return `loop (${showAll(s.initial)} ${s.condition ? show(s.condition) : ''}${s.testFirst ? '' : ' after'}; ${showAll(s.update)}) {${showAll(s.body)}}`;
    case 'for-each':
      return `for ${s.declares ? 'new ' : ''}${showPattern(s.target)} ${s.keys ? 'in' : 'of'} ${show(s.over)} {${showAll(s.body)}}`;
    case 'switch':
      return `switch ${show(s.value)} {${s.cases.map((c) => `${c.test ? show(c.test) : 'default'}: ${showAll(c.body)}`).join(' | ')}}`;
    case 'break':
    case 'continue':
      return `${s.kind}${s.label ? ` ${s.label}` : ''};`;
    case 'labelled':
      return `${s.label}: ${showStatement(s.body)}`;
    case 'try':
      return `try {${showAll(s.body)}} ${(s.handlers ?? []).map((h) => `catch ${h.parameter ? showPattern(h.parameter) : ''} {${showAll(h.body)}}`).join(' ')} finally {${showAll(s.finalizer)}}`;
    case 'block':
      return `{${showAll(s.body)}}`;
    case 'import':
      return `import ${s.names.map((n) => `${n.imported} as ${n.local}`).join(', ')}${s.namespace ? ` * as ${s.namespace}` : ''} from ${s.from};`;
    case 'export':
      return `export ${s.names.map((n) => `${n.local} as ${n.exported}`).join(', ')}${s.all ? '*' : ''}${s.value ? `= ${show(s.value)}` : ''}${s.from ? ` from ${s.from}` : ''};`;
    case 'opaque':
      return `‹${s.reason}›`;
    case 'empty':
      return ';';
  }
}
