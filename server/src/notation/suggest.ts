/** Edit distance by insertion, deletion, replacement and swap of neighbours, given up above `most`. */
export function editDistance(a: string, b: string, most = 3): number {
  if (Math.abs(a.length - b.length) > most || a.length > 64 || b.length > 64) return most + 1;
  let twoAgo: number[] = [];
  let previous = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const row = [i];
    for (let j = 1; j <= b.length; j++) {
      let best = Math.min(previous[j]! + 1, row[j - 1]! + 1, previous[j - 1]! + (a[i - 1] === b[j - 1] ? 0 : 1));
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1]) best = Math.min(best, twoAgo[j - 2]! + 1);
      row.push(best);
    }
    twoAgo = previous;
    previous = row;
  }
  return previous[b.length]!;
}

/** The nearest of some words, if near enough to be what was meant. */
export function nearest(word: string, words: Iterable<string>): string | undefined {
  let best: string | undefined;
  let least = word.length < 4 ? 2 : 3;
  for (const candidate of words) {
    const d = editDistance(word, candidate, 2);
    if (d < least) [best, least] = [candidate, d];
  }
  return best;
}
