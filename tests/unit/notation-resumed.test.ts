import { expect, test } from 'vitest';
import { systemOf } from '../support/decide-formulas';

test('names go on after a family', () => {
  const system = systemOf('coordinates th[i] [rad] over i in 1..2, x [m]\nparameters m[i] > 0 over i in 1..2, g, k > 0, l[j] over j in 1..3\nT = m[1]*x\'^2');
  expect(system.problems).toEqual([]);
  expect(system.coordinates.map((c) => c.name)).toEqual(['th[1]', 'th[2]', 'x']);
  expect(system.parameters.map((c) => c.name)).toEqual(['m[1]', 'm[2]', 'g', 'k', 'l[1]', 'l[2]', 'l[3]']);
});
