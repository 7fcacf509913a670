const CONTEXT = 3;

/**
 * Two versions of a file as a unified diff (the format of POSIX `diff -u`), which `patch` and `git apply` read. Lines keep
 * their own ends. Empty where nothing changed.
 */
export function unifiedDiff(file: string, before: string, after: string): string {
  if (before === after) return '';
  const a = linesOf(before);
  const b = linesOf(after);
  const pairs = commonLines(a, b);
  const out = [`--- a/${file}\n`, `+++ b/${file}\n`];
  for (const hunk of hunksOf(a, b, pairs)) out.push(...hunk);
  return out.join('');
}

function linesOf(text: string): string[] {
  const lines = text.split(/(?<=\n)/);
  return lines.at(-1) === '' ? lines.slice(0, -1) : lines;
}

type Row = { readonly mark: ' ' | '-' | '+'; readonly text: string; readonly a: number; readonly b: number };

/** Line numbers that belong together: greedy from both sides, by longest common subsequence between. */
function commonLines(a: readonly string[], b: readonly string[]): [number, number][] {
  let start = 0;
  while (start < a.length && start < b.length && a[start] === b[start]) start++;
  let end = 0;
  while (end < a.length - start && end < b.length - start && a[a.length - 1 - end] === b[b.length - 1 - end]) end++;
  const pairs: [number, number][] = [];
  for (let i = 0; i < start; i++) pairs.push([i, i]);
  pairs.push(...longest(a.slice(start, a.length - end), b.slice(start, b.length - end)).map(([i, j]): [number, number] => [i + start, j + start]));
  for (let i = end; i > 0; i--) pairs.push([a.length - i, b.length - i]);
  return pairs;
}

const MOST_CELLS = 4_000_000;

function longest(a: readonly string[], b: readonly string[]): [number, number][] {
  if (a.length * b.length > MOST_CELLS) return [];
  const width = b.length + 1;
  const best = new Uint32Array((a.length + 1) * width);
  for (let i = a.length - 1; i >= 0; i--) {
    for (let j = b.length - 1; j >= 0; j--) {
      best[i * width + j] = a[i] === b[j] ? best[(i + 1) * width + j + 1]! + 1 : Math.max(best[(i + 1) * width + j]!, best[i * width + j + 1]!);
    }
  }
  const out: [number, number][] = [];
  for (let i = 0, j = 0; i < a.length && j < b.length; ) {
    if (a[i] === b[j]) out.push([i++, j++]);
    else if (best[(i + 1) * width + j]! >= best[i * width + j + 1]!) i++;
    else j++;
  }
  return out;
}

function hunksOf(a: readonly string[], b: readonly string[], pairs: readonly [number, number][]): string[][] {
  const rows: Row[] = [];
  let [i, j] = [0, 0];
  for (const [x, y] of [...pairs, [a.length, b.length] as [number, number]]) {
    for (; i < x; i++) rows.push({ mark: '-', text: a[i]!, a: i, b: j });
    for (; j < y; j++) rows.push({ mark: '+', text: b[j]!, a: i, b: j });
    if (x < a.length) rows.push({ mark: ' ', text: a[x]!, a: i++, b: j++ });
  }
  const hunks: string[][] = [];
  const changes = rows.flatMap((r, k) => (r.mark === ' ' ? [] : [k]));
  for (let k = 0; k < changes.length; ) {
    const from = Math.max(0, changes[k]! - CONTEXT);
    let to = changes[k]!;
    while (k < changes.length && changes[k]! <= to + 2 * CONTEXT) to = changes[k++]!;
    hunks.push(written(rows.slice(from, Math.min(rows.length, to + CONTEXT + 1))));
  }
  return hunks;
}

function written(rows: readonly Row[]): string[] {
  const first = rows[0]!;
  const count = (mark: '-' | '+') => rows.filter((r) => r.mark === ' ' || r.mark === mark).length;
  const range = (start: number, n: number) => `${n === 0 ? start : start + 1}${n === 1 ? '' : `,${n}`}`;
  const head = `@@ -${range(first.a, count('-'))} +${range(first.b, count('+'))} @@\n`;
  return [head, ...rows.map((r) => `${r.mark}${r.text}${r.text.endsWith('\n') ? '' : '\n\\ No newline at end of file\n'}`)];
}
