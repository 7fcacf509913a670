// Ship against a rubber fender: stiffness that grows with the cube, drag of the water alongside.

/**
 * Moves the ship on by one time step. The fender only pushes while it is touched.
 *
 * @visviva fender
 * coordinates  x [m]                           of the hull into the fender
 * parameters   m, ma [kg] > 0, k1 [N/m] > 0, k3 [N/m^3] > 0, d [kg/m] >= 0, dt [s] > 0
 * inputs       tug [N]
 * T = 1/2*(m + ma)*x'^2                        ma is the water carried along
 * V = 1/2*k1*x^2 + 1/4*k3*x^4
 * Q[x] = tug - d*abs(x')*x'
 * ranges x in [0.01, 0.4]
 * assume ship.x > 0
 * reads  ship.x = x, ship.v = x', ship.mass = m, ship.added = ma
 * checks ship.v += dt*x''
 */
export function advance(ship, fender, tug, dt) {
  let force = tug;
  if (ship.x > 0) {
    force -= fender.k1 * ship.x + fender.k3 * Math.pow(ship.x, 3);
  }
  force -= fender.d * Math.abs(ship.v) * ship.v;

  const a = force / (ship.mass + ship.added);
  ship.v += a * dt;
  ship.x += ship.v * dt;
}
