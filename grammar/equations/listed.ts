const SHOWN = 8;

/** Names as a sentence lists them: `a`, `b` and `c`; the rest of a long list is counted. */
export function listed(names: readonly string[]): string {
  const shown = names.slice(0, SHOWN).map((name) => `\`${name}\``);
  const rest = names.length - shown.length;
  if (rest > 0) return `${shown.join(", ")} and ${rest} more`;
  if (shown.length < 2) return shown.join("");
  return `${shown.slice(0, -1).join(", ")} and ${shown[shown.length - 1]}`;
}
