/** The package's plain bundle: its main entry needs a module loader of its own at run time, which no bundle can hold. */
declare module 'unitmath/dist/UnitMath.js' {
  /** Parses a unit; throws where it does not know one. `dimension` counts mass, length, time, current, temperature, luminous intensity, amount, angle, data, solid angle. */
  export default function unit(text: string): { readonly dimension: readonly number[] };
}
