/**
 * Luffing boom: a uniform lattice boom, hinged at its foot, with the hook load at the tip. The luffing cylinder is
 * modelled as a torque about the foot pin.
 */
export class LuffingBoom {
  angle = 0.6;
  speed = 0;

  constructor(
    private readonly boomMass: number,
    private readonly hookMass: number,
    private readonly length: number,
    private readonly pinFriction: number,
    private readonly gravity = 9.81,
  ) {}

  /** About the foot pin: a rod of full length, and the hook load as a point at its tip. */
  get inertia(): number {
    return (this.boomMass * this.length ** 2) / 3 + this.hookMass * this.length ** 2;
  }

  /**
   * One step of the trainer's clock.
   *
   * @visviva luffing-boom
   * coordinates  be [rad]                      of the boom above the horizontal
   * parameters   mb, mh [kg] > 0, L [m] > 0, c [N m s] >= 0, g [m/s^2] > 0, dt [s] > 0
   * inputs       torque [N m]
   * where C = (L/2*cos(be), L/2*sin(be)), H = (L*cos(be), L*sin(be))
   * T = 1/2*mb*dot(C', C') + 1/24*mb*L^2*be'^2 + 1/2*mh*dot(H', H')
   * V = mb*g*C.y + mh*g*H.y
   * D = 1/2*c*be'^2
   * Q[be] = torque
   * reads  this.angle = be, this.speed = be'
   * reads  this.boomMass = mb, this.hookMass = mh, this.length = L, this.pinFriction = c, this.gravity = g
   * checks this.speed += dt*be''
   */
  step(torque: number, dt: number): void {
    const weight = (this.boomMass + this.hookMass) * this.gravity * this.length * Math.cos(this.angle);
    const acceleration = (torque - this.pinFriction * this.speed - weight) / this.inertia;
    this.speed += acceleration * dt;
    this.angle += this.speed * dt;
  }
}
