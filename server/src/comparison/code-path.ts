import type { BinaryOperator, Expression } from '../program/form';
import type { Formula } from '../notation/tree';

const OPERATORS: Readonly<Record<string, BinaryOperator>> = {
  '+': '+', '-': '-', '*': '*', '/': '/', '^': '**', '=': '==', '!=': '!=', '<': '<', '<=': '<=', '>': '>', '>=': '>=',
};

/**
 * The left side of `reads`, an output of `checks` or the condition of `assume`, as program form. These are written in the
 * code's own words; the few marks that languages differ in (`.`, `->`, `::`) were read alike by the notation.
 */
export function codeExpression(f: Formula): Expression {
  const { span } = f;
  switch (f.kind) {
    case 'number':
      return { kind: 'number', value: f.value, text: f.text, integer: /^\d+$/.test(f.text), span };
    case 'string':
      return { kind: 'string', value: f.value, span };
    case 'name':
      return nameExpression(f.name, span);
    case 'member':
      return { kind: 'member', object: codeExpression(f.object), name: f.name, nameSpan: span, span };
    case 'index':
      return { kind: 'index', object: codeExpression(f.object), indices: f.indices.map(codeExpression), span };
    case 'slice':
      return {
        kind: 'slice',
        ...(f.from ? { from: codeExpression(f.from) } : {}),
        ...(f.to ? { to: codeExpression(f.to) } : {}),
        span,
      };
    case 'call':
      return { kind: 'call', callee: codeExpression(f.callee), args: f.args.map((a) => ({ value: codeExpression(a) })), span };
    case 'unary':
      return { kind: 'unary', op: f.op, operand: codeExpression(f.operand), span };
    case 'binary': {
      const left = codeExpression(f.left);
      const right = codeExpression(f.right);
      if (f.op === 'and' || f.op === 'or') return { kind: 'logical', op: f.op, left, right, span };
      return { kind: 'binary', op: OPERATORS[f.op]!, left, right, opSpan: span, span };
    }
    case 'tuple':
    case 'list':
      return { kind: 'list', items: f.items.map((i) => ({ value: codeExpression(i) })), span };
    case 'prime':
      return { kind: 'opaque', reason: 'a time derivative in a code path', span };
    case 'sum':
    case 'quantity':
      return { kind: 'opaque', reason: 'a physical quantity in a code path', span };
    case 'hole':
      return { kind: 'opaque', reason: 'an empty place in the declaration', span };
  }
}

function nameExpression(name: string, span: Formula['span']): Expression {
  switch (name) {
    case 'this':
    case 'self':
      return { kind: 'self', span };
    case 'true':
    case 'True':
      return { kind: 'boolean', value: true, span };
    case 'false':
    case 'False':
      return { kind: 'boolean', value: false, span };
    case 'null':
    case 'None':
    case 'undefined':
    case 'nil':
      return { kind: 'nothing', span };
    default:
      return { kind: 'name', name, span };
  }
}
