import { equationText, tex, texAll, text } from '../expression/print';
import type { Expr } from '../expression/node';
import { equationsOfMotion, solvedAccelerations, tidy } from '../mechanics/equations';
import type { Derived } from '../mechanics/lagrange';
import type { Document } from '../workspace/documents';
import { declares } from '../workspace/systems';
import type { FileDetails, SystemDetails, Written } from './api';
import type { BlockOutcome } from './check';
import { claimDetails } from './claim-details';

/** Longer expressions say nothing in a report. */
const LONGEST = 1500;

export function fileDetails(document: Document, outcomes: readonly BlockOutcome[]): FileDetails {
  // A system that is declared elsewhere is told of too: the file's claims rest on it.
  const first = outcomes.filter((o, i) => outcomes.findIndex((p) => p.placed.block.name === o.placed.block.name) === i);
  const systems = first.map((o) => systemDetails(outcomes.find((p) => p.placed.block.name === o.placed.block.name && declares(p.placed.block)) ?? o));
  return { systems, claims: outcomes.flatMap((o) => claimDetails(document, o)) };
}

function systemDetails({ placed, entry }: BlockOutcome): SystemDetails {
  const { block } = placed;
  const derived = entry?.derived;
  const blocked = derived ? derived.system.blocked?.reason : `\`${block.name}\` is not resolved`;
  const coordinates = (derived?.system.coordinates ?? []).map((c) => ({
    name: c.name,
    ...(c.unit ? { unit: c.unit } : {}),
    ...(c.remark ? { remark: c.remark } : {}),
  }));
  if (!derived || blocked !== undefined) {
    return { name: block.name, coordinates, energies: [], equations: [], accelerations: [], ...(blocked === undefined ? {} : { blocked }) };
  }
  return { name: block.name, coordinates, ...equations(derived) };
}

function equations(derived: Derived): Pick<SystemDetails, 'energies' | 'equations' | 'accelerations'> {
  const { system } = derived;
  const g = system.graph;
  const energies: [string, string, Expr | undefined][] = [
    ['T', 'T', system.T],
    ['V', 'V', system.V],
    ['L', 'L', system.T && system.V ? undefined : system.L],
    ['D', 'D', system.D],
    ...system.coordinates.map((c, i): [string, string, Expr] => [`Q[${c.name}]`, `Q_{${tex(c.symbol)}}`, system.Q[i]!]),
  ];
  return {
    energies: energies.flatMap(([name, symbol, e]) => {
      if (!e || e === g.zero) return [];
      const tidied = tidy(g, e);
      return short({ name, text: `${name} = ${text(tidied)}`, tex: `${symbol} = ${tex(tidied)}` });
    }),
    equations: equationsOfMotion(derived).flatMap((e) => {
      const printed = texAll([e.left, e.right]);
      const where = printed.where.map((w) => `,\\quad ${w.name} = ${w.text}`).join('');
      return short({
        coordinate: e.coordinate.name,
        text: equationText(e.left, e.right),
        tex: `${printed.values[0]!} = ${printed.values[1]!}${where}`,
      });
    }),
    accelerations: (solvedAccelerations(derived) ?? []).flatMap((a) =>
      short({
        coordinate: a.coordinate.name,
        text: `${a.coordinate.name}'' = ${text(a.expr)}`,
        tex: `${tex(a.coordinate.acceleration)} = ${tex(a.expr)}`,
      }),
    ),
  };
}

function short<T extends Written>(w: T): T[] {
  return w.text.length > LONGEST ? [] : [w];
}
