import type { Expr, Symbol } from "../symbolic/expression.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import type { Assignments, Store } from "./assignments.ts";
import type { AlgebraicLoop } from "./model.ts";
import type { Values } from "./paths.ts";
import { RateFinder } from "./rates.ts";

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

export function classifyStores(assignments: Assignments, values: Values): Dependence {
  const independent: Store[] = [];
  const followers: Tied[] = [];
  const forced: Tied[] = [];
  const finder = new RateFinder();
  for (const store of assignments.stores) {
    if (store.integral) {
      independent.push(store);
      continue;
    }
    const value = values.get(store.symbol);
    if (value === undefined) continue;
    (finder.holds(value) ? forced : followers).push({ store, value });
  }
  return { independent, followers, forced };
}

/** The symbols that settle a value, with those in the residuals of what loops leave unknown in it. */
export function settledBy(value: Expr, loops: readonly AlgebraicLoop[]): ReadonlySet<Symbol> {
  const found = new Set(symbolsOf(value));
  // A set visits what is added to it on the way.
  for (const symbol of found) {
    if (symbol.role !== "unknown") continue;
    const loop = loops.find(({ variables }) => variables.some((variable) => variable.symbol === symbol));
    for (const each of symbolsOf(...(loop?.residuals ?? []))) found.add(each);
  }
  return found;
}
