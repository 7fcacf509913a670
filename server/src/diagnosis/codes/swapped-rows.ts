import type { CodeDoc } from './doc';

export const swappedRows: CodeDoc = {
  code: 'swapped-rows',
  about: 'claim',
  title: 'an output holds the value of another coordinate',
  meaning: `The value is right, but it belongs to another row: two accelerations are exchanged, or one is returned twice.`,
  why: `State vectors are ordered by habit ([x, th, x', th'] or [x, x', th, th']). Mixing the two orders gives numbers that an
integrator accepts without complaint.`,
  found: `The found value equals the expected value of another coordinate of the same system, at every sampled state.`,
  example: `  return [xd, thd, thdd, xdd];               // claims: return = [x', th', x'', th'']`,
  remedy: `Put the outputs in the order of the claim, or correct the claim if the code's order is the intended one.`,
};
