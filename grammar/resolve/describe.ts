import type { Described } from "../syntax/tree.ts";

/** What a declaration says of itself: the `##` lines above it, else the remark behind it. */
export function describe(declaration: Described): string | null {
  return declaration.description ?? declaration.remark;
}
