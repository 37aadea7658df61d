import type { Curve } from "./curve.ts";
import type { Expr, FunctionName, Symbol } from "./expression.ts";
import type { Pool } from "./pool.ts";
import { postorder } from "./postorder.ts";

/** ∂expr/∂symbol, all other symbols held. At a corner (abs, sign, min, max, where, a curve's points) it is that of one side. */
export function derivative(pool: Pool, expr: Expr, symbol: Symbol): Expr {
  return differentiation(pool, symbol)(expr);
}

/** As `derivative` for many expressions and one symbol: what they share is differentiated once. */
export function differentiation(pool: Pool, symbol: Symbol): (expr: Expr) => Expr {
  const done = new Map<Expr, Expr>([[symbol, pool.one]]);
  const of = (expr: Expr) => done.get(expr) as Expr;
  return (root) => {
    postorder(
      [root],
      (expr) => done.has(expr),
      (expr) => done.set(expr, derived(pool, expr, of)),
    );
    return of(root);
  };
}

function derived(pool: Pool, expr: Expr, of: (expr: Expr) => Expr): Expr {
  const { args } = expr;
  switch (expr.op) {
    case "sum":
      return pool.sum(args.map(of));
    case "product":
      return pool.sum(
        args
          .filter((factor) => of(factor) !== pool.zero)
          .map((factor) => pool.product(of(factor), ...args.filter((other) => other !== factor))),
      );
    case "power":
      return derivedPower(pool, expr, of);
    case "call":
      return derivedCall(pool, expr, of);
    case "curve":
      if (of(args[0]) === pool.zero) return pool.zero;
      return pool.product(pool.curve(expr.curve as Curve, args[0], expr.value + 1), of(args[0]));
    case "where":
      return pool.where(args[0], of(args[1]), of(args[2]));
    default:
      return pool.zero;
  }
}

/** (u^v)' = v*u^(v-1)*u' + u^v*ln(u)*v' */
function derivedPower(pool: Pool, expr: Expr, of: (expr: Expr) => Expr): Expr {
  const [base, exponent] = expr.args;
  const terms: Expr[] = [];
  if (of(base) !== pool.zero) {
    terms.push(pool.product(exponent, pool.power(base, pool.subtract(exponent, pool.one)), of(base)));
  }
  if (of(exponent) !== pool.zero) terms.push(pool.product(expr, pool.call("ln", base), of(exponent)));
  return pool.sum(terms);
}

type Slope = (pool: Pool, x: Expr, value: Expr) => Expr;

/** 1/(1 + sign*x^2)^exponent, the slope of the inverse functions. */
const inverseSlope =
  (sign: 1 | -1, exponent: number): Slope =>
  (pool, x) =>
    pool.power(pool.sum(pool.one, pool.product(pool.number(sign), x, x)), pool.number(-exponent));

/** Slopes of the functions of one variable (NIST Digital Library of Mathematical Functions 4.7, 4.20, 4.24, 4.34; from memory). */
const SLOPES: Partial<Record<FunctionName, Slope>> = {
  sin: (pool, x) => pool.call("cos", x),
  cos: (pool, x) => pool.negate(pool.call("sin", x)),
  tan: (pool, _, value) => pool.sum(pool.one, pool.product(value, value)),
  asin: inverseSlope(-1, 0.5),
  acos: (pool, x, value) => pool.negate(inverseSlope(-1, 0.5)(pool, x, value)),
  atan: inverseSlope(1, 1),
  sinh: (pool, x) => pool.call("cosh", x),
  cosh: (pool, x) => pool.call("sinh", x),
  tanh: (pool, _, value) => pool.subtract(pool.one, pool.product(value, value)),
  exp: (_pool, _, value) => value,
  ln: (pool, x) => pool.power(x, pool.number(-1)),
  log10: (pool, x) => pool.divide(pool.number(1 / Math.LN10), x),
  abs: (pool, x) => pool.call("sign", x),
  sign: (pool) => pool.number(0),
};

function derivedCall(pool: Pool, expr: Expr, of: (expr: Expr) => Expr): Expr {
  const { args } = expr;
  if (args.every((arg) => of(arg) === pool.zero)) return pool.zero;
  const slope = SLOPES[expr.name as FunctionName];
  if (slope !== undefined) return pool.product(slope(pool, args[0], expr), of(args[0]));
  if (expr.name === "atan2") {
    const [y, x] = args;
    const top = pool.subtract(pool.product(x, of(y)), pool.product(y, of(x)));
    return pool.divide(top, pool.sum(pool.product(x, x), pool.product(y, y)));
  }
  return derivedExtremum(pool, expr, of);
}

/** min and max follow whichever argument holds the value. */
function derivedExtremum(pool: Pool, expr: Expr, of: (expr: Expr) => Expr): Expr {
  const fn = expr.name as "min" | "max";
  const [first, ...others] = expr.args;
  let value = first;
  let slope = of(first);
  for (const arg of others) {
    slope = pool.where(pool.compare(fn === "min" ? "<=" : ">=", value, arg), slope, of(arg));
    value = pool.call(fn, value, arg);
  }
  return slope;
}
