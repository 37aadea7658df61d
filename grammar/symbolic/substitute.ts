import type { Memo } from "./by-id.ts";
import type { Curve } from "./curve.ts";
import type { Expr, FunctionName } from "./expression.ts";
import type { Pool } from "./pool.ts";
import { postorder } from "./postorder.ts";

/** The expression with every key of `map` replaced at once; what is put in is not looked into again. */
export function substitute(pool: Pool, expr: Expr, map: ReadonlyMap<Expr, Expr>): Expr {
  return substitution(pool, map)(expr);
}

/**
 * As `substitute` for many expressions: what they share is rebuilt once. The map may grow between calls, as long as
 * no expression given before held a key that came later. What is `untouched` holds no key and isn't looked into;
 * `done` is where results are remembered.
 */
export function substitution(
  pool: Pool,
  map: { get(key: Expr): Expr | undefined },
  untouched: (expr: Expr) => boolean = () => false,
  done: Memo<Expr> = new Map(),
): (expr: Expr) => Expr {
  const known = (expr: Expr) => done.has(expr);
  const visit = (expr: Expr) => {
    done.set(expr, map.get(expr) ?? (untouched(expr) ? expr : rebuilt(pool, expr, done)));
  };
  return (root) => {
    postorder([root], known, visit, untouched);
    return done.get(root) as Expr;
  };
}

function rebuilt(pool: Pool, expr: Expr, done: Memo<Expr>): Expr {
  if (expr.args.length === 0) return expr;
  const args: Expr[] = [];
  let same = true;
  for (const arg of expr.args) {
    const put = done.get(arg) as Expr;
    same &&= put === arg;
    args.push(put);
  }
  return same ? expr : withArgs(pool, expr, args);
}

/** The expression `expr` with other arguments, canonical again. */
export function withArgs(pool: Pool, expr: Expr, args: readonly Expr[]): Expr {
  switch (expr.op) {
    case "sum":
      return pool.sum(args);
    case "product":
      return pool.product(args);
    case "power":
      return pool.power(args[0], args[1]);
    case "call":
      return pool.call(expr.name as FunctionName, ...args);
    case "curve":
      return pool.curve(expr.curve as Curve, args[0], expr.value);
    case "where":
      return pool.where(args[0], args[1], args[2]);
    case "compare":
      return pool.compare(expr.name, args[0], args[1]);
    case "and":
      return pool.and(...args);
    case "or":
      return pool.or(...args);
    case "not":
      return pool.not(args[0]);
    default:
      return expr;
  }
}
