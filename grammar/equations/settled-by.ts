import type { Expr, Symbol } from "../symbolic/expression.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import type { AlgebraicLoop } from "./model.ts";

/** The symbols that settle a value, with those in the residuals of what loops leave unknown in it. */
export function settledBy(value: Expr, loops: readonly AlgebraicLoop[]): ReadonlySet<Symbol> {
  const found = new Set(symbolsOf(value));
  // A set visits what is added to it on the way.
  for (const symbol of found) {
    if (symbol.role !== "unknown") continue;
    const loop = loops.find(({ variables }) => variables.some((variable) => variable.symbol === symbol));
    for (const each of symbolsOf(...(loop?.residuals ?? []))) found.add(each);
  }
  return found;
}

/** Whether a value hangs on a rate through what a loop leaves unknown. */
export function restsOnRates(value: Expr, loops: readonly AlgebraicLoop[]): boolean {
  if (!loops.some(({ solved }) => !solved)) return false;
  for (const { role } of settledBy(value, loops)) if (role === "rate") return true;
  return false;
}
