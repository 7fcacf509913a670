/** Two pontoons of the floating stage, one behind the other, on elastic lines between the dolphins. */

export interface Line {
  readonly stiffness: number;
  readonly damping: number;
}

export interface Pontoon {
  readonly mass: number;
  /** From the place at rest, m. */
  offset: number;
  speed: number;
}

/**
 * Surge accelerations of both pontoons under the wash of a passing ferry.
 *
 * @visviva floating-stage
 * coordinates  u, w [m]                        outer and inner pontoon, from rest, towards the sea
 * parameters   mu, mw [kg] > 0, k, kl [N/m] > 0, c, cl [N s/m] >= 0
 * inputs       wash [N]
 * T = 1/2*mu*u'^2 + 1/2*mw*w'^2
 * V = 1/2*k*u^2 + 1/2*kl*(u - w)^2
 * D = 1/2*c*u'^2 + 1/2*cl*(u' - w')^2
 * Q[u] = wash
 * reads  outer.mass = mu, outer.offset = u, outer.speed = u', inner.mass = mw, inner.offset = w, inner.speed = w'
 * reads  bow.stiffness = k, bow.damping = c, link.stiffness = kl, link.damping = cl
 * checks return.outer = u'', return.inner = w''
 */
export function surge(outer: Pontoon, inner: Pontoon, bow: Line, link: Line, wash: number): { outer: number; inner: number } {
  const stretch = outer.offset - inner.offset;
  const rate = outer.speed - inner.speed;
  const linkForce = link.stiffness * stretch + link.damping * rate;
  const bowForce = bow.stiffness * outer.offset + bow.damping * outer.speed;
  return {
    outer: (wash - bowForce - linkForce) / outer.mass,
    inner: linkForce / outer.mass,
  };
}
