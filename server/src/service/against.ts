import { compareDeclarations, type Equivalence } from '../comparison/equivalence';
import { stateText } from '../diagnosis/describe';
import { formatPair } from '../expression/print/number';
import type { Budget } from '../text/budget';
import type { Document } from '../workspace/documents';
import { declares } from '../workspace/systems';
import type { Block } from '../notation/tree';
import type { Comparison } from './api';
import type { Project } from './check';

/** A declaration and the file it stands in. */
export interface Declaration {
  readonly document: Document;
  readonly block: Block;
}

/** The systems that a file declares, in their order. */
export function declarationsOf(document: Document): Declaration[] {
  return document.blocks.filter((b) => declares(b.block)).map((b) => ({ document, block: b.block }));
}

/** Compares two declarations as mechanics, in whichever direction their `where` statements allow. */
export async function compareSystems(project: Project, first: Declaration, second: Declaration, budget: Budget): Promise<Comparison> {
  const there = await compareOneWay(project, first, second, budget);
  if (there.kind !== 'undecided') return toComparison(first, second, there);
  const back = await compareOneWay(project, second, first, budget);
  return back.kind === 'undecided' ? toComparison(first, second, there) : toComparison(second, first, back);
}

async function compareOneWay(project: Project, first: Declaration, second: Declaration, budget: Budget): Promise<Equivalence> {
  // Energies that code defines are read with the first system; the second is resolved from its text alone.
  if (definesEnergies(second)) {
    return { kind: 'undecided', reason: `${second.block.name}: of two declarations whose energies are code, none is compared` };
  }
  const lookup = await project.systems.lookup(first.document, first.block, budget);
  if (lookup.kind !== 'found') return { kind: 'undecided', reason: `${first.block.name} is not declared` };
  return compareDeclarations(lookup.entry.derived.system, second.block, budget);
}

function definesEnergies({ document, block }: Declaration): boolean {
  return document.blocks.some((b) => b.block.name === block.name && b.block.statements.some((s) => s.kind === 'defines'));
}

function toComparison(first: Declaration, second: Declaration, e: Equivalence): Comparison {
  const [a, b] = [first.block.name, second.block.name];
  const names = a === b ? 'the two' : `${a} and ${b}`;
  const result = (kind: Comparison['kind'], text: string): Comparison => ({ kind, first: a, second: b, text });
  switch (e.kind) {
    case 'same':
      return result('same', `${names} have the same Lagrangian and the same forces.`);
    case 'constant':
      return result('same', `the Lagrangians of ${names} differ by a constant: the equations of motion are the same.`);
    case 'gauge':
      return result(
        'same',
        `the Lagrangians of ${names} differ by the total time derivative of a function of coordinates and time: the equations of motion are the same.`,
      );
    case 'same motion':
      return result(
        'same motion',
        `${names} move alike: their accelerations are the same, but not their equations. Momenta, energies, mass matrices and responses to further forces differ.`,
      );
    case 'differ': {
      const { witness } = e.decision;
      const [y, x] = formatPair(witness.found, witness.expected);
      return result('differ', `${names} move differently. At ${stateText(e.system, witness)}: ${e.quantity} is ${x} by ${a}, ${y} by ${b}.`);
    }
    case 'undecided':
      return result('undecided', `not decided whether ${names} are the same: ${e.reason}.`);
  }
}

/**
 * Which declarations are compared: those of equal names, or the only ones of both files; in one file, the named one with
 * every other, or with the chosen one.
 */
export function pairDeclarations(
  document: Document | undefined,
  other: Document | undefined,
  name: string | undefined,
  system: string | undefined,
): { readonly pairs: readonly (readonly [Declaration, Declaration])[] } | { readonly failure: string } {
  const all = document ? declarationsOf(document) : [];
  const left = system === undefined ? all : all.filter((d) => d.block.name === system);
  const named = (list: readonly Declaration[]): string => list.map((d) => d.block.name).join(', ');
  if (all.length === 0) return { failure: `${document?.file ?? 'the file'} declares no system` };
  if (left.length === 0) return { failure: `no system "${system!}" is declared there, but ${named(all)}` };
  const right = other ? declarationsOf(other) : [];
  if (name !== undefined) {
    const target = right.filter((d) => d.block.name === name);
    if (target.length !== 1) {
      return { failure: target.length === 0 ? `no system "${name}" is declared there, but ${named(right)}` : `"${name}" is declared ${target.length} times` };
    }
    const rest = left.filter((d) => d.block.name !== name);
    return rest.length > 0 ? { pairs: rest.map((d) => [d, target[0]!] as const) } : { failure: 'nothing else is declared there to compare it with' };
  }
  if (right.length === 0) return { failure: `${other?.file ?? 'the other file'} declares no system` };
  if (left.length === 1 && right.length === 1) return { pairs: [[left[0]!, right[0]!]] };
  const pairs = left.flatMap((d) => right.filter((e) => e.block.name === d.block.name).map((e) => [d, e] as const));
  if (pairs.length > 0) return { pairs };
  return { failure: `no name is declared in both: here ${named(left)}; there ${named(right)}. Rename one, or keep one declaration in each file` };
}
