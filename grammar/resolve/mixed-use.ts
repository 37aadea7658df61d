import type { Variable } from "./law-scope.ts";

export interface MentionedVariable {
  readonly port: string;
  readonly variable: Variable;
}

/** What each kind of port of an IC speaks of: its state, and what the energy gives for it. */
const P_TYPE: readonly Variable[] = ["p", "f"];

/** A port of an IC stores by its p or by its q, never by both; says which port the laws use both ways, else null. */
export function mixedUse(mentioned: readonly MentionedVariable[]): string | null {
  const first = new Map<string, Variable>();
  for (const { port, variable } of mentioned) {
    const before = first.get(port);
    if (before === undefined) first.set(port, variable);
    else if (P_TYPE.includes(before) !== P_TYPE.includes(variable)) {
      return (
        `The laws use \`${port}.${before}\` and \`${port}.${variable}\`, but a port of an IC either has ` +
        "`e` and `q` (it stores displacement) or `f` and `p` (it stores momentum)."
      );
    }
  }
  return null;
}
