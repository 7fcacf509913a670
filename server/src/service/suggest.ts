import type { ClassNode, FunctionNode, Program } from '../program/form';
import { nodesOf } from '../program/scan';
import { energyOf, guessOf, isAcceleration, isVelocityOf } from './suggest-names';
import { scanFunction, type FunctionScan, type Slot } from './suggest-scan';

/**
 * A first declaration for code that has none: what its names say about coordinates, velocities, parameters and outputs.
 * It is a guess, to be completed and read by a person; nothing is checked by it before that.
 */
export interface Suggestion {
  /** `rates`, `Pendulum.step` */
  readonly function: string;
  /** Offset of the function it stands above. */
  readonly offset: number;
  /** The lines of the declaration, without the marks of a comment. */
  readonly lines: readonly string[];
}

export function suggestDeclarations(program: Program): Suggestion[] {
  const declared = new Set<FunctionNode | ClassNode>();
  for (const c of program.comments) if (c.subject.kind !== 'file') declared.add(c.subject.node);
  const functions = functionsOf(program).filter(({ node, owner }) => !declared.has(node) && !(owner && declared.has(owner)));
  const energies = functions.flatMap((f) => {
    const energy = energyOf(f.node.name);
    return energy ? [{ ...f, energy }] : [];
  });
  const found: Suggestion[] = [];
  for (const f of functions) {
    if (energyOf(f.node.name)) continue;
    const scan = scanFunction(program, f.node);
    const lines = scan.isComputing ? declarationOf(f.path, scan, found.length === 0 ? energies : []) : undefined;
    if (lines) found.push({ function: f.path, offset: f.offset, lines });
  }
  if (found.length === 0) return [];
  const system = systemName(found[0]!.function);
  for (const e of energies) {
    const line = e.energy === 'E' ? 'checks   return = E' : `defines  ${e.energy}`;
    found.push({ function: e.path, offset: e.offset, lines: [`@visviva ${system}`, line] });
  }
  return found.sort((a, b) => a.offset - b.offset);
}

interface Found {
  readonly path: string;
  readonly node: FunctionNode;
  readonly owner?: ClassNode;
  readonly offset: number;
}

function functionsOf(program: Program): Found[] {
  const found = new Map<FunctionNode, Found>();
  for (const n of nodesOf(program.body)) {
    if ('members' in n && 'nameSpan' in n) {
      const owner = n as unknown as ClassNode;
      for (const m of owner.members) {
        if (m.node && m.kind !== 'constructor') found.set(m.node, { path: `${owner.name}.${m.name}`, node: m.node, owner, offset: m.span.start });
      }
    } else if ('bodySpan' in n && 'parameters' in n) {
      const node = n as unknown as FunctionNode;
      if (!found.has(node) && node.name !== 'constructor' && !node.name.startsWith('<')) found.set(node, { path: node.name, node, offset: node.span.start });
    }
  }
  return [...found.values()];
}

function systemName(path: string): string {
  return path.replace(/([a-z\d])([A-Z])/g, '$1-$2').replace(/[^\p{L}\d]+/gu, '-').toLowerCase();
}

interface Pair {
  readonly position: Slot;
  readonly velocity: Slot;
}

