/** The declaration of a spatial arm of n turning joints, about the upright and the level axis in turn, by its bodies. */
export function armDeclaration(n: number): string {
  const axis = (i: number): string => `${i % 2 === 1 ? 'Rz' : 'Ry'}(q[${i}])`;
  const turned = (i: number): string => Array.from({ length: i }, (_, k) => axis(k + 1)).join('*');
  const lines = [
    '@visviva arm',
    `coordinates q[i] [rad] over i in 1..${n}     each from straight up`,
    `parameters  m[i] [kg] > 0, l[i] [m] > 0, J[i] [kg m^2] > 0 over i in 1..${n}`,
    'parameters  g [m/s^2] > 0',
    'where P[0] = (0, 0, 0)',
  ];
  for (let i = 1; i <= n; i++) {
    lines.push(`where P[${i}] = P[${i - 1}] + ${turned(i)}*(0, 0, l[${i}])`);
    lines.push(`body link${i}: mass m[${i}], inertia J[${i}], centre (P[${i - 1}] + P[${i}])/2, rotation ${turned(i)}`);
  }
  lines.push('gravity (0, 0, -g)');
  return lines.join('\n');
}

/**
 * A checked function for that arm: what the product itself prints for it, so that there is something to read and decide.
 * @param printed the function as `derive` writes it in TypeScript
 */
export function armSource(n: number, printed: string): string {
  const names = [...new Set(printed.match(/\b[mlJ]_\d+(?=: number)/g) ?? [])];
  const index = Array.from({ length: n }, (_, k) => k + 1);
  const state = [...index.map((i) => `q[${i}]`), ...index.map((i) => `q[${i}]'`)].join(', ');
  const lines = [
    armDeclaration(n),
    `reads state = [${state}]`,
    ...names.map((name) => `reads p.${name} = ${name.replace(/_(\d+)/, '[$1]')}`),
    `checks return = [${index.map((i) => `q[${i}]''`).join(', ')}]`,
  ];
  const at = printed.lastIndexOf('/** ');
  return `${printed.slice(0, at)}/*\n${lines.join('\n')}\n*/\n${printed.slice(printed.indexOf('export function', at))}`;
}
