import { spawnSync } from 'node:child_process';

/** Questions to git, by its own command. Names come back as they are, whatever is in them. */

export class GitError extends Error {}

function git(folder: string, args: readonly string[]): Buffer {
  const r = spawnSync('git', ['-c', 'core.quotepath=off', ...args], { cwd: folder, maxBuffer: 1 << 28, env: { ...process.env, GIT_OPTIONAL_LOCKS: '0', LC_ALL: 'C' } });
  if (r.error) throw new GitError((r.error as NodeJS.ErrnoException).code === 'ENOENT' ? 'git is not installed here' : `git does not run (${r.error.message})`);
  if (r.status !== 0) throw new GitError(r.stderr.toString().trim().split('\n')[0]!.replace(/^fatal: /, '') || `git ${args[0]} failed`);
  return r.stdout;
}

function list(bytes: Buffer): string[] {
  return bytes.toString('utf8').split('\0').filter((s) => s !== '');
}

/** The root of the working tree around a folder. */
export function workingTree(folder: string): string {
  return git(folder, ['rev-parse', '--show-toplevel']).toString().replace(/\r?\n$/, '');
}

/** The commit that a name of a revision means. */
export function commitOf(folder: string, revision: string): string {
  try {
    return git(folder, ['rev-parse', '--verify', '--quiet', '--end-of-options', `${revision}^{commit}`]).toString().trim();
  } catch (error) {
    if (error instanceof GitError && /not a git repository|not installed/.test(error.message)) throw error;
    throw new GitError(`there is no revision "${revision}" here`);
  }
}

export interface Changes {
  /** From the root of the working tree. */
  readonly changed: readonly string[];
  readonly deleted: readonly string[];
}

/**
 * What the working tree has changed since it left the line of a revision: commits, what is not committed, and new files.
 */
export function changesSince(root: string, revision: string): Changes {
  const commit = commitOf(root, revision);
  let base = commit;
  try {
    base = git(root, ['merge-base', commit, 'HEAD']).toString().trim() || commit;
  } catch {
    // A shallow clone may not hold where the two lines parted.
  }
  const differing = (filter: string) => list(git(root, ['diff', '--name-only', '-z', '--no-renames', `--diff-filter=${filter}`, base, '--']));
  const untracked = list(git(root, ['ls-files', '--others', '--exclude-standard', '-z']));
  return { changed: [...differing('d'), ...untracked], deleted: differing('D') };
}

/** Files of a commit, from its root. */
export function filesOf(root: string, commit: string): string[] {
  return list(git(root, ['ls-tree', '-r', '-z', '--name-only', '--full-tree', commit]));
}

/** Files of a commit that hold a text. */
export function filesHolding(root: string, commit: string, text: string): string[] {
  const r = spawnSync('git', ['grep', '-l', '-z', '-F', '-e', text, commit, '--'], { cwd: root, maxBuffer: 1 << 28 });
  if (r.status !== 0 && r.status !== 1) throw new GitError(r.stderr.toString().trim());
  return list(r.stdout).map((name) => name.slice(commit.length + 1));
}

/** The text of a file of a commit; undefined where there is none. */
export function textOf(root: string, commit: string, file: string): string | undefined {
  try {
    return git(root, ['cat-file', 'blob', `${commit}:${file}`]).toString('utf8');
  } catch {
    return undefined;
  }
}
