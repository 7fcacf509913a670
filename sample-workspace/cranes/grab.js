// Clamshell grab under the hook block; the physics stands in grab.visviva.

const AL = 0;
const BE = 1;
const AL_DOT = 2;
const BE_DOT = 3;

/**
 * @visviva bulk-grab
 * reads  y = [al, be, al', be'], trolleyAcceleration = X''
 * checks dydt = [al', be', al'', be'']
 */
export function grabRates(dydt, y, trolleyAcceleration, { mh, mg, lr, lc, g }) {
  const d = y[AL] - y[BE];
  const m11 = (mh + mg) * lr;
  const m12 = mg * lc * Math.cos(d);
  const m21 = lr * Math.cos(d);
  const m22 = lc;

  let f1 = -mg * lc * y[BE_DOT] ** 2 * Math.sin(d);
  f1 -= (mh + mg) * (g * Math.sin(y[AL]) + trolleyAcceleration * Math.cos(y[AL]));
  let f2 = lr * y[AL_DOT] ** 2 * Math.sin(d);
  f2 -= g * Math.sin(y[BE]) + trolleyAcceleration * Math.cos(y[BE]);

  const det = m11 * m22 - m12 * m21;
  dydt[AL] = y[AL_DOT];
  dydt[BE] = y[BE_DOT];
  dydt[AL_DOT] = (m22 * f1 - m12 * f2) / det;
  dydt[BE_DOT] = (m11 * f2 - m21 * f1) / det;
}
