import fc from "fast-check";
import { fractionOf } from "../../grammar/symbolic/exact.ts";
import type { Expr, Symbol } from "../../grammar/symbolic/expression.ts";
import type { Pool } from "../../grammar/symbolic/pool.ts";

/** A recipe for an expression: built in a pool by `build`, with sums and products in the order of `flip`. */
export type Recipe =
  | { readonly op: "number"; readonly value: number }
  | { readonly op: "symbol"; readonly name: string }
  | { readonly op: "sum" | "product"; readonly args: readonly Recipe[] }
  | { readonly op: "power"; readonly base: Recipe; readonly exponent: number }
  | {
      readonly op: "call";
      readonly fn: "sin" | "cos" | "tanh" | "abs" | "sign" | "exp" | "atan";
      readonly arg: Recipe;
    };

const NAMES = ["a", "b", "x", "y"];

export const recipes: fc.Arbitrary<Recipe> = fc.letrec<{ any: Recipe }>((tie) => ({
  any: fc.oneof(
    { maxDepth: 4, depthSize: "small" },
    fc.record({
      op: fc.constant("number" as const),
      value: fc.integer({ min: -12, max: 12 }).map((n) => n / 4),
    }),
    fc.record({ op: fc.constant("symbol" as const), name: fc.constantFrom(...NAMES) }),
    fc.record({
      op: fc.constant("sum" as const),
      args: fc.array(tie("any"), { minLength: 2, maxLength: 4 }),
    }),
    fc.record({
      op: fc.constant("product" as const),
      args: fc.array(tie("any"), { minLength: 2, maxLength: 3 }),
    }),
    fc.record({
      op: fc.constant("power" as const),
      base: tie("any"),
      exponent: fc.constantFrom(-2, -1, 2, 3, 0.5, 1.5),
    }),
    fc.record({
      op: fc.constant("call" as const),
      fn: fc.constantFrom("sin" as const, "cos", "tanh", "abs", "sign", "exp", "atan"),
      arg: tie("any"),
    }),
  ),
})).any;

export function build(pool: Pool, recipe: Recipe, flip = false): Expr {
  switch (recipe.op) {
    case "number":
      return pool.number(recipe.value);
    case "symbol":
      return pool.symbol(roleOf(recipe.name), recipe.name);
    case "sum":
    case "product": {
      if (!flip) return pool[recipe.op](recipe.args.map((arg) => build(pool, arg, flip)));
      // The other way round: from the last argument, two at a time.
      const built = recipe.args.map((arg) => build(pool, arg, flip)).reverse();
      return built.reduce((total, arg) => pool[recipe.op](arg, total));
    }
    case "power":
      return pool.power(build(pool, recipe.base, flip), pool.number(recipe.exponent));
    case "call":
      return pool.call(recipe.fn, build(pool, recipe.arg, flip));
  }
}

/** The value by plain arithmetic, step by step, without the pool's rules; not a number once a step has no value. */
export function plainValue(recipe: Recipe, values: Record<string, number>): number {
  const value = stepValue(recipe, values);
  return Number.isFinite(value) ? value : Number.NaN;
}

function stepValue(recipe: Recipe, values: Record<string, number>): number {
  switch (recipe.op) {
    case "number":
      return recipe.value;
    case "symbol":
      return values[recipe.name];
    case "sum":
      return recipe.args.reduce((total, arg) => total + plainValue(arg, values), 0);
    case "product":
      return recipe.args.reduce((total, arg) => total * plainValue(arg, values), 1);
    case "power":
      return plainValue(recipe.base, values) ** recipe.exponent;
    case "call":
      return Math[recipe.fn](plainValue(recipe.arg, values));
  }
}

export function roleOf(name: string): "parameter" | "state" {
  return name < "m" ? "parameter" : "state";
}

export const points = fc.record(
  Object.fromEntries(
    NAMES.map((name) => [
      name,
      fc.double({ min: -2, max: 2, noNaN: true }).filter((v) => Math.abs(v) > 0.01),
    ]),
  ),
) as fc.Arbitrary<Record<string, number>>;

export const lookup = (values: Record<string, number>) => (symbol: Symbol) => values[symbol.name];

/** A text that shows the structure, for messages of failed tests. */
export function shown(expr: Expr): string {
  if (expr.op === "number") return String(expr.value);
  if (expr.op === "symbol") return expr.name;
  return `${expr.name || expr.op}(${expr.args.map(shown).join(", ")})`;
}

/** Are all its coefficients small fractions? Sums of other doubles depend on their order by rounding. */
export function isExact(expr: Expr): boolean {
  return expr.op === "number" ? fractionOf(expr.value) !== null : expr.args.every(isExact);
}