function declarationOf(path: string, scan: FunctionScan, energies: readonly { energy: string }[]): string[] | undefined {
  const pairs = pairsOf(scan.slots);
  if (pairs.length === 0) return undefined;
  const state = new Set(pairs.flatMap((p) => [p.position, p.velocity]));
  const rest = scan.slots.filter((s) => !state.has(s) && !isAcceleration(s.name) && /^[\p{L}_][\p{L}\p{N}_]*$/u.test(s.name));
  const coordinates = pairs.map((p) => p.position.name);
  const lines = [`@visviva ${systemName(path)}`];
  const angular = (name: string): boolean => scan.angles.has(name) || /^(?:th|theta|phi|psi|alpha|angle)\d*$/i.test(name);
  lines.push(...pairs.map((p) => `coordinates  ${p.position.name} [${angular(p.position.name) ? 'rad' : 'm'}]    say from where and in which sense it counts`));
  const written = new Set(scan.written.map((w) => w.path));
  for (const kind of ['parameter', 'input'] as const) {
    const names = new Map(rest.filter((s) => guessOf(s.name).kind === kind && !written.has(s.path)).map((s) => [s.name, guessOf(s.name).unit]));
    if (names.size > 0) lines.push(`${kind === 'parameter' ? 'parameters ' : 'inputs     '}  ${[...names].map(([n, unit]) => (unit ? `${n} ${unit}` : n)).join(', ')}`);
  }
  const has = (energy: string): boolean => energies.some((e) => e.energy === energy);
  if (!has('L')) {
    if (!has('T')) lines.push('T =    the kinetic energy; or points and bodies: `point bob: mass m at (x, y)`');
    if (!has('V')) lines.push('V =    the potential energy; or `gravity (0, -g)` and springs');
  }
  const reads = readsOf(pairs);
  if (reads.length > 0) lines.push(`reads        ${reads.join(', ')}`);
  const claims = claimsOf(scan, pairs, coordinates);
  lines.push(`checks       ${claims ?? `acceleration = ${coordinates[0]}''    name what the code computes`}`);
  return lines;
}

/** Each velocity with the coordinate whose derivative its name says it is; each slot once. */
function pairsOf(slots: readonly Slot[]): Pair[] {
  const pairs: Pair[] = [];
  const used = new Set<Slot>();
  for (const position of slots) {
    if (used.has(position)) continue;
    const velocity = slots.find((s) => s !== position && !used.has(s) && isVelocityOf(s.name, position.name));
    if (!velocity || slots.some((s) => s !== position && isVelocityOf(position.name, s.name))) continue;
    used.add(position).add(velocity);
    pairs.push({ position, velocity });
  }
  return pairs;
}

/** What the names do not say by themselves. */
function readsOf(pairs: readonly Pair[]): string[] {
  return pairs.flatMap(({ position, velocity }) => {
    const q = position.name;
    const reads: string[] = [];
    if (position.path !== q && !position.path.endsWith(`.${q}`)) reads.push(`${position.path} = ${q}`);
    reads.push(`${velocity.path} = ${q}'`);
    return reads;
  });
}

function claimsOf(scan: FunctionScan, pairs: readonly Pair[], coordinates: readonly string[]): string | undefined {
  const { returned } = scan;
  const velocities = new Map(pairs.map((p) => [p.velocity.name, p.position.name]));
  if (Array.isArray(returned) && returned.length > 0) {
    const open = coordinates.filter((q) => q !== undefined);
    const claims = returned.map((item) => {
      const of = item.name === undefined ? undefined : velocities.get(item.name);
      return of !== undefined ? `${of}'` : open.length > 0 ? `${open.shift()!}''` : undefined;
    });
    if (claims.includes(undefined)) return undefined;
    if (returned[0]!.key === undefined) return `return = [${claims.join(', ')}]`;
    return returned.map((item, k) => `return.${item.key!} = ${claims[k]!}`).join(', ');
  }
  const slots = scan.written.flatMap(({ path, increment }) => {
    const index = increment ? undefined : /\[\d+\]$/.exec(path)?.[0];
    const of = index === undefined ? undefined : pairs.find((p) => p.position.path.endsWith(index) || p.velocity.path.endsWith(index));
    return of && index !== undefined ? [`${path} = ${of.position.name}${of.position.path.endsWith(index) ? "'" : "''"}`] : [];
  });
  if (slots.length > 0) return slots.join(', ');
  const steps = pairs.filter((p) => scan.written.some((w) => w.path === p.velocity.path));
  const accelerations = scan.locals.filter(isAcceleration);
  if (accelerations.length >= coordinates.length && coordinates.length > 0) {
    return coordinates.map((q, k) => `${accelerations[k]!} = ${q}''`).join(', ');
  }
  if (steps.length > 0) return steps.map((p) => `${p.velocity.path} += dt*${p.position.name}''`).join(', ');
  return returned === 'value' && coordinates.length === 1 ? `return = ${coordinates[0]!}''` : undefined;
}
