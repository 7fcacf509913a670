import ignore from 'ignore';

/** True where patterns, read as in a `.gitignore` of each workspace folder, leave a file out. */
export function isExcluded(file: string, folders: readonly string[], patterns: readonly string[]): boolean {
  if (patterns.length === 0) return false;
  const rules = ignore().add([...patterns]);
  return folders.some((folder) => {
    const root = folder.replace(/\/+$/, '');
    return file.startsWith(`${root}/`) && rules.ignores(file.slice(root.length + 1));
  });
}
