import type { Expr } from "../symbolic/expression.ts";
import type { Pool } from "../symbolic/pool.ts";
import { collectedForm } from "../symbolic/rational-form.ts";

const SMALL = 60;
const LONG = 400;

/** One fraction instead of several over sums, where that is the shorter way to write it and cheap to find. */
export function tidy(pool: Pool, expr: Expr): Expr {
  return writtenSize(expr, LONG) < LONG && hasSumBelow(expr) ? collected(pool, expr) : expr;
}

/** As `tidy`, also where nothing but symbols stands below: for what a solution was put into, and may cancel. */
export function collected(pool: Pool, expr: Expr): Expr {
  const before = writtenSize(expr, LONG);
  if (before >= LONG) return expr;
  const form = collectedForm(pool, expr, SMALL);
  return form !== null && writtenSize(form, before + 1) <= before ? form : expr;
}

/** For what is short as written. */
function hasSumBelow(expr: Expr): boolean {
  if (expr.op === "power" && expr.args[0].op === "sum" && expr.args[1].value < 0) return true;
  return expr.args.some(hasSumBelow);
}

/** The number of nodes in the text of an expression, counted up to `limit`: never the work of walking a deep one. */
function writtenSize(expr: Expr, limit: number): number {
  let size = 1;
  const stack = [expr];
  for (let top = stack.pop(); top !== undefined && size < limit; top = stack.pop()) {
    size += top.args.length;
    for (const arg of top.args) stack.push(arg);
  }
  return size;
}
