import type { Expr, FunctionName, OpName } from '../node';
import type { Operator } from './operator';

/** Operators with kinks, steps and branches. Where rounding may have chosen the side, the bound is Infinity. */

const abs: Operator = {
  evaluate(v, e, out, args, n) {
    const a = args[0]!;
    for (let s = 0; s < n; s++) {
      v[out + s] = Math.abs(v[a + s]!);
      e[out + s] = e[a + s]!;
    }
  },
  partial: (g, node) => g.apply('sign', [node.args[0]!]),
};

const sign: Operator = {
  evaluate(v, e, out, args, n) {
    const a = args[0]!;
    for (let s = 0; s < n; s++) {
      const x = v[a + s]!;
      v[out + s] = Math.sign(x);
      e[out + s] = e[a + s]! > 0 && Math.abs(x) <= e[a + s]! ? Infinity : 0;
    }
  },
};

const floor: Operator = {
  evaluate(v, e, out, args, n) {
    const a = args[0]!;
    for (let s = 0; s < n; s++) {
      const x = v[a + s]!;
      v[out + s] = Math.floor(x);
      e[out + s] = e[a + s]! > 0 && Math.abs(x - Math.round(x)) <= e[a + s]! ? Infinity : 0;
    }
  },
};

function extremum(pick: (a: number, b: number) => number, less: boolean): Operator {
  return {
    evaluate(v, e, out, args, n) {
      const a = args[0]!;
      const b = args[1]!;
      for (let s = 0; s < n; s++) {
        const x = v[a + s]!;
        const y = v[b + s]!;
        const ex = e[a + s]!;
        const ey = e[b + s]!;
        v[out + s] = pick(x, y);
        e[out + s] = Math.abs(x - y) > ex + ey ? (pick(x, y) === x ? ex : ey) : Math.max(ex, ey);
      }
    },
    partial(g, node, k) {
      const [a, b] = node.args as [Expr, Expr];
      const first = less ? g.lessEqual(a, b) : g.lessEqual(b, a);
      return k === 0 ? g.select(first, g.one, g.zero) : g.select(first, g.zero, g.one);
    },
  };
}

function comparison(holds: (x: number, y: number) => boolean): Operator {
  return {
    evaluate(v, e, out, args, n) {
      const a = args[0]!;
      const b = args[1]!;
      for (let s = 0; s < n; s++) {
        const x = v[a + s]!;
        const y = v[b + s]!;
        const error = e[a + s]! + e[b + s]!;
        v[out + s] = Number.isNaN(x) || Number.isNaN(y) ? NaN : holds(x, y) ? 1 : 0;
        e[out + s] = error > 0 && Math.abs(x - y) <= error ? Infinity : 0;
      }
    },
  };
}

function connective(of: (x: number, y: number) => number, settles: number): Operator {
  return {
    evaluate(v, e, out, args, n) {
      const a = args[0]!;
      const b = args[1]!;
      for (let s = 0; s < n; s++) {
        const x = v[a + s]!;
        const y = v[b + s]!;
        // A side that settles the matter for certain makes the other one's doubt (or absence of value) harmless.
        const settled = (x === settles && e[a + s] === 0) || (y === settles && e[b + s] === 0);
        v[out + s] = settled ? settles : of(x, y);
        e[out + s] = settled ? 0 : e[a + s]! + e[b + s]!;
      }
    },
  };
}

const not: Operator = {
  evaluate(v, e, out, args, n) {
    const a = args[0]!;
    for (let s = 0; s < n; s++) {
      v[out + s] = 1 - v[a + s]!;
      e[out + s] = e[a + s]!;
    }
  },
};

const select: Operator = {
  evaluate(v, e, out, args, n) {
    const c = args[0]!;
    const a = args[1]!;
    const b = args[2]!;
    for (let s = 0; s < n; s++) {
      const condition = v[c + s]!;
      if (Number.isNaN(condition)) {
        v[out + s] = NaN;
        e[out + s] = 0;
        continue;
      }
      const from = condition === 1 ? a : b;
      const other = condition === 1 ? b : a;
      v[out + s] = v[from + s]!;
      // In doubt about the side, the value may be the other one.
      e[out + s] = e[c + s] === 0 ? e[from + s]! : Math.abs(v[a + s]! - v[b + s]!) + Math.max(e[from + s]!, e[other + s]!);
    }
  },
  partial(g, node, k) {
    if (k === 0) return undefined;
    const condition = node.args[0]!;
    return k === 1 ? g.select(condition, g.one, g.zero) : g.select(condition, g.zero, g.one);
  },
};

function truth(value: 0 | 1): Operator {
  return {
    evaluate(v, e, out, _args, n) {
      v.fill(value, out, out + n);
      e.fill(0, out, out + n);
    },
  };
}

export const piecewise: Partial<Record<OpName | FunctionName, Operator>> = {
  abs,
  sign,
  floor,
  min: extremum(Math.min, true),
  max: extremum(Math.max, false),
  less: comparison((x, y) => x < y),
  lessEqual: comparison((x, y) => x <= y),
  equal: comparison((x, y) => x === y),
  and: connective((x, y) => x * y, 0),
  or: connective((x, y) => (x === 1 || y === 1 ? 1 : x + y), 1),
  not,
  select,
  true: truth(1),
  false: truth(0),
};
