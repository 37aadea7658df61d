import { type Curve, curveValue } from "./curve.ts";
import type { Expr, FunctionName, Symbol } from "./expression.ts";
import { postorder } from "./postorder.ts";

/** The number an expression has when each symbol has the value `lookup` gives; NaN where it isn't defined. */
export function evaluate(expr: Expr, lookup: (symbol: Symbol) => number): number {
  return evaluator(lookup)(expr);
}

/** As `evaluate` for many expressions at one point: what they share is worked out once. */
export function evaluator(lookup: (symbol: Symbol) => number): (expr: Expr) => number {
  const values = new Map<Expr, number>();
  const valueOf = (expr: Expr) => values.get(expr) as number;
  return (root) => {
    postorder(
      [root],
      (expr) => values.has(expr),
      (expr) => values.set(expr, valueFrom(expr, valueOf, lookup)),
    );
    return valueOf(root);
  };
}

function valueFrom(expr: Expr, valueOf: (arg: Expr) => number, lookup: (symbol: Symbol) => number): number {
  const { args } = expr;
  switch (expr.op) {
    case "number":
      return expr.value;
    case "symbol":
      return lookup(expr as Symbol);
    case "sum":
      return args.reduce((total, arg) => total + valueOf(arg), 0);
    case "product":
      return quotientValue(args, valueOf);
    case "power":
      return args[1].value === 0.5 ? Math.sqrt(valueOf(args[0])) : valueOf(args[0]) ** valueOf(args[1]);
    case "call":
      return applyFunction(expr.name as FunctionName, args.map(valueOf));
    case "curve":
      return curveValue(expr.curve as Curve, expr.value, valueOf(args[0]));
    case "where":
      return valueOf(args[0]) !== 0 ? valueOf(args[1]) : valueOf(args[2]);
    case "compare":
      return holds(expr.name, valueOf(args[0]), valueOf(args[1])) ? 1 : 0;
    case "and":
      return args.every((arg) => valueOf(arg) !== 0) ? 1 : 0;
    case "or":
      return args.some((arg) => valueOf(arg) !== 0) ? 1 : 0;
    case "not":
      return valueOf(args[0]) === 0 ? 1 : 0;
  }
}

/** What stands below the fraction bar is divided by, not multiplied with its inverse: 3/10 has one rounding. */
function quotientValue(factors: readonly Expr[], valueOf: (arg: Expr) => number): number {
  let above = 1;
  let below = 1;
  for (const factor of factors) {
    if (factor.op === "power" && factor.args[1].value === -1) below *= valueOf(factor.args[0]);
    else above *= valueOf(factor);
  }
  return above / below;
}

export function holds(op: string, a: number, b: number): boolean {
  switch (op) {
    case "<":
      return a < b;
    case "<=":
      return a <= b;
    case ">":
      return a > b;
    case ">=":
      return a >= b;
    case "=":
      return a === b;
    default:
      return a !== b;
  }
}

export function applyFunction(fn: FunctionName, args: readonly number[]): number {
  // `min` and `max` take any number of values.
  const call = (fn === "ln" ? Math.log : Math[fn]) as (...values: readonly number[]) => number;
  return call(...args);
}
