/**
 * The candidate that was most likely meant by `word`, or null where none is close: at most one slip of the pen in
 * a short word, two in a longer one. A slip is a letter too many, missing, wrong, or two swapped (optimal string
 * alignment distance). Ties go to the earlier candidate.
 */
export function nearest(word: string, candidates: Iterable<string>): string | null {
  const allowed = word.length <= 2 ? 0 : word.length <= 5 ? 1 : 2;
  let best: string | null = null;
  let least = allowed + 1;
  for (const candidate of candidates) {
    if (candidate.toLowerCase() === word.toLowerCase() && candidate !== word) return candidate;
    if (candidate === word || Math.abs(candidate.length - word.length) >= least) continue;
    const distance = slips(word, candidate);
    if (distance < least) {
      least = distance;
      best = candidate;
    }
  }
  return best;
}

/** Long words are never near enough to be worth the table. */
const LONGEST = 64;

function slips(a: string, b: string): number {
  if (a.length > LONGEST || b.length > LONGEST) return Number.POSITIVE_INFINITY;
  let before: number[] = [];
  let previous = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i += 1) {
    const row = [i];
    for (let j = 1; j <= b.length; j += 1) {
      const same = a[i - 1] === b[j - 1];
      let cost = Math.min(row[j - 1] + 1, previous[j] + 1, previous[j - 1] + (same ? 0 : 1));
      const swapped = i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1];
      if (swapped) cost = Math.min(cost, before[j - 2] + 1);
      row.push(cost);
    }
    before = previous;
    previous = row;
  }
  return previous[b.length];
}
