/**
 * What vectors of the usual npm packages mean, for those whose vectors are objects with methods: three (Vector2 and Vector3;
 * its documentation, "Math"), p5 (p5.Vector; its reference) and victor (its API page). Written as code in the meaning's own
 * words, not as in the packages: it says what each method gives, and is read like a class of the project. Methods that
 * are not here stay unread.
 */

const CHAINED = (axes: readonly string[]): string => {
  const each = (f: (a: string) => string): string => axes.map((a) => `this.${a} = ${f(a)};`).join(' ');
  const sum = (f: (a: string) => string): string => axes.map(f).join(' + ');
  const parameters = axes.map((a) => `p${a}`).join(', ');
  return `
  set(${parameters}) { ${each((a) => `p${a}`)} return this; }
  setScalar(k) { ${each(() => 'k')} return this; }
  copy(v) { ${each((a) => `v.${a}`)} return this; }
  clone() { return new this.constructor(${axes.map((a) => `this.${a}`).join(', ')}); }
  add(v) { ${each((a) => `this.${a} + v.${a}`)} return this; }
  addScalar(k) { ${each((a) => `this.${a} + k`)} return this; }
  addVectors(v, w) { ${each((a) => `v.${a} + w.${a}`)} return this; }
  addScaledVector(v, k) { ${each((a) => `this.${a} + v.${a} * k`)} return this; }
  sub(v) { ${each((a) => `this.${a} - v.${a}`)} return this; }
  subScalar(k) { ${each((a) => `this.${a} - k`)} return this; }
  subVectors(v, w) { ${each((a) => `v.${a} - w.${a}`)} return this; }
  multiply(v) { ${each((a) => `this.${a} * v.${a}`)} return this; }
  multiplyVectors(v, w) { ${each((a) => `v.${a} * w.${a}`)} return this; }
  multiplyScalar(k) { ${each((a) => `this.${a} * k`)} return this; }
  divide(v) { ${each((a) => `this.${a} / v.${a}`)} return this; }
  divideScalar(k) { ${each((a) => `this.${a} / k`)} return this; }
  negate() { ${each((a) => `-this.${a}`)} return this; }
  dot(v) { return ${sum((a) => `this.${a} * v.${a}`)}; }
  lengthSq() { return ${sum((a) => `this.${a} * this.${a}`)}; }
  length() { return Math.sqrt(this.lengthSq()); }
  normalize() { return this.divideScalar(this.length()); }
  setLength(k) { return this.normalize().multiplyScalar(k); }
  distanceToSquared(v) { return ${sum((a) => `(this.${a} - v.${a}) * (this.${a} - v.${a})`)}; }
  distanceTo(v) { return Math.sqrt(this.distanceToSquared(v)); }
  lerp(v, k) { ${each((a) => `this.${a} + (v.${a} - this.${a}) * k`)} return this; }
  lerpVectors(v, w, k) { ${each((a) => `v.${a} + (w.${a} - v.${a}) * k`)} return this; }
  fromArray(list, at = 0) { ${axes.map((a, i) => `this.${a} = list[at + ${i}];`).join(' ')} return this; }
  toArray() { return [${axes.map((a) => `this.${a}`).join(', ')}]; }
  ${axes.map((a) => `set${a.toUpperCase()}(k) { this.${a} = k; return this; }`).join('\n  ')}`;
};

const cloned = (text: string, name: string): string => text.replace('this.constructor', name);

export const THREE = `
export class Vector2 {
  constructor(px = 0, py = 0) { this.x = px; this.y = py; }
  ${cloned(CHAINED(['x', 'y']), 'Vector2')}
  cross(v) { return this.x * v.y - this.y * v.x; }
}
export class Vector3 {
  constructor(px = 0, py = 0, pz = 0) { this.x = px; this.y = py; this.z = pz; }
  ${cloned(CHAINED(['x', 'y', 'z']), 'Vector3')}
  crossVectors(v, w) {
    const px = v.y * w.z - v.z * w.y, py = v.z * w.x - v.x * w.z, pz = v.x * w.y - v.y * w.x;
    this.x = px; this.y = py; this.z = pz;
    return this;
  }
  cross(v) { return this.crossVectors(this, v); }
}
export const MathUtils = {
  degToRad: (d) => (d * Math.PI) / 180,
  radToDeg: (r) => (r * 180) / Math.PI,
  clamp: (v, low, high) => Math.max(low, Math.min(high, v)),
};
`;

