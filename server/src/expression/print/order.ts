import type { Expr, SymbolData } from '../node';

/** What decides where a factor or a term stands. */
export interface OrderKey {
  /** Highest time derivative of a coordinate anywhere inside. */
  readonly order: number;
  readonly hasCoordinate: boolean;
  readonly hasInput: boolean;
  /** Total power of velocities among the factors. */
  readonly speedPower: number;
  /** Id of the first symbol of the highest derivative. */
  readonly leader: number;
  /** Least class of the parameters inside: masses before stiffnesses before gravity before lengths. */
  readonly parameterClass: number;
}

const NOTHING: OrderKey = {
  order: 0,
  hasCoordinate: false,
  hasInput: false,
  speedPower: 0,
  leader: Number.MAX_SAFE_INTEGER,
  parameterClass: 9,
};

export function orderKey(node: Expr, args: readonly OrderKey[]): OrderKey {
  if (node.op === 'symbol') return symbolKey(node, node.data as SymbolData);
  if (args.length === 0) return NOTHING;
  let key = args[0]!;
  for (const a of args.slice(1)) key = join(key, a, node.op === 'product');
  if (node.op === 'power') {
    const e = node.args[1]!;
    const n = e.op === 'number' ? (e.data as { toNumber(): number }).toNumber() : 1;
    return { ...key, speedPower: args[0]!.speedPower * Math.max(0, n) };
  }
  return node.op === 'product' || node.op === 'sum' ? key : { ...key, speedPower: 0 };
}

function symbolKey(node: Expr, s: SymbolData): OrderKey {
  switch (s.role) {
    case 'coordinate':
      return { ...NOTHING, order: s.order, hasCoordinate: true, speedPower: s.order === 1 ? 1 : 0, leader: node.id };
    case 'input':
    case 'time':
      return { ...NOTHING, hasInput: true, leader: node.id };
    default:
      return { ...NOTHING, parameterClass: parameterClass(s.name), leader: node.id };
  }
}

function join(a: OrderKey, b: OrderKey, isProduct: boolean): OrderKey {
  const leader = a.order === b.order ? leading(a, b) : a.order > b.order ? a.leader : b.leader;
  return {
    order: Math.max(a.order, b.order),
    hasCoordinate: a.hasCoordinate || b.hasCoordinate,
    hasInput: a.hasInput || b.hasInput,
    speedPower: isProduct ? a.speedPower + b.speedPower : Math.max(a.speedPower, b.speedPower),
    leader,
    parameterClass: Math.min(a.parameterClass, b.parameterClass),
  };
}

/** A coordinate leads before a parameter, the first made before the later. */
function leading(a: OrderKey, b: OrderKey): number {
  if (a.hasCoordinate !== b.hasCoordinate) return a.hasCoordinate ? a.leader : b.leader;
  return Math.min(a.leader, b.leader);
}

/** The usual order of letters in mechanics: G M m, stiffness and damping, g, lengths. */
function parameterClass(name: string): number {
  if (name === 'G') return 0;
  if (/^(m|M)(\d|_|$|[A-Z])|^mass/.test(name)) return 1;
  if (/^(g|gravity)$/.test(name)) return 3;
  if (/^(l|L|r|R|h|a|b)(\d|_|$)|^(len|length|radius|height)/.test(name)) return 4;
  return 2;
}

/** Factors: parameters, coordinates, velocities, accelerations, functions, the rest in brackets. */
export function compareFactors(a: { node: Expr; key: OrderKey }, b: { node: Expr; key: OrderKey }): number {
  const rank = factorRank(a.node, a.key) - factorRank(b.node, b.key);
  if (rank !== 0) return rank;
  const byClass = a.key.parameterClass - b.key.parameterClass;
  if (byClass !== 0) return byClass;
  const bySum = Number(a.node.op === 'sum') - Number(b.node.op === 'sum');
  return bySum || a.node.id - b.node.id;
}

function factorRank(node: Expr, key: OrderKey): number {
  const base = node.op === 'power' ? node.args[0]! : node;
  if (base.op === 'number' || base.op === 'pi') return 0;
  if (!key.hasCoordinate && !key.hasInput) return base.op === 'symbol' || base.op === 'sum' ? 1 : 2;
  if (base.op !== 'symbol') return base.op === 'sum' ? 8 : 7;
  return 3 + key.order;
}

/**
 * Terms: accelerations, then velocities by falling power, then positions, inputs, constants; in a sum without any
 * derivative the constants come first, as in M + m*sin(th)^2.
 */
export function compareTerms(highest: number): (a: { node: Expr; key: OrderKey }, b: { node: Expr; key: OrderKey }) => number {
  return (a, b) => {
    const [x, y] = [a.key, b.key];
    if (x.order !== y.order) return y.order - x.order;
    const depth = termDepth(x, highest) - termDepth(y, highest);
    if (depth !== 0) return depth;
    if (x.order === 1 && x.speedPower !== y.speedPower) return y.speedPower - x.speedPower;
    if (x.leader !== y.leader) return x.leader - y.leader;
    return a.node.id - b.node.id;
  };
}

function termDepth(k: OrderKey, highest: number): number {
  if (k.hasCoordinate) return 1;
  if (k.hasInput) return 2;
  const isNumber = k.leader === NOTHING.leader;
  return highest > 0 ? (isNumber ? 4 : 3) : isNumber ? -1 : 0;
}
