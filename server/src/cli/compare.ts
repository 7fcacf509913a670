import { Option, type Command } from 'commander';
import { statSync } from 'node:fs';
import { relative } from 'node:path';
import { createDiskFiles } from '../host/files';
import { commitOf, filesHolding, filesOf, GitError, textOf, workingTree } from '../host/git';
import { absolute, toSlashes } from '../host/paths';
import { declarationMark } from '@visviva/shared';
import type { Files } from '../service/api';
import { handlesFile } from '../service/handles';
import type { SystemChange } from '../service/physics-changes';
import { UsageError, type Io, type Status } from './io';
import { changesJson, changesMarkdown, changesText, type Comparison } from './report/changes';

const MILLISECONDS_PER_FILE = 60_000;

const writers: Readonly<Record<string, (c: Comparison) => string>> = { text: changesText, markdown: changesMarkdown, json: changesJson };

/** Defines `visviva compare`. */
export function addCompare(program: Command, io: Io, finish: (status: Status) => void): void {
  program
    .command('compare')
    .description('tell what changed in the physics between two revisions, or two folders')
    .argument('<before>', 'a revision of git, or a folder')
    .argument('[after]', 'the same; the working tree when it is not given')
    .addOption(new Option('--format <format>', 'how it is written').choices(Object.keys(writers)).default('text'))
    .addHelpText('after', '\nExit status: 0 the physics is as it was, 1 it changed, 2 failure.')
    .action(async (before: string, after: string | undefined, options: { format: string }) => {
      const [a, b] = [sideOf(before, io), sideOf(after ?? '.', io)];
      const { readPhysics } = await import('../service/physics');
      const { physicsChanges } = await import('../service/physics-changes');
      const changes = physicsChanges(await readPhysics(a.files, MILLISECONDS_PER_FILE), await readPhysics(b.files, MILLISECONDS_PER_FILE), MILLISECONDS_PER_FILE);
      const comparison: Comparison = { before: a.name, after: b.name, systems: changes.map((c) => ({ ...c, file: inSide(c, a, b) })) };
      io.out(writers[options.format]!(comparison));
      finish(changes.some((c) => c.status !== 'same' && c.status !== 'rewritten') ? 1 : 0);
    });
}

interface Side {
  readonly name: string;
  readonly root: string;
  readonly files: Files;
}

function inSide(c: SystemChange, a: Side, b: Side): string {
  return toSlashes(relative((c.status === 'removed' ? a : b).root, c.file));
}

function sideOf(name: string, io: Io): Side {
  const folder = toSlashes(absolute(name, io.folder));
  if (statSync(folder, { throwIfNoEntry: false })?.isDirectory()) {
    const root = name === '.' ? rootOf(io.folder) : folder;
    return { name: name === '.' ? 'working tree' : name, root, files: createDiskFiles(() => [root], handlesFile) };
  }
  try {
    const root = toSlashes(workingTree(io.folder));
    return { name, root, files: filesAt(root, commitOf(root, name)) };
  } catch (error) {
    if (error instanceof GitError) throw new UsageError(`"${name}" is no folder, and as a revision: ${error.message}.`);
    throw error;
  }
}

function rootOf(folder: string): string {
  try {
    return toSlashes(workingTree(folder));
  } catch {
    return folder;
  }
}

/** The files of a commit, under the names that they have in the working tree. */
function filesAt(root: string, commit: string): Files {
  const known = new Set(filesOf(root, commit));
  const texts = new Map<string, string | undefined>();
  const full = (file: string) => `${root}/${file}`;
  const holding = new Set(filesHolding(root, commit, declarationMark));
  const declaring = [...known].filter((f) => handlesFile(f) && (f.endsWith('.visviva') || holding.has(f))).map(full).sort();
  return {
    read(file) {
      const short = file.startsWith(`${root}/`) ? file.slice(root.length + 1) : undefined;
      if (short === undefined || !known.has(short)) return undefined;
      if (!texts.has(short)) texts.set(short, textOf(root, commit, short));
      return texts.get(short);
    },
    declarations: () => declaring,
  };
}
