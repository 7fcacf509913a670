/** Paths as text, with `/` throughout; the file system is not asked. */

export function slashes(path: string): string {
  return path.replace(/\\/g, '/');
}

/** `src` of `src/crane.ts`; `.` where there is no folder. */
export function directoryOf(path: string): string {
  const at = path.lastIndexOf('/');
  return at < 0 ? '.' : at === 0 ? '/' : path.slice(0, at);
}

/** Joins and takes `.` and `..` out; a relative path stays relative to the same place. */
export function joinPath(directory: string, path: string): string {
  const whole = path.startsWith('/') || /^[a-z]:\//i.test(path) ? path : `${directory}/${path}`;
  const rooted = whole.startsWith('/');
  const parts: string[] = [];
  for (const part of whole.split('/')) {
    if (part === '' || part === '.') continue;
    if (part !== '..') parts.push(part);
    else if (parts.length > 0 && parts[parts.length - 1] !== '..') parts.pop();
    else if (!rooted) parts.push('..');
  }
  return (rooted ? '/' : '') + parts.join('/');
}
