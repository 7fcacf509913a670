import { multiply, PRIME } from '../../server/src/expression/exact/field';
import { cpuTime, report, type Row } from './measure';

/** Multiplication modulo primes of different sizes: what a bit of certainty costs. */
const N = 4096;
const drawn = (p: number): number[] => Array.from({ length: N }, (_, i) => Math.floor(((i * 0.6180339887498949) % 1) * p));

function perProduct(runs: number, f: () => void): number {
  for (let i = 0; i < runs / 4; i++) f();
  const before = cpuTime();
  for (let i = 0; i < runs; i++) f();
  return ((cpuTime() - before) * 1e6) / (runs * N);
}

const rows: Row[] = [];
const add = (name: string, bits: number, ns: number): void => void rows.push([name, ns.toFixed(2), ((ns / bits) * 60).toFixed(1)]);
{
  const a = Float64Array.from(drawn(PRIME));
  const b = a.slice().reverse();
  const out = new Float64Array(N);
  add('26 bits in doubles', 26, perProduct(2000, () => {
    for (let i = 0; i < N; i++) out[i] = multiply(a[i]!, b[i]!);
  }));
}
{
  const p = 2 ** 31 - 19;
  const over = 1 / p;
  const a = Int32Array.from(drawn(p));
  const b = a.slice().reverse();
  const out = new Int32Array(N);
  add('31 bits in integers, quotient in doubles', 31, perProduct(2000, () => {
    for (let i = 0; i < N; i++) {
      const r = (Math.imul(a[i]!, b[i]!) - Math.imul(Math.floor(a[i]! * b[i]! * over), p)) | 0;
      out[i] = r < 0 ? r + p : r;
    }
  }));
}
{
  const p = 2n ** 61n - 1n;
  const a = drawn(2 ** 52).map((x) => (BigInt(x) * 511n) % p);
  const b = [...a].reverse();
  const out = new Array<bigint>(N);
  add('61 bits in BigInt', 61, perProduct(20, () => {
    for (let i = 0; i < N; i++) out[i] = (a[i]! * b[i]!) % p;
  }));
}
report('modular', 'Modular multiplication', ['', 'ns for a product', 'ns for 60 bits'], rows);
