import type { Expr, Symbol } from "./expression.ts";
import { postorder } from "./postorder.ts";

/** All symbols in an expression, in the order in which they are met. */
export function symbolsOf(...exprs: readonly Expr[]): ReadonlySet<Symbol> {
  const seen = new Set<Expr>();
  const symbols = new Set<Symbol>();
  postorder(
    exprs,
    (expr) => seen.has(expr),
    (expr) => {
      seen.add(expr);
      if (expr.op === "symbol") symbols.add(expr as Symbol);
    },
  );
  return symbols;
}
