import { changesSince, GitError, workingTree, type Changes } from '../host/git';
import { toSlashes } from '../host/paths';
import type { FileResult } from '../service/api';
import { UsageError, type Io } from './io';

/** Says of a result whether a change since a revision may have to do with it. */
export type Touched = (result: FileResult) => boolean;

/** @throws UsageError where git has no answer */
export function touchedSince(revision: string, io: Io): Touched {
  let root: string;
  let changes: Changes;
  try {
    root = workingTree(io.folder);
    changes = changesSince(root, revision);
  } catch (error) {
    if (error instanceof GitError) throw new UsageError(`--changed-since ${revision}: ${error.message}.`);
    throw error;
  }
  const full = new Set([...changes.changed, ...changes.deleted].map((f) => toSlashes(`${root}/${f}`)));
  return (r) =>
    full.has(r.file) ||
    r.dependsOn.some((f) => full.has(f)) ||
    // Of what a deleted file was to it, a result knows nothing any more but that something is missing.
    (changes.deleted.length > 0 && (r.claims.some((c) => c.verdict === 'unread') || r.problems.some((p) => p.code === 'undeclared')));
}
