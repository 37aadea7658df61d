import type { Expr, Symbol } from "./expression.ts";

/** All symbols in some expressions, in the order in which they are met. */
export function symbolsOf(...exprs: readonly Expr[]): ReadonlySet<Symbol> {
  const symbols = new Set<Symbol>();
  const seen = new Set<Expr>();
  const stack = [...exprs].reverse();
  for (let expr = stack.pop(); expr !== undefined; expr = stack.pop()) {
    if (expr.op === "symbol") symbols.add(expr as Symbol);
    if (expr.args.length === 0 || seen.has(expr)) continue;
    seen.add(expr);
    for (let i = expr.args.length - 1; i >= 0; i -= 1) stack.push(expr.args[i]);
  }
  return symbols;
}

/** Calls `visit` for the symbols of an expression, more than once for what occurs more than once: for short laws. */
export function eachSymbol(expr: Expr, visit: (symbol: Symbol) => void): void {
  if (expr.op === "symbol") visit(expr as Symbol);
  else if (writtenShort(expr)) walk(expr, visit);
  else for (const symbol of symbolsOf(expr)) visit(symbol);
}

function walk(expr: Expr, visit: (symbol: Symbol) => void): void {
  if (expr.op === "symbol") visit(expr as Symbol);
  else for (const arg of expr.args) walk(arg, visit);
}

/** No deeper than a sum of products of powers, as nearly all laws are. */
function writtenShort(expr: Expr): boolean {
  for (const term of expr.args) {
    for (const factor of term.args) {
      for (const part of factor.args) if (part.args.length > 0) return false;
    }
  }
  return true;
}

export function holdsSymbol(expr: Expr, symbol: Symbol): boolean {
  let found = false;
  eachSymbol(expr, (each) => {
    found ||= each === symbol;
  });
  return found;
}
