import type { Expr } from "../symbolic/expression.ts";
import { linearForms } from "../symbolic/linear.ts";
import type { Pool } from "../symbolic/pool.ts";
import { rationalForm } from "../symbolic/rational-form.ts";
import type { Assignments, Store } from "./assignments.ts";
import type { AlgebraicLoop } from "./model.ts";
import type { Values } from "./paths.ts";
import { RateFinder } from "./rates.ts";
import { restsOnRates } from "./settled-by.ts";
import { collected } from "./tidy.ts";

export interface Tied {
  readonly store: Store;
  /** g(x, u, t), for `forced` with rates in it. */
  readonly value: Expr;
}

/**
 * The stores of a model: `independent` ones integrate; `followers` have a state that other states and inputs settle;
 * `forced` ones got derivative causality from a demanded stroke or a one-way law alone: their law, read that way,
 * holds a rate, so they are states all the same, with an implicit rate.
 */
export interface Dependence {
  readonly independent: readonly Store[];
  readonly followers: readonly Tied[];
  readonly forced: readonly Tied[];
}

export function classifyStores(
  assignments: Assignments,
  values: Values,
  loops: readonly AlgebraicLoop[],
): Dependence {
  const { pool } = assignments.causal.graph;
  const independent: Store[] = [];
  const followers: Tied[] = [];
  const forced: Tied[] = [];
  const finder = new RateFinder();
  for (const store of assignments.stores) {
    if (store.integral) {
      independent.push(store);
      continue;
    }
    const followed = values.get(store.symbol);
    if (followed === undefined) continue;
    const value = withoutCancelled(pool, followed, finder);
    const tied = finder.holds(value) || restsOnRates(value, loops);
    (tied ? forced : followers).push({ store, value });
  }
  return { independent, followers, forced };
}

/**
 * Round a ring of gain one, rates and inputs come back to where they started and cancel: what cancels must not look
 * as if it settled the store.
 */
function withoutCancelled(pool: Pool, value: Expr, finder: RateFinder): Expr {
  const rates = finder.in(value);
  if (rates.size === 0) return mayCancel(value) ? collected(pool, value) : value;
  const form = linearForms(pool, rates)(value);
  if (form === null) return value;
  const terms = [form.constant];
  for (const [rate, coefficient] of form.coefficients) {
    if (rationalForm(pool, coefficient) !== pool.zero) terms.push(pool.product(coefficient, rate));
  }
  return terms.length === 1
    ? collected(pool, form.constant)
    : terms.length <= form.coefficients.size
      ? pool.sum(terms)
      : value;
}

/** A sum that stands as a factor hides what it has in common with what stands beside it. */
function mayCancel(value: Expr): boolean {
  const holdsSum = (term: Expr) => term.op === "product" && term.args.some(({ op }) => op === "sum");
  return holdsSum(value) || (value.op === "sum" && value.args.some(holdsSum));
}
