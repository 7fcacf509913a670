/** The "Grey Gull" swinging boat, driven by a friction wheel under its keel. */

const G = 9.81;

export class PirateShip {
  constructor({ hull, passengers, arm, gyration, windage }) {
    this.m = hull + passengers;
    this.r = arm;
    this.gyration = gyration;
    this.windage = windage;
    this.phi = 0;
    this.omega = 0;
  }

  /**
   * @visviva pirate-ship
   * coordinates  phi [rad]                     from straight down
   * parameters   m [kg] > 0, r, rg [m] > 0, g [m/s^2] > 0, w [N m s^2] >= 0
   * inputs       F [N]                         of the wheel on the keel, along the arc of radius r
   * T = 1/2*m*(r^2 + rg^2)*phi'^2
   * V = -m*g*r*cos(phi)
   * Q[phi] = F*r - w*abs(phi')*phi'
   * reads  this.gyration = rg, this.windage = w, this.omega = phi', G = g, wheel = F
   * checks return = phi''
   */
  acceleration(wheel) {
    const inertia = this.m * (this.r ** 2 + this.gyration ** 2);
    const restoring = -this.m * G * this.r * Math.sin(this.phi);
    const drive = wheel * this.r;
    const air = this.windage * this.omega ** 2;
    return (restoring + drive - air) / inertia;
  }
}
