/** Natural order of names (`cell[2]` before `cell[10]`): the order of every choice that the theory leaves open. */
export function compareNames(a: string, b: string): number {
  let i = 0;
  let j = 0;
  while (i < a.length && j < b.length) {
    const digitA = isDigit(a, i);
    const digitB = isDigit(b, j);
    if (digitA && digitB) {
      let endA = i;
      let endB = j;
      while (endA < a.length && isDigit(a, endA)) endA += 1;
      while (endB < b.length && isDigit(b, endB)) endB += 1;
      const difference = Number(a.slice(i, endA)) - Number(b.slice(j, endB));
      if (difference !== 0) return difference;
      i = endA;
      j = endB;
    } else {
      const difference = a.charCodeAt(i) - b.charCodeAt(j);
      if (difference !== 0) return difference;
      i += 1;
      j += 1;
    }
  }
  return a.length - i - (b.length - j) || (a < b ? -1 : a > b ? 1 : 0);
}

function isDigit(text: string, at: number): boolean {
  const code = text.charCodeAt(at);
  return code >= 48 && code <= 57;
}
