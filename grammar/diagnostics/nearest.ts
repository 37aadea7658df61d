/**
 * The declared name that was most likely meant: within a third of its letters of edits (insert, delete, replace,
 * swap of neighbours: Damerau, Communications of the ACM 7, 1964), ties going to the first in the order given. A name
 * of one letter is like no other but its own capital.
 */
export function nearest(name: string, candidates: Iterable<string>): string | null {
  let best: string | null = null;
  let least = name.length === 1 ? 1 : Math.max(1, Math.floor(name.length / 3)) + 1;
  for (const candidate of candidates) {
    if (Math.abs(candidate.length - name.length) >= least || candidate === name) continue;
    const distance = name.toLowerCase() === candidate.toLowerCase() ? 0.5 : edits(name, candidate);
    if (distance < least) {
      least = distance;
      best = candidate;
    }
  }
  return best;
}

function edits(a: string, b: string): number {
  let before: number[] = [];
  let last = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i += 1) {
    const row = [i];
    for (let j = 1; j <= b.length; j += 1) {
      const same = a[i - 1] === b[j - 1];
      row[j] = Math.min(last[j] + 1, row[j - 1] + 1, last[j - 1] + (same ? 0 : 1));
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1]) {
        row[j] = Math.min(row[j], before[j - 2] + 1);
      }
    }
    before = last;
    last = row;
  }
  return last[b.length];
}
