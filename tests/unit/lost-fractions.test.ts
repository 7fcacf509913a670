import { describe, expect, test } from 'vitest';
import { createService, type Files } from '../../server/src/service';
import { Budget } from '../../server/src/text/budget';
import { filesOf } from '../support/check';

const rod = (first: string, quotient: string) => `${first}from math import sin
def acceleration(th, l, g):
    """
    @visviva rod
    coordinates th [rad]
    parameters m, l, g > 0
    body rod: mass m, inertia m*l^2/12, centre (l/2*sin(th), -l/2*cos(th)), angle th
    gravity (0, -g)
    checks return = th''
    """
    return -${quotient} * g / l * sin(th)
`;

async function checked(text: string, settings?: Files['settings']) {
  const service = createService({ ...filesOf(new Map()), ...(settings ? { settings } : {}) });
  service.update('rod.py', text);
  const { claims, problems } = await service.check('rod.py', new Budget());
  return { verdict: claims[0]!.verdict, problems: problems.map((p) => `${p.range.start.line}:${p.range.start.column} ${p.severity} ${p.code} ${p.message}`) };
}

describe('divisions of integers', () => {
  test('Python 3 divides', async () => {
    expect(await checked(rod('', '3 / 2'))).toEqual({ verdict: 'holds', problems: [] });
  });

  test.each([
    ['the first line', '#!/usr/bin/env python2\n', undefined],
    ['the project', '', () => ({ python: 2 as const })],
  ])('Python 2, as %s says, loses the fraction, and is told so', async (_, first, settings) => {
    const { verdict, problems } = await checked(rod(first, '(3 / 2)'), settings);
    expect(verdict).toBe('differs');
    expect(problems).toHaveLength(1);
    expect(problems[0]).toContain('warning wrong-operator `3 / 2` is 1 here, not 3/2');
  });

  test('a point, true division asked for, or a project of Python 3 keep it', async () => {
    expect((await checked(rod('#!/usr/bin/python2\n', '3.0 / 2'))).problems).toEqual([]);
    expect(await checked(rod('from __future__ import division\n', '3 / 2'), () => ({ python: 2 }))).toEqual({ verdict: 'holds', problems: [] });
    expect((await checked(rod('#!/usr/bin/python2\n', '3 / 2'), () => ({ python: 3 }))).verdict).toBe('holds');
  });

  test('a change of the setting reads the file anew', async () => {
    let python: 2 | 3 = 3;
    const service = createService({ ...filesOf(new Map()), settings: () => ({ python }) });
    service.update('rod.py', rod('', '3 / 2'));
    expect((await service.check('rod.py', new Budget())).claims[0]!.verdict).toBe('holds');
    python = 2;
    expect((await service.check('rod.py', new Budget())).claims[0]!.verdict).toBe('differs');
  });
});
