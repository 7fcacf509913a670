import { work } from '../../text/budget';
import type { Expr } from '../node';
import type { Rational } from '../rational';
import { reachable } from '../reach';
import { Bases } from './bases';
import { isRoot } from './degree';
import { eliminate } from './eliminate';
import { add, inverse, multiply, residue } from './field';
import { circleOf, circularAt, exponentialAt, mixed, powerAt, type Circle } from './functions';
import type { Residues } from './residues';

const PIECEWISE: ReadonlySet<string> = new Set([
  'abs', 'sign', 'min', 'max', 'floor', 'less', 'lessEqual', 'equal', 'and', 'or', 'not', 'select', 'nan',
]);

/**
 * A program for evaluation modulo a prime. Angles are points of the unit circle; functions without algebra of their own are
 * random functions of their arguments' values.
 */
export class ExactTape {
  readonly nodes: readonly Expr[];
  readonly bases: Bases;
  /** The operation that has no exact meaning here. */
  readonly stopped: string | undefined;
  readonly hasRoots: boolean;
  /** The first register of a node, by its id. */
  readonly register: Int32Array;
  readonly registers: number;

  constructor(roots: readonly Expr[]) {
    this.nodes = reachable(roots);
    this.bases = new Bases(this.nodes);
    const odd = this.nodes.find((n) => PIECEWISE.has(n.op));
    this.stopped = odd ? (odd.op === 'select' ? 'a branch' : odd.op) : this.bases.stopped;
    this.hasRoots = this.nodes.some(isRoot);
    this.register = new Int32Array(this.nodes.length > 0 ? this.nodes[this.nodes.length - 1]!.id + 1 : 0);
    let next = 0;
    for (const node of this.nodes) {
      if (node.op === 'component') this.register[node.id] = this.register[node.args[0]!.id]! + (node.data as number);
      else {
        this.register[node.id] = next;
        next += node.op === 'solve' ? (node.data as number) : 1;
      }
    }
    this.registers = next;
  }

  get symbols(): readonly Expr[] {
    return this.nodes.filter((n) => n.op === 'symbol');
  }

  /** Values at so many points; nothing is computed yet. */
  at(points: number, residues: Residues): ExactRun {
    return new ExactRun(this, points, residues);
  }
}

/** The values of a tape's nodes at random points, as residues; NaN marks a point that is no use. */
export class ExactRun {
  private readonly v: Float64Array;
  private readonly circles = new Map<string, Circle>();
  private readonly exponents = new Map<string, Float64Array>();
  private readonly pi: Float64Array;
  private readonly salt: number;

  constructor(
    private readonly tape: ExactTape,
    readonly points: number,
    residues: Residues,
  ) {
    this.v = new Float64Array(tape.registers * points).fill(NaN);
    for (const base of tape.bases.angles) this.circles.set(base, circleOf(residues.column(points)));
    for (const base of tape.bases.exponents) this.exponents.set(base, residues.column(points));
    this.pi = residues.column(points);
    this.salt = residues.next();
  }

  column(node: Expr): Float64Array {
    const start = this.tape.register[node.id]! * this.points;
    return this.v.subarray(start, start + this.points);
  }

  /** Gives a symbol its values. */
  set(symbol: Expr, values: Float64Array): void {
    this.v.set(values, this.tape.register[symbol.id]! * this.points);
  }

  /** Computes these nodes, arguments first; symbols keep the values they were given. */
  run(nodes: readonly Expr[]): void {
    const { v, points } = this;
    const { register } = this.tape;
    for (const node of nodes) {
      const out = register[node.id]! * points;
      const { args } = node;
      work(points * (node.op === 'solve' ? args.length * (node.data as number) : 1 + args.length));
      switch (node.op) {
        case 'symbol':
        case 'component':
          break;
        case 'number':
          v.fill(residue(node.data as Rational), out, out + points);
          break;
        case 'pi':
          v.set(this.pi, out);
          break;
        case 'sum': {
          let a = register[args[0]!.id]! * points;
          const b = register[args[1]!.id]! * points;
          for (let p = 0; p < points; p++) v[out + p] = add(v[a + p]!, v[b + p]!);
          for (let k = 2; k < args.length; k++) {
            a = register[args[k]!.id]! * points;
            for (let p = 0; p < points; p++) v[out + p] = add(v[out + p]!, v[a + p]!);
          }
          break;
        }
        case 'product': {
          let a = register[args[0]!.id]! * points;
          const b = register[args[1]!.id]! * points;
          for (let p = 0; p < points; p++) v[out + p] = multiply(v[a + p]!, v[b + p]!);
          for (let k = 2; k < args.length; k++) {
            a = register[args[k]!.id]! * points;
            for (let p = 0; p < points; p++) v[out + p] = multiply(v[out + p]!, v[a + p]!);
          }
          break;
        }
        case 'power': {
          const a = register[args[0]!.id]! * points;
          const b = register[args[1]!.id]! * points;
          const exponent = args[1]!;
          const whole = exponent.op === 'number' && (exponent.data as Rational).isInteger ? (exponent.data as Rational).toNumber() : 0;
          if (whole === -1) for (let p = 0; p < points; p++) v[out + p] = inverse(v[a + p]!);
          else if (whole === 2) for (let p = 0; p < points; p++) v[out + p] = multiply(v[a + p]!, v[a + p]!);
          else for (let p = 0; p < points; p++) v[out + p] = powerAt(exponent, v[a + p]!, v[b + p]!, this.salt);
          break;
        }
        case 'solve':
          this.solve(node, out);
          break;
        default:
          this.apply(node, out);
      }
    }
  }

  private apply(node: Expr, out: number): void {
    const { v, points } = this;
    const multiples = this.tape.bases.multiples.get(node);
    const isCircular = node.op === 'sin' || node.op === 'cos' || node.op === 'tan';
    for (let p = 0; p < points; p++) {
      if (!multiples) {
        const args = node.args.map((a) => v[this.tape.register[a.id]! * points + p]!);
        v[out + p] = mixed(node.op, args, this.salt);
      } else if (isCircular) v[out + p] = circularAt(node.op, multiples, (base) => this.circles.get(base)!, p);
      else v[out + p] = exponentialAt(node.op, multiples, (base) => this.exponents.get(base)![p]!);
    }
  }

  private solve(node: Expr, out: number): void {
    const { v, points } = this;
    const n = node.data as number;
    const a = new Float64Array(n * (n + 1));
    const x = new Float64Array(n);
    const start = node.args.map((arg) => this.tape.register[arg.id]! * points);
    for (let p = 0; p < points; p++) {
      for (let i = 0; i < n; i++) {
        for (let j = 0; j < n; j++) a[i * (n + 1) + j] = v[start[i * n + j]! + p]!;
        a[i * (n + 1) + n] = v[start[n * n + i]! + p]!;
      }
      eliminate(a, n, x);
      for (let i = 0; i < n; i++) v[out + i * points + p] = x[i]!;
    }
  }
}
