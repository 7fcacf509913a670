import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { checkText } from '../support/check';
import { mismatches } from '../support/compare';
import { parseFixture, type Fixture } from '../support/fixtures';
import { Judge } from '../support/judge';

/** The sample workspace has the right and wrong claims that its README promises. */
const SAMPLES: readonly { file: string; run?: string; wrong?: string; unread?: string }[] = [
  {
    file: 'cranes/ship-to-shore.ts',
    run: "rates({ position: x, sway: th, velocity: x', swayRate: th' }, { trolleyMass: M, loadMass: m, ropeLength: l, rolling: c }, F)",
  },
  {
    file: 'cranes/slewing-crane.ts',
    run: "slew([a, th, a', th'], { slewInertia: J, radius: R, rope: l, load: m, g }, tau)",
    wrong: 'return[2]',
  },
  {
    file: 'cranes/luffing-boom.ts',
    run: "const self = new LuffingBoom(mb, mh, L, c, g); self.angle = be; self.speed = be';\n//= self.step(torque, dt)",
    wrong: 'this.speed',
  },
  { file: 'cranes/grab.js', run: "const dydt = [];\n//= grabRates(dydt, [al, be, al', be'], X'', { mh, mg, lr, lc, g })" },
  {
    file: 'quay/mooring.ts',
    run: "surge({ mass: mu, offset: u, speed: u' }, { mass: mw, offset: w, speed: w' }, { stiffness: k, damping: c }, { stiffness: kl, damping: cl }, wash)",
    wrong: 'return.inner',
  },
  {
    file: 'quay/fender.js',
    run: "const ship = { x: Math.abs(x), v: x', mass: m, added: ma };\n//= advance(ship, { k1, k3, d }, tug, dt)",
  },
  { file: 'rides/wave-swinger.ts', run: "swingAcceleration({ crown: R, chain: l, seat: m, drag: b }, th, th', ps', h'', g)" },
  {
    file: 'rides/pirate-ship.js',
    run: "const self = new PirateShip({ hull: m, passengers: 0, arm: r, gyration: rg, windage: w });\n//= self.phi = phi; self.omega = phi';\n//= self.acceleration(F)",
    wrong: 'return',
  },
  { file: 'rides/half-pipe.ts', run: "trough([x, x'], P, m, a, g)" },
  { file: 'rides/drop-tower.ts', unread: 'zDotDot' },
  { file: 'rides/big-wheel.py' },
];

const root = new URL('../../sample-workspace/', import.meta.url);
const others = new Map([['cranes/grab.visviva', readFileSync(new URL('cranes/grab.visviva', root), 'utf8')]]);

describe.each(SAMPLES)('$file', ({ file, run, wrong, unread }) => {
  const text = readFileSync(new URL(file, root), 'utf8');
  const expectation = unread ? `//! ${unread} unread: brakeForce` : '';
  const fixture: Fixture = parseFixture(file, `${text}\n${run ? `//= ${run}` : ''}\n${expectation}\n`);
  const section = fixture.sections[0]!;
  const truth = run ? new Judge(fixture, section, others).judge(fixture.text) : undefined;

  test.runIf(truth)('is right and wrong where it is meant to be', () => {
    expect(truth!.filter((j) => !j.holds).map((j) => j.output)).toEqual(wrong ? [wrong] : []);
  });

  test('is reported so', async () => {
    expect(mismatches(await checkText(file, text, others), fixture, section, truth)).toEqual([]);
  });
});
