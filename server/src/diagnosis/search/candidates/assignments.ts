import { map1, map2, type Maker } from './candidate';

/** `=` for `+=` and the like. */
export const assignments: Maker = (scene, spot, give) => {
  const { site, values, evaluations } = spot;
  const { assignment } = site;
  if (!assignment || assignment.isDeclaration || assignment.value !== site.node || assignment.target.kind === 'list') return;
  const { source } = scene;
  const from = assignment.target.span.end;
  const match = /^\s*([-+*/]?=)(?!=)/.exec(source.slice(from, site.span.start));
  if (!match) return;
  const at = { start: from + match[0].length - match[1]!.length, end: from + match[0].length };
  const name = source.slice(assignment.target.span.start, from);
  const offer = (op: string, value: readonly Float64Array[] | undefined, cost: number): void => {
    if (op === match[1]) return;
    give({
      site,
      edits: [{ span: at, text: op }],
      code: op.length === match[1]!.length ? 'sign' : 'wrong-operator',
      place: { start: assignment.target.span.start, end: site.span.end },
      cost,
      ...(value ? { values: value } : {}),
      label: `assign ${op}`,
      old: `${name} ${match[1]}`,
      new: `${name} ${op}`,
    });
  };
  if (match[1] === '=') {
    const before = scene.assignedBefore(site, evaluations);
    if (!before) return;
    offer('+=', map2(before, values, (a, b) => a + b), 1.1);
    offer('-=', map2(before, values, (a, b) => a - b), 1.2);
    offer('*=', map2(before, values, (a, b) => a * b), 1.3);
  } else if (match[1] === '+=' || match[1] === '-=') {
    offer(match[1] === '+=' ? '-=' : '+=', map1(values, (x) => -x), 0.85);
    offer('=', undefined, 1.3);
  }
};
