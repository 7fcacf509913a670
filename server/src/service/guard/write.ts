import { KEYED, type Argument, type Guard, type GuardResult } from './result';

/** Test runners that a guard is written for, and the language of each. */
export const guardRunners = { vitest: 'typescript', node: 'typescript', pytest: 'python', unittest: 'python' } as const;
export type GuardRunner = keyof typeof guardRunners;

export function isGuardRunner(name: string): name is GuardRunner {
  return Object.hasOwn(guardRunners, name);
}

/** Code rounds a little at every step; what is wrong differs by more. */
const TOLERANCE = '1e-9';

/**
 * A test that needs nothing but the runner: states, and values that the declared energies give there.
 * @param module the name of the tested file, without its ending
 */
export function writeGuards(results: readonly GuardResult[], module: string, runner: GuardRunner): string {
  const guards = results.filter((g): g is Guard => 'cases' in g);
  const refused = results.flatMap((g) => ('refused' in g ? [`${g.function === '' ? g.system : g.function}: ${g.refused}.`] : []));
  return guardRunners[runner] === 'python' ? python(guards, refused, module, runner) : typescript(guards, refused, module, runner);
}

const REMARK = [
  'Expected values follow from the declared energies, computed to more than a hundred digits and rounded to doubles.',
  'Written by `visviva derive --as test`; write it anew when the declaration changes.',
];

function typescript(guards: readonly Guard[], refused: readonly string[], module: string, runner: GuardRunner): string {
  const names = [...new Set(guards.map((g) => g.function))];
  const out = [
    ...REMARK.map((r) => `// ${r}`),
    ...refused.map((r) => `// Not covered: ${r}`),
    ...(runner === 'vitest' ? ["import { expect, test } from 'vitest';"] : ["import assert from 'node:assert/strict';", "import { test } from 'node:test';"]),
    `import { ${names.join(', ')} } from './${module}${runner === 'node' ? '.js' : ''}';`,
    '',
    'const isClose = (found, expected) =>',
    `  Math.abs(found - expected) <= ${TOLERANCE} * Math.max(1, Math.abs(expected));`,
  ];
  if (runner === 'vitest') out[out.length - 2] = 'const isClose = (found: number, expected: number) =>';
  for (const g of guards) {
    out.push('', `test(${quoted(`${g.function}: ${g.system}`)}, () => {`);
    for (const c of g.cases) {
      out.push(`  {`, `    // ${c.state}`, `    const found = ${g.function}(${c.arguments.map((a) => argumentTs(a)).join(', ')})${runner === 'vitest' && g.outputs.some((o) => o.path.length > 0) ? ' as any' : ''};`);
      g.outputs.forEach((o, i) => {
        const value = `found${o.path.map(stepTs).join('')}`;
        const test = `isClose(${value}, ${c.expected[i]!})`;
        const message = quoted(`${o.quantity} at ${c.state}`);
        out.push(runner === 'vitest' ? `    expect(${test}, ${message}).toBe(true);` : `    assert.ok(${test}, ${message});`);
      });
      out.push('  }');
    }
    out.push('});');
  }
  return `${out.join('\n')}\n`;
}

function python(guards: readonly Guard[], refused: readonly string[], module: string, runner: GuardRunner): string {
  const names = [...new Set(guards.map((g) => g.function))];
  const inClass = runner === 'unittest';
  const usesNamespace = guards.some((g) => g.cases.some((c) => c.arguments.some((a) => argumentPy(a).includes('SimpleNamespace('))));
  const out = [
    ...REMARK.map((r) => `# ${r}`),
    ...refused.map((r) => `# Not covered: ${r}`),
    ...(inClass ? ['import unittest'] : []),
    ...(usesNamespace ? ['from types import SimpleNamespace'] : []),
    ...(inClass || usesNamespace ? [''] : []),
    `from ${module} import ${names.join(', ')}`,
    '',
    '',
    'def is_close(found, expected):',
    `    return abs(found - expected) <= ${TOLERANCE} * max(1.0, abs(expected))`,
  ];
  if (inClass) out.push('', '', 'class Guard(unittest.TestCase):');
  const indent = inClass ? '    ' : '';
  guards.forEach((g, i) => {
    const name = `test_${g.function}_${g.system}`.replace(/[^\p{L}\p{N}_]/gu, '_');
    out.push(...(inClass ? (i > 0 ? [''] : []) : ['', '']), `${indent}def ${name}(${inClass ? 'self' : ''}):`);
    for (const c of g.cases) {
      out.push(`${indent}    # ${c.state}`, `${indent}    found = ${g.function}(${c.arguments.map(argumentPy).join(', ')})`);
      g.outputs.forEach((o, k) => {
        const test = `is_close(found${o.path.map(stepPy).join('')}, ${numberPy(c.expected[k]!)})`;
        const message = quoted(`${o.quantity} at ${c.state}`);
        out.push(inClass ? `${indent}    self.assertTrue(${test}, ${message})` : `${indent}    assert ${test}, ${message}`);
      });
    }
  });
  if (inClass) out.push('', '', "if __name__ == '__main__':", '    unittest.main()');
  return `${out.join('\n')}\n`;
}

function quoted(text: string): string {
  return JSON.stringify(text);
}

function stepTs(step: number | string): string {
  if (typeof step === 'number') return `[${step}]`;
  return step.startsWith(KEYED) ? `[${quoted(step.slice(1))}]` : `.${step}`;
}

function stepPy(step: number | string): string {
  return stepTs(step);
}

function argumentTs(a: Argument): string {
  if (typeof a === 'number') return String(a);
  if (Array.isArray(a)) return `[${(a as readonly Argument[]).map(argumentTs).join(', ')}]`;
  return `{ ${Object.entries(a).map(([k, v]) => `${quoted(k.replace(KEYED, ''))}: ${argumentTs(v as Argument)}`).join(', ')} }`;
}

function argumentPy(a: Argument): string {
  if (typeof a === 'number') return numberPy(a);
  if (Array.isArray(a)) return `[${(a as readonly Argument[]).map(argumentPy).join(', ')}]`;
  const entries = Object.entries(a) as [string, Argument][];
  if (entries.some(([k]) => k.startsWith(KEYED))) return `{${entries.map(([k, v]) => `${quoted(k.replace(KEYED, ''))}: ${argumentPy(v)}`).join(', ')}}`;
  return `SimpleNamespace(${entries.map(([k, v]) => `${k}=${argumentPy(v)}`).join(', ')})`;
}

function numberPy(x: number): string {
  return Number.isInteger(x) ? `${x}.0` : String(x);
}
