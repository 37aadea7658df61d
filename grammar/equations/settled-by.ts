import type { Expr, Symbol } from "../symbolic/expression.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import type { AlgebraicLoop } from "./model.ts";

/** The symbols that settle a value, with those in the residuals of what loops leave unknown in it. */
export function settledBy(value: Expr, loops: readonly AlgebraicLoop[]): ReadonlySet<Symbol> {
  const found = new Set(symbolsOf(value));
  for (const symbol of throughLoops(value, loops)) found.add(symbol);
  return found;
}

/** Whether a value hangs on a rate through what a loop leaves unknown. */
export function restsOnRates(value: Expr, loops: readonly AlgebraicLoop[]): boolean {
  if (!loops.some(({ solved }) => !solved)) return false;
  for (const { role } of throughLoops(value, loops)) if (role === "rate") return true;
  return false;
}

/** The symbols in the residuals of what loops leave unknown in a value. */
function throughLoops(value: Expr, loops: readonly AlgebraicLoop[]): ReadonlySet<Symbol> {
  const found = new Set<Symbol>();
  const open = [...symbolsOf(value)].filter(({ role }) => role === "unknown");
  for (let symbol = open.pop(); symbol !== undefined; symbol = open.pop()) {
    const loop = loops.find(({ variables }) => variables.some((variable) => variable.symbol === symbol));
    for (const each of symbolsOf(...(loop?.residuals ?? []))) {
      if (found.has(each)) continue;
      found.add(each);
      if (each.role === "unknown") open.push(each);
    }
  }
  return found;
}
