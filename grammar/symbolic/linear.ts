import type { Expr, Symbol } from "./expression.ts";
import type { Pool } from "./pool.ts";
import { postorder } from "./postorder.ts";
import { withArgs } from "./substitute.ts";

/** expr = Σ coefficients·unknown + constant, with neither holding an unknown. */
export interface LinearForm {
  readonly coefficients: ReadonlyMap<Symbol, Expr>;
  readonly constant: Expr;
}

/**
 * Linear forms in `unknowns`, read off the structure; null for what isn't linear in them. What several expressions
 * share is read once.
 */
export function linearForms(pool: Pool, unknowns: ReadonlySet<Symbol>): (expr: Expr) => LinearForm | null {
  const forms = new Map<Expr, LinearForm | null>();
  return (root) => {
    postorder(
      [root],
      (expr) => forms.has(expr),
      (expr) => forms.set(expr, formOf(pool, expr, unknowns, forms)),
    );
    return forms.get(root) as LinearForm | null;
  };
}

const NONE: ReadonlyMap<Symbol, Expr> = new Map();

function formOf(
  pool: Pool,
  expr: Expr,
  unknowns: ReadonlySet<Symbol>,
  forms: ReadonlyMap<Expr, LinearForm | null>,
): LinearForm | null {
  if (expr.op === "symbol" && unknowns.has(expr as Symbol)) {
    return { coefficients: new Map([[expr as Symbol, pool.one]]), constant: pool.zero };
  }
  const parts: LinearForm[] = [];
  for (const arg of expr.args) {
    const part = forms.get(arg);
    if (part === null || part === undefined) return null;
    parts.push(part);
  }
  const holding = parts.filter(({ coefficients }) => coefficients.size > 0);
  // Without the unknowns that cancelled further in.
  const args = parts.map(({ constant }) => constant);
  if (holding.length === 0) {
    const free = args.every((arg, i) => arg === expr.args[i]);
    return { coefficients: NONE, constant: free ? expr : withArgs(pool, expr, args) };
  }
  switch (expr.op) {
    case "sum":
      return {
        coefficients: gather(pool, holding),
        constant: pool.sum(parts.map(({ constant }) => constant)),
      };
    case "product": {
      if (holding.length > 1) return null;
      const others = args.filter((_, i) => parts[i] !== holding[0]);
      return mapForm(holding[0], (each) => pool.product(each, ...others));
    }
    case "where": {
      const [condition, then, otherwise] = parts;
      if (condition.coefficients.size > 0) return null;
      const choose = (a: Expr, b: Expr) => pool.where(args[0], a, b);
      const coefficients = new Map<Symbol, Expr>();
      for (const symbol of new Set([...then.coefficients.keys(), ...otherwise.coefficients.keys()])) {
        const of = (form: LinearForm) => form.coefficients.get(symbol) ?? pool.zero;
        coefficients.set(symbol, choose(of(then), of(otherwise)));
      }
      return { coefficients, constant: choose(then.constant, otherwise.constant) };
    }
    default:
      return null;
  }
}

function gather(pool: Pool, parts: readonly LinearForm[]): ReadonlyMap<Symbol, Expr> {
  if (parts.length === 1) return parts[0].coefficients;
  const terms = new Map<Symbol, Expr[]>();
  for (const { coefficients } of parts) {
    for (const [symbol, coefficient] of coefficients) {
      const list = terms.get(symbol);
      if (list === undefined) terms.set(symbol, [coefficient]);
      else list.push(coefficient);
    }
  }
  const sums = new Map<Symbol, Expr>();
  for (const [symbol, list] of terms) {
    const total = pool.sum(list);
    if (total !== pool.zero) sums.set(symbol, total);
  }
  return sums;
}

function mapForm(form: LinearForm, scale: (expr: Expr) => Expr): LinearForm {
  const coefficients = new Map<Symbol, Expr>();
  for (const [symbol, coefficient] of form.coefficients) coefficients.set(symbol, scale(coefficient));
  return { coefficients, constant: scale(form.constant) };
}

/** expr = slope·symbol + constant; null where it isn't affine in the symbol. */
export function affineIn(pool: Pool, expr: Expr, symbol: Symbol): { slope: Expr; constant: Expr } | null {
  const form = linearForms(pool, new Set([symbol]))(expr);
  return form === null
    ? null
    : { slope: form.coefficients.get(symbol) ?? pool.zero, constant: form.constant };
}

/** Whether an expression is linear in `unknowns`, without working out the coefficients: linear in its size. */
export function linearityIn(unknowns: ReadonlySet<Symbol>): (expr: Expr) => "free" | "linear" | "nonlinear" {
  const degrees = new Map<Expr, 0 | 1 | 2>();
  const degreeOf = (expr: Expr) => degrees.get(expr) as 0 | 1 | 2;
  return (root) => {
    postorder(
      [root],
      (expr) => degrees.has(expr),
      (expr) => {
        if (expr.op === "symbol") degrees.set(expr, unknowns.has(expr as Symbol) ? 1 : 0);
        else degrees.set(expr, degreeFrom(expr, expr.args.map(degreeOf)));
      },
    );
    return (["free", "linear", "nonlinear"] as const)[degreeOf(root)];
  };
}

function degreeFrom(expr: Expr, degrees: readonly number[]): 0 | 1 | 2 {
  const highest = Math.max(0, ...degrees) as 0 | 1 | 2;
  if (highest === 0) return 0;
  if (expr.op === "sum") return highest;
  if (expr.op === "product") return degrees.filter((degree) => degree > 0).length > 1 ? 2 : highest;
  return expr.op === "where" && degrees[0] === 0 ? highest : 2;
}
