import type { Expression } from '../../program/form';
import type { Context } from './context';

/** True for an expression that is an integer whatever its variables from outside are. */
export function isInteger(c: Context, e: Expression): boolean {
  switch (e.kind) {
    case 'number':
      return e.integer;
    case 'name':
      return c.bindings.isInteger(e.name);
    case 'unary':
      return (e.op === '-' || e.op === '+') && isInteger(c, e.operand);
    case 'binary':
      return /^(?:[-+*%]|\*\*|floor-divide|remainder-floor)$/.test(e.op) && isInteger(c, e.left) && isInteger(c, e.right);
    case 'call':
      return e.callee.kind === 'name' && (e.callee.name === 'len' || e.callee.name === 'int');
    default:
      return false;
  }
}
