import { gradient, tangents, timeDerivatives } from '../expression/differentiate';
import type { Expr } from '../expression/node';
import type { System } from './system';
import { substitute } from '../expression/substitute';

/**
 * What follows from a system, as expressions of coordinates, velocities, accelerations, inputs and parameters. Everything is
 * made when first asked for, and everything is linear in the size of the energies except the mass matrix.
 */
export class Derived {
  private cache = new Map<string, readonly Expr[]>();

  constructor(readonly system: System) {}

  private once(key: string, make: () => readonly Expr[]): readonly Expr[] {
    let value = this.cache.get(key);
    if (!value) this.cache.set(key, (value = make()));
    return value;
  }

  private get q(): readonly Expr[] {
    return this.system.coordinates.map((c) => c.symbol);
  }

  private get v(): readonly Expr[] {
    return this.system.coordinates.map((c) => c.velocity);
  }

  /** Conjugate momenta dL/dq'. */
  get momenta(): readonly Expr[] {
    const { graph, L } = this.system;
    return this.once('momenta', () => gradient(graph, [L], [graph.one], this.v));
  }

  /** dL/dq */
  get coordinateForces(): readonly Expr[] {
    const { graph, L } = this.system;
    return this.once('coordinate forces', () => gradient(graph, [L], [graph.one], this.q));
  }

  /** dD/dq' */
  get damping(): readonly Expr[] {
    const { graph, D } = this.system;
    return this.once('damping', () => gradient(graph, [D], [graph.one], this.v));
  }

  /**
   * Residuals of Lagrange's equations, zero along the motion: d/dt(dL/dq') - dL/dq + dD/dq' - Q, one per coordinate. A reverse
   * sweep over L, then a forward sweep over what it made.
   */
  get residuals(): readonly Expr[] {
    const { graph, Q } = this.system;
    return this.once('residuals', () => {
      const rates = timeDerivatives(graph, this.momenta);
      return rates.map((rate, i) =>
        graph.sum([rate, graph.negate(this.coordinateForces[i]!), this.damping[i]!, graph.negate(Q[i]!)]),
      );
    });
  }

  /** What the equations are solved for: the accelerations, then the multipliers of the constraints. */
  get unknowns(): readonly Expr[] {
    const { coordinates, constraints } = this.system;
    return [...coordinates.map((c) => c.acceleration), ...constraints.map((c) => c.multiplier)];
  }

  /**
   * One equation per unknown, zero along the motion and linear in the unknowns: Lagrange's equations with the forces of the
   * constraints, then the constraints differentiated until they hold accelerations.
   */
  get rows(): readonly Expr[] {
    const { graph, constraints } = this.system;
    if (constraints.length === 0) return this.residuals;
    return this.once('rows', () => {
      const forced = this.residuals.map((r, i) =>
        graph.sum([r, ...constraints.map((c) => graph.negate(graph.multiply(c.multiplier, c.gradient[i]!)))]),
      );
      return [...forced, ...timeDerivatives(graph, this.velocityConstraints)];
    });
  }

  /** The constraints as conditions on velocities. */
  get velocityConstraints(): readonly Expr[] {
    const { graph, constraints } = this.system;
    return this.once('velocity constraints', () => {
      const rates = timeDerivatives(graph, constraints.map((c) => c.expr));
      return constraints.map((c, i) => (c.kind === 'velocity' ? c.expr : rates[i]!));
    });
  }

  /** Entries of the mass matrix d2L/dq'dq', by rows. */
  get massMatrix(): readonly Expr[] {
    const { graph, coordinates } = this.system;
    return this.once('mass matrix', () => {
      const n = coordinates.length;
      const rows = new Array<Expr>(n * n);
      coordinates.forEach((c, j) => {
        const column = tangents(graph, this.momenta, (s) => (s === c.velocity ? graph.one : undefined));
        column.forEach((e, i) => (rows[i * n + j] = e));
      });
      return rows;
    });
  }

  /** What the accelerations are multiplied to: M q'' = right side. */
  get rightSides(): readonly Expr[] {
    const { graph } = this.system;
    return this.once('right side', () => this.atRest(this.residuals).map((e) => graph.negate(e)));
  }

  /** The accelerations, then the multipliers, by one solve node of the bordered system. */
  get solution(): readonly Expr[] {
    const { graph, coordinates, constraints } = this.system;
    return this.once('solution', () => {
      const n = coordinates.length;
      const k = constraints.length;
      if (k === 0) return graph.solve(this.massMatrix, this.rightSides);
      const matrix: Expr[] = [];
      for (let i = 0; i < n; i++) {
        for (let j = 0; j < n; j++) matrix.push(this.massMatrix[i * n + j]!);
        for (const c of constraints) matrix.push(graph.negate(c.gradient[i]!));
      }
      for (const c of constraints) {
        matrix.push(...c.gradient);
        for (let j = 0; j < k; j++) matrix.push(graph.zero);
      }
      const rest = this.atRest(timeDerivatives(graph, this.velocityConstraints));
      return graph.solve(matrix, [...this.rightSides, ...rest.map((e) => graph.negate(e))]);
    });
  }

  get accelerations(): readonly Expr[] {
    return this.solution.slice(0, this.system.coordinates.length);
  }

  /** dV/dq; undefined where no potential energy is declared apart from L. */
  get gravity(): readonly Expr[] | undefined {
    const { graph, V } = this.system;
    return V && this.once('gravity', () => gradient(graph, [V], [graph.one], this.q));
  }

  /** C q': what is left of d/dt(dT/dq') - dT/dq without accelerations; undefined where only L is declared. */
  get coriolis(): readonly Expr[] | undefined {
    const { graph, T } = this.system;
    if (!T) return undefined;
    return this.once('coriolis', () => {
      const rates = timeDerivatives(graph, gradient(graph, [T], [graph.one], this.v));
      const forces = gradient(graph, [T], [graph.one], this.q);
      return this.atRest(rates.map((r, i) => graph.subtract(r, forces[i]!)));
    });
  }

  /** Everything in the equations but M q'' and Q: the sum of Coriolis, gravity and damping vectors. */
  get bias(): readonly Expr[] {
    const { graph, Q } = this.system;
    return this.once('bias', () => this.rightSides.map((f, i) => graph.subtract(Q[i]!, f)));
  }

  /** T + V; Jacobi's integral where only L is declared. */
  get energy(): Expr {
    const { graph, T, V, L } = this.system;
    if (T && V) return graph.add(T, V);
    return graph.subtract(graph.sum(this.momenta.map((p, i) => graph.multiply(p, this.v[i]!))), L);
  }

  /** Sum of p q' less L, as a function of coordinates and velocities. */
  get hamiltonian(): Expr {
    const { graph, L } = this.system;
    return graph.subtract(graph.sum(this.momenta.map((p, i) => graph.multiply(p, this.v[i]!))), L);
  }

  /** With all accelerations zero. */
  private atRest(exprs: readonly Expr[]): readonly Expr[] {
    const { graph, coordinates } = this.system;
    const zero = new Map<Expr, Expr>(coordinates.map((c) => [c.acceleration, graph.zero]));
    return substitute(graph, exprs, zero);
  }
}
