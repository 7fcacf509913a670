import { describe, expect, it } from 'vitest';
import { Folder } from './support/command';

const block = (name: string, lines: string) => `/*\n@visviva ${name}\n${lines}\n*/\n`;
const BASE = 'coordinates th [rad]\nparameters m, l, g > 0\n';
const POINTS = `${BASE}point bob: mass m at (l*sin(th), -l*cos(th))\ngravity (0, -g)`;
const typed = (T: string, V: string) => `${BASE}T = ${T}\nV = ${V}`;
const T = "1/2*m*l^2*th'^2";
const V = '-m*g*l*cos(th)';

describe('visviva derive --against', () => {
  it('tells what two files have in common, in terms of mechanics', () => {
    using f = new Folder({
      'points.ts': block('bob', POINTS),
      'typed.ts': block('bob', typed(T, V)),
      'shifted.ts': block('bob', typed(T, `${V} + m*g*l`)),
      'gauge.ts': block('bob', `${BASE}L = ${T} - (${V}) + m*l*th*th' + m*g*t`),
      'scaled.ts': block('bob', typed(`2*${T}`, `2*(${V})`)),
      'wrong.ts': block('bob', typed(T, `-(${V})`)),
      'other.ts': block('bob', "coordinates x\nparameters k\nT = 1/2*x'^2"),
    });
    const against = (file: string) => f.run('derive', 'points.ts', '--against', file);
    expect(against('typed.ts')).toMatchObject({ status: 0, log: '' });
    expect(against('typed.ts').out).toBe('bob / bob\n  the two have the same Lagrangian and the same forces.\n');
    expect(against('shifted.ts').out).toContain('differ by a constant');
    expect(against('shifted.ts').status).toBe(0);
    expect(against('gauge.ts').out).toContain('total time derivative');
    expect(against('gauge.ts').status).toBe(0);
    expect(against('scaled.ts').out).toContain('accelerations are the same, but not their equations');
    expect(against('scaled.ts').status).toBe(1);
    const wrong = against('wrong.ts');
    expect(wrong.status).toBe(1);
    expect(wrong.out).toMatch(/move differently\. At th = .*th'' is -?\d.* by bob, -?\d.* by bob\./);
    expect(against('other.ts').status).toBe(1);
    expect(against('other.ts').out).toContain('not decided');
  });

  it('compares systems of one file by name, in both directions', () => {
    const bound = 'coordinates x, y [m]\nparameters m, l, g > 0\npoint bob: mass m at (x, y)\ngravity (0, -g)\nconstraint x^2 + y^2 = l^2';
    const free = `${BASE}where x = l*sin(th), y = -l*cos(th)\nT = ${T}\nV = ${V}`;
    using f = new Folder({ 'a.ts': block('bound', bound) + block('free', free), 'b.ts': block('one', POINTS) + block('two', POINTS) });
    const forth = f.run('derive', 'a.ts', '--against', 'free');
    expect(forth.out).toContain('bound and free have the same Lagrangian');
    expect(forth.status).toBe(0);
    expect(f.run('derive', 'a.ts', '--against', 'bound').status).toBe(0);
    expect(f.run('derive', 'a.ts', '--against', 'gone')).toMatchObject({ status: 2, out: '' });
    expect(f.run('derive', 'a.ts', '--against', 'b.ts')).toMatchObject({ status: 2, out: '' });
    expect(f.run('derive', 'a.ts', '--system', 'x', '--against', 'b.ts').status).toBe(2);
  });

  it('reads energies that the code defines', () => {
    const code = (sign: string) =>
      `/*\n@visviva bob\n${BASE}*/\n/*\n@visviva bob\nT = ${T}\ndefines V\n*/\nfunction V(th, { m, l, g }) {\n  return ${sign}m*g*l*Math.cos(th);\n}\n`.replace(
        `${BASE}*/\n/*\n@visviva bob\n`,
        BASE,
      );
    using f = new Folder({ 'typed.ts': block('bob', POINTS), 'code.ts': code('-'), 'wrong.ts': code('') });
    expect(f.run('derive', 'typed.ts', '--against', 'code.ts').status).toBe(0);
    expect(f.run('derive', 'code.ts', '--against', 'typed.ts').status).toBe(0);
    expect(f.run('derive', 'wrong.ts', '--against', 'typed.ts').out).toContain('move differently');
    expect(f.run('derive', 'wrong.ts', '--against', 'code.ts').out).toContain('not decided');
  });
});
