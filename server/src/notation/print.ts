import type { BinaryOperator, Family, Formula } from './tree';

const LEVELS: Readonly<Record<BinaryOperator, number>> = {
  or: 1, and: 2, '=': 4, '!=': 4, '<': 4, '<=': 4, '>': 4, '>=': 4, '+': 5, '-': 5, '*': 6, '/': 6, '^': 8,
};

/** A formula in the notation it was read from, with the brackets it needs. */
export function printFormula(f: Formula): string {
  return print(f, 0);
}

function print(f: Formula, level: number): string {
  const [text, own] = bare(f);
  return own < level ? `(${text})` : text;
}

const ATOM = 10;

function bare(f: Formula): [text: string, level: number] {
  switch (f.kind) {
    case 'number':
      return f.text === '' || !/^[\d.][\d._eE+-]*$/.test(f.text) ? [f.value.toString(), f.value.isInteger && f.value.sign >= 0 ? ATOM : 6] : [f.text, ATOM];
    case 'string':
      return [f.value.includes('"') ? `'${f.value}'` : `"${f.value}"`, ATOM];
    case 'name':
      return [f.name, ATOM];
    case 'prime':
      return [print(f.operand, 9) + "'".repeat(f.order), 9];
    case 'unary':
      return f.op === 'not' ? [`not ${print(f.operand, 4)}`, 3] : [f.op + print(f.operand, f.operand.kind === 'unary' ? 8 : 7), 7];
    case 'binary':
      return printBinary(f.op, f.left, f.right);
    case 'call':
      return [`${print(f.callee, 9)}(${f.args.map((a) => print(a, 0)).join(', ')})`, 9];
    case 'member':
      return [`${print(f.object, 9)}.${f.name}`, 9];
    case 'index':
      return [`${print(f.object, 9)}[${f.indices.map((a) => print(a, 0)).join(', ')}]`, 9];
    case 'slice':
      return [`${f.from ? print(f.from, 0) : ''}:${f.to ? print(f.to, 0) : ''}`, 0];
    case 'tuple':
      return [f.items.length === 1 ? `(${print(f.items[0]!, 0)},)` : `(${f.items.map((a) => print(a, 0)).join(', ')})`, ATOM];
    case 'list':
      return [`[${f.items.map((a) => print(a, 0)).join(', ')}]`, ATOM];
    case 'sum':
      return [`sum(${print(f.body, 0)} ${printFamilies(f.over)})`, 9];
    case 'quantity':
      return printQuantity(f);
    case 'hole':
      return ['?', ATOM];
  }
}

function printBinary(op: BinaryOperator, left: Formula, right: Formula): [string, number] {
  const level = LEVELS[op];
  if (op === '^') return [`${print(left, 9)}^${print(right, 7)}`, level];
  const spaced = op === '*' || op === '/' ? op : ` ${op} `;
  return [`${print(left, level)}${spaced}${print(right, level + 1)}`, level];
}

export function printFamilies(over: readonly Family[]): string {
  // `...5` would read as three dots.
  const range = (from: string, to: string): string => `${from}..${to.startsWith('.') ? ' ' : ''}${to}`;
  return `over ${over.map((o) => `${o.index} in ${range(print(o.from, 5), print(o.to, 5))}`).join(', ')}`;
}

function printQuantity(f: Formula & { kind: 'quantity' }): [string, number] {
  const [first, second] = f.args;
  if (f.name === 'multiplier') return [`multiplier ${first ? print(first, ATOM) : '?'}`, 9];
  if (f.name === 'jacobian') return [`jacobian of ${first ? print(first, 5) : '?'} by ${second ? print(second, 8) : '?'}`, 4];
  return [f.args.length ? `${f.name}[${f.args.map((a) => print(a, 0)).join(', ')}]` : f.name, 9];
}
