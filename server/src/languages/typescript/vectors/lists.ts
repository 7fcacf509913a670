/**
 * What gl-matrix's functions on plain arrays mean (its documentation, modules vec2, vec3, vec4, mat2 and mat3; matrices are
 * stored column by column). The first argument of most takes the result. See `objects.ts` for the form.
 */

const vector = (n: number): string => {
  const all = [...Array(n).keys()];
  const put = (f: (i: number) => string): string => `const r = [${all.map(f).join(', ')}]; ${all.map((i) => `out[${i}] = r[${i}];`).join(' ')} return out;`;
  const sum = (f: (i: number) => string): string => all.map(f).join(' + ');
  const binary = (op: string): string => `(out, a, b) => { ${put((i) => `a[${i}] ${op} b[${i}]`)} }`;
  const letters = all.map((i) => `c${i}`).join(', ');
  const size = sum((i) => `a[${i}] * a[${i}]`);
  const gap = sum((i) => `(b[${i}] - a[${i}]) * (b[${i}] - a[${i}])`);
  return `
  create: () => [${all.map(() => '0').join(', ')}],
  fromValues: (${letters}) => [${letters}],
  clone: (a) => [${all.map((i) => `a[${i}]`).join(', ')}],
  copy: (out, a) => { ${put((i) => `a[${i}]`)} },
  set: (out, ${letters}) => { ${put((i) => `c${i}`)} },
  zero: (out) => { ${put(() => '0')} },
  add: ${binary('+')},
  subtract: ${binary('-')},
  sub: ${binary('-')},
  multiply: ${binary('*')},
  mul: ${binary('*')},
  divide: ${binary('/')},
  div: ${binary('/')},
  scale: (out, a, k) => { ${put((i) => `a[${i}] * k`)} },
  scaleAndAdd: (out, a, b, k) => { ${put((i) => `a[${i}] + b[${i}] * k`)} },
  negate: (out, a) => { ${put((i) => `-a[${i}]`)} },
  inverse: (out, a) => { ${put((i) => `1 / a[${i}]`)} },
  dot: (a, b) => ${sum((i) => `a[${i}] * b[${i}]`)},
  squaredLength: (a) => ${size},
  sqrLen: (a) => ${size},
  length: (a) => Math.sqrt(${size}),
  len: (a) => Math.sqrt(${size}),
  squaredDistance: (a, b) => ${gap},
  sqrDist: (a, b) => ${gap},
  distance: (a, b) => Math.sqrt(${gap}),
  dist: (a, b) => Math.sqrt(${gap}),
  normalize: (out, a) => { const k = 1 / Math.sqrt(${size}); ${put((i) => `a[${i}] * k`)} },
  lerp: (out, a, b, k) => { ${put((i) => `a[${i}] + k * (b[${i}] - a[${i}])`)} },`;
};

const matrix = (n: number): string => {
  const all = [...Array(n * n).keys()];
  const put = (f: (i: number) => string): string => `const r = [${all.map(f).join(', ')}]; ${all.map((i) => `out[${i}] = r[${i}];`).join(' ')} return out;`;
  const row = (i: number): number => i % n;
  const column = (i: number): number => Math.floor(i / n);
  const product = (i: number): string => [...Array(n).keys()].map((k) => `a[${k * n + row(i)}] * b[${column(i) * n + k}]`).join(' + ');
  return `
  create: () => [${all.map((i) => (row(i) === column(i) ? '1' : '0')).join(', ')}],
  fromValues: (${all.map((i) => `c${i}`).join(', ')}) => [${all.map((i) => `c${i}`).join(', ')}],
  clone: (a) => [${all.map((i) => `a[${i}]`).join(', ')}],
  copy: (out, a) => { ${put((i) => `a[${i}]`)} },
  set: (out, ${all.map((i) => `c${i}`).join(', ')}) => { ${put((i) => `c${i}`)} },
  identity: (out) => { ${put((i) => (row(i) === column(i) ? '1' : '0'))} },
  transpose: (out, a) => { ${put((i) => `a[${row(i) * n + column(i)}]`)} },
  multiply: (out, a, b) => { ${put(product)} },
  mul: (out, a, b) => { ${put(product)} },
  add: (out, a, b) => { ${put((i) => `a[${i}] + b[${i}]`)} },
  subtract: (out, a, b) => { ${put((i) => `a[${i}] - b[${i}]`)} },
  multiplyScalar: (out, a, k) => { ${put((i) => `a[${i}] * k`)} },`;
};

const transform = (n: number): string => {
  const rows = [...Array(n).keys()];
  const entry = (i: number): string => rows.map((k) => `m[${k * n + i}] * a[${k}]`).join(' + ');
  return `transformMat${n}: (out, a, m) => { const r = [${rows.map(entry).join(', ')}]; ${rows.map((i) => `out[${i}] = r[${i}];`).join(' ')} return out; },`;
};

export const GL_MATRIX = `
export const vec2 = { ${vector(2)}
  cross: (out, a, b) => { const r = a[0] * b[1] - a[1] * b[0]; out[0] = 0; out[1] = 0; out[2] = r; return out; },
  ${transform(2)}
};
export const vec3 = { ${vector(3)}
  cross: (out, a, b) => {
    const r = [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
    out[0] = r[0]; out[1] = r[1]; out[2] = r[2];
    return out;
  },
  ${transform(3)}
};
export const vec4 = { ${vector(4)} };
export const mat2 = { ${matrix(2)}
  determinant: (a) => a[0] * a[3] - a[2] * a[1],
  invert: (out, a) => {
    const d = a[0] * a[3] - a[2] * a[1];
    const r = [a[3] / d, -a[1] / d, -a[2] / d, a[0] / d];
    out[0] = r[0]; out[1] = r[1]; out[2] = r[2]; out[3] = r[3];
    return out;
  },
};
export const mat3 = { ${matrix(3)}
  determinant: (a) => a[0] * (a[4] * a[8] - a[5] * a[7]) - a[3] * (a[1] * a[8] - a[2] * a[7]) + a[6] * (a[1] * a[5] - a[2] * a[4]),
  invert: (out, a) => {
    const d = a[0] * (a[4] * a[8] - a[5] * a[7]) - a[3] * (a[1] * a[8] - a[2] * a[7]) + a[6] * (a[1] * a[5] - a[2] * a[4]);
    const r = [
      (a[4] * a[8] - a[5] * a[7]) / d, (a[2] * a[7] - a[1] * a[8]) / d, (a[1] * a[5] - a[2] * a[4]) / d,
      (a[5] * a[6] - a[3] * a[8]) / d, (a[0] * a[8] - a[2] * a[6]) / d, (a[2] * a[3] - a[0] * a[5]) / d,
      (a[3] * a[7] - a[4] * a[6]) / d, (a[1] * a[6] - a[0] * a[7]) / d, (a[0] * a[4] - a[1] * a[3]) / d,
    ];
    for (let i = 0; i < 9; i++) out[i] = r[i];
    return out;
  },
};
export const glMatrix = { toRadian: (d) => (d * Math.PI) / 180 };
`;
