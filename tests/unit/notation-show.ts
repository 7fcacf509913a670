import { parseBlocks, parseFormula, printFormula, wholeFile } from '../../server/src/notation/index';
import type { Block, CommentText, Formula, Statement } from '../../server/src/notation/tree';

/** A formula as nested lists, operators first: `(* 2 x)`. Errors follow after `!`. */
export function shape(text: string, side: 'physics' | 'code' = 'physics'): string {
  const { formula, errors } = parseFormula(text, 0, side);
  return [lisp(formula), ...errors.map((e) => `! ${text.slice(e.span.start, e.span.end)}: ${e.message}`)].join('\n');
}

export function lisp(f: Formula): string {
  const list = (head: string, parts: readonly Formula[]): string => `(${[head, ...parts.map(lisp)].join(' ')})`;
  switch (f.kind) {
    case 'number':
      return f.text;
    case 'string':
      return JSON.stringify(f.value);
    case 'name':
      return f.name;
    case 'prime':
      return lisp(f.operand) + "'".repeat(f.order);
    case 'unary':
      return list(f.op === '-' ? 'neg' : f.op, [f.operand]);
    case 'binary':
      return list(f.op, [f.left, f.right]);
    case 'call':
      return list('call', [f.callee, ...f.args]);
    case 'member':
      return `${lisp(f.object)}.${f.name}`;
    case 'index':
      return `${lisp(f.object)}[${f.indices.map(lisp).join(' ')}]`;
    case 'slice':
      return `${f.from ? lisp(f.from) : ''}:${f.to ? lisp(f.to) : ''}`;
    case 'tuple':
      return list('tuple', f.items);
    case 'list':
      return list('list', f.items);
    case 'sum':
      return `(sum ${lisp(f.body)} ${f.over.map((o) => `${o.index}=${lisp(o.from)}..${lisp(o.to)}`).join(' ')})`;
    case 'quantity':
      return `<${[f.name, ...f.args.map(lisp)].join(' ')}>`;
    case 'hole':
      return '?';
  }
}

/** The one block of a text that is all declaration, after a line `@visviva a`. */
export function block(...lines: readonly string[]): Block & { readonly text: string } {
  const text = ['@visviva a', ...lines].join('\n');
  return { ...parseBlocks(text, [wholeFile(text)])[0]!, text };
}

/** The statements of a block, one string each. */
export function statements(...lines: readonly string[]): string[] {
  return block(...lines).statements.map(say);
}

/** The errors of a block: the place quoted, then the message. */
export function errors(...lines: readonly string[]): string[] {
  const b = block(...lines);
  return b.errors.map((e) => `${b.text.slice(e.span.start, e.span.end)}: ${e.message}`);
}

export function blocksOf(text: string, ...lineMarks: readonly string[]): Block[] {
  const comment: CommentText = { span: { start: 0, end: text.length }, lineMarks };
  return parseBlocks(text, [comment]);
}

export function say(s: Statement): string {
  const p = printFormula;
  const over = s.over ? ` over ${s.over.map((o) => `${o.index} in ${p(o.from)}..${p(o.to)}`).join(', ')}` : '';
  return sayContent(s) + over;
}

function sayContent(s: Statement): string {
  const p = printFormula;
  const pair = (e: { left: Formula; right: Formula; op?: string }): string => `${p(e.left)} ${e.op ?? '='} ${p(e.right)}`;
  switch (s.kind) {
    case 'coordinates':
    case 'parameters':
    case 'inputs':
      return `${s.kind} ${s.items
        .map((i) =>
          [
            i.name + (i.index ? `[${i.index}]` : ''),
            i.unit && `[${i.unit.text}]`,
            ...i.bounds.map((b) => (b.op === 'in' ? `in ${p(b.low)}..${p(b.high)}` : `${b.op} ${p(b.value)}`)),
            i.typical && `= ${p(i.typical)}`,
            i.remark && `"${i.remark}"`,
          ]
            .filter(Boolean)
            .join(' '),
        )
        .join('; ')}`;
    case 'time':
      return `time ${s.name}`;
    case 'where':
    case 'reads':
    case 'checks':
      return `${s.kind} ${s.items.map(pair).join('; ')}`;
    case 'energy':
      return `${s.which} = ${p(s.value)}`;
    case 'generalized-force':
      return `Q[${p(s.coordinate)}] = ${p(s.value)}`;
    case 'force':
      return `force ${p(s.value)} at ${p(s.at)}`;
    case 'torque':
      return `torque ${p(s.value)} on ${p(s.on)}`;
    case 'constraint':
      return `constraint ${pair(s)}${s.multiplier ? ` with ${s.multiplier}` : ''}`;
    case 'point':
      return `point ${s.name}: ${p(s.mass)} at ${p(s.at)}`;
    case 'body':
      return `body ${s.name}: ${(['mass', 'inertia', 'centre', 'angle', 'rotation'] as const).flatMap((k) => (s[k] ? [`${k} ${p(s[k])}`] : [])).join(', ')}`;
    case 'gravity':
      return `gravity ${p(s.value)}`;
    case 'spring':
      return `spring ${p(s.stiffness)}${s.rest ? ` rest ${p(s.rest)}` : ''} ${p(s.from)} -- ${p(s.to)}`;
    case 'damper':
      return `damper ${p(s.coefficient)} ${p(s.from)} -- ${p(s.to)}`;
    case 'ranges':
      return `ranges ${s.items.map((i) => `${p(i.target)} in ${p(i.low)}..${p(i.high)}`).join('; ')}`;
    case 'near':
      return `near ${s.items.map(pair).join('; ')} order ${s.order}`;
    case 'assume':
      return s.withinLimits ? 'assume within limits' : `assume ${p(s.condition!)}`;
    case 'defines':
      return `defines ${p(s.what)}`;
  }
}