export const P5 = `
class Vector {
  constructor(px = 0, py = 0, pz = 0) { this.x = px; this.y = py; this.z = pz; }
  set(v, w = 0, u = 0) {
    if (typeof v === 'number') { this.x = v; this.y = w; this.z = u; } else { this.x = v.x; this.y = v.y; this.z = v.z; }
    return this;
  }
  copy() { return new Vector(this.x, this.y, this.z); }
  add(v, w = 0, u = 0) {
    if (typeof v === 'number') { this.x += v; this.y += w; this.z += u; } else { this.x += v.x; this.y += v.y; this.z += v.z; }
    return this;
  }
  sub(v, w = 0, u = 0) {
    if (typeof v === 'number') { this.x -= v; this.y -= w; this.z -= u; } else { this.x -= v.x; this.y -= v.y; this.z -= v.z; }
    return this;
  }
  mult(k) {
    if (typeof k === 'number') { this.x *= k; this.y *= k; this.z *= k; } else { this.x *= k.x; this.y *= k.y; this.z *= k.z; }
    return this;
  }
  div(k) {
    if (typeof k === 'number') { this.x /= k; this.y /= k; this.z /= k; } else { this.x /= k.x; this.y /= k.y; this.z /= k.z; }
    return this;
  }
  magSq() { return this.x * this.x + this.y * this.y + this.z * this.z; }
  mag() { return Math.sqrt(this.magSq()); }
  dot(v) { return this.x * v.x + this.y * v.y + this.z * v.z; }
  cross(v) { return new Vector(this.y * v.z - this.z * v.y, this.z * v.x - this.x * v.z, this.x * v.y - this.y * v.x); }
  dist(v) { return Vector.sub(this, v).mag(); }
  normalize() { return this.mult(1 / this.mag()); }
  setMag(k) { return this.normalize().mult(k); }
  limit(k) { if (this.magSq() > k * k) { this.setMag(k); } return this; }
  heading() { return Math.atan2(this.y, this.x); }
  rotate(r) {
    const px = this.x * Math.cos(r) - this.y * Math.sin(r), py = this.x * Math.sin(r) + this.y * Math.cos(r);
    this.x = px; this.y = py;
    return this;
  }
  lerp(v, k) { this.x += (v.x - this.x) * k; this.y += (v.y - this.y) * k; this.z += (v.z - this.z) * k; return this; }
  array() { return [this.x, this.y, this.z]; }
  static add(v, w) { return v.copy().add(w); }
  static sub(v, w) { return new Vector(v.x - w.x, v.y - w.y, v.z - w.z); }
  static mult(v, k) { return new Vector(v.x, v.y, v.z).mult(k); }
  static div(v, k) { return new Vector(v.x, v.y, v.z).div(k); }
  static dot(v, w) { return v.x * w.x + v.y * w.y + v.z * w.z; }
  static dist(v, w) { return Vector.sub(v, w).mag(); }
  static normalize(v) { return new Vector(v.x, v.y, v.z).normalize(); }
  static copy(v) { return new Vector(v.x, v.y, v.z); }
  static fromAngle(r, k = 1) { return new Vector(k * Math.cos(r), k * Math.sin(r)); }
}
export { Vector };
export const createVector = (px = 0, py = 0, pz = 0) => new Vector(px, py, pz);
`.replace('return v.copy().add(w)', 'return new Vector(v.x + w.x, v.y + w.y, v.z + w.z)');

export const VICTOR = `
export default class Victor {
  constructor(px = 0, py = 0) { this.x = px; this.y = py; }
  copy(v) { this.x = v.x; this.y = v.y; return this; }
  clone() { return new Victor(this.x, this.y); }
  add(v) { this.x += v.x; this.y += v.y; return this; }
  addX(v) { this.x += v.x; return this; }
  addY(v) { this.y += v.y; return this; }
  addScalar(k) { this.x += k; this.y += k; return this; }
  subtract(v) { this.x -= v.x; this.y -= v.y; return this; }
  subtractScalar(k) { this.x -= k; this.y -= k; return this; }
  multiply(v) { this.x *= v.x; this.y *= v.y; return this; }
  multiplyScalar(k) { this.x *= k; this.y *= k; return this; }
  invert() { this.x = -this.x; this.y = -this.y; return this; }
  dot(v) { return this.x * v.x + this.y * v.y; }
  cross(v) { return this.x * v.y - this.y * v.x; }
  lengthSq() { return this.x * this.x + this.y * this.y; }
  length() { return Math.sqrt(this.lengthSq()); }
  magnitude() { return this.length(); }
  distanceSq(v) { return (this.x - v.x) * (this.x - v.x) + (this.y - v.y) * (this.y - v.y); }
  distance(v) { return Math.sqrt(this.distanceSq(v)); }
  toObject() { return { x: this.x, y: this.y }; }
  toArray() { return [this.x, this.y]; }
  static fromArray(list) { return new Victor(list[0], list[1]); }
  static fromObject(v) { return new Victor(v.x, v.y); }
}
`;
