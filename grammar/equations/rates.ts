import { ById } from "../symbolic/by-id.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import { linearForms } from "../symbolic/linear.ts";
import type { Pool } from "../symbolic/pool.ts";
import { postorder } from "../symbolic/postorder.ts";
import { solveLinearSystem } from "../symbolic/solve-linear.ts";
import { substitution } from "../symbolic/substitute.ts";
import type { ValueOf } from "../symbolic/turn.ts";
import { connectedGroups } from "./dependency.ts";
import { followerRates } from "./follower-rates.ts";
import { implicitRates, type RateVariable } from "./implicit-rates.ts";
import type { AlgebraicLoop } from "./model.ts";
import { deficiencyOf } from "./rank.ts";
import { restsOnRates } from "./settled-by.ts";
import { collected } from "./tidy.ts";

/** A state whose rate is `rate`, or, where it is null, one that has to satisfy `constraint` = its own value. */
export interface RateRow {
  readonly name: string;
  readonly symbol: Symbol;
  readonly rateSymbol: Symbol;
  readonly rate: Expr | null;
  readonly constraint: Expr | null;
  /** What stands for the rate where no closed form gives it. */
  readonly rateVariable: RateVariable;
}

/** A store that follows the states: value = g(x, u, t), with no rates in it. */
export interface Follower {
  readonly name: string;
  readonly rateSymbol: Symbol;
  readonly value: Expr;
}

export interface SolvedRates {
  /** By rate symbol: the rates of states and of dependent stores, with no rate left but those of `coupled`. */
  readonly rates: ReadonlyMap<Expr, Expr>;
  /** Groups of states whose rates stay coupled: row·rates = right. */
  readonly coupled: readonly CoupledRates[];
  /** Rates that only a numerical solution gives, with the states that they belong to. */
  readonly implicit: readonly { readonly names: readonly string[]; readonly loop: AlgebraicLoop }[];
  /** Names of states whose rates nothing settles. */
  readonly singular: readonly string[][];
  /** Unknowns of loops whose own rates could not be written down. */
  readonly stuck: ReadonlySet<Symbol>;
}

export interface CoupledRates {
  readonly names: readonly string[];
  readonly mass: readonly (readonly Expr[])[];
  readonly right: readonly Expr[];
}

/**
 * The rates of dependent stores follow from ġ = ∂g/∂x·ẋ + ∂g/∂u·u̇ + ∂g/∂t and feed back into ẋ: in each group of
 * rates that depend on each other, the dependent ones are put in and the system M·ẋ = h is solved.
 */
export function solveRates(
  pool: Pool,
  rows: readonly RateRow[],
  followers: readonly Follower[],
  loops: readonly AlgebraicLoop[],
  valueOf: ValueOf,
): SolvedRates {
  const rates = new Map<Expr, Expr>();
  const coupled: CoupledRates[] = [];
  const singular: string[][] = [];
  const implicit: { names: readonly string[]; loop: AlgebraicLoop }[] = [];
  const followed = new Map(followers.map((follower) => [follower.rateSymbol, follower]));
  const finder = new RateFinder();
  const restful = (expr: Expr) => !finder.holds(expr);
  const rateOf = new Map(rows.map((row) => [row.symbol, row.rateSymbol]));
  const moving = followerRates(pool, rateOf, loops);

  const items: (RateRow | Follower)[] = [...rows, ...followers];
  const index = new Map(items.map((item, i) => [item.rateSymbol, i]));
  const rights = items.map((item) => ("value" in item ? moving.of(item.value) : item.rate));
  const edges: number[][] = items.map(() => []);
  items.forEach((item, i) => {
    const expr = rights[i] ?? (item as RateRow).constraint;
    if (expr === null) return;
    for (const symbol of finder.in(expr)) {
      const to = index.get(symbol);
      if (to === undefined) continue;
      edges[i].push(to);
      // A constraint has no rate of its own to give: it belongs to the group of those that it ties.
      if (rights[i] === null) edges[to].push(i);
    }
    if (rights[i] === null) edges[i].push(i);
  });

  const settle = substitution(pool, rates, restful);
  for (const group of connectedGroups(items.length, (i) => edges[i])) {
    const [first] = group;
    if (group.length === 1 && !edges[first].includes(first)) {
      rates.set(items[first].rateSymbol, settle(rights[first] as Expr));
      continue;
    }
    solveGroup(group.sort((a, b) => a - b).map((i) => ({ item: items[i], right: rights[i] })));
  }
  return { rates, coupled, implicit, singular, stuck: moving.stuck };

  function solveGroup(group: readonly { item: RateRow | Follower; right: Expr | null }[]): void {
    const inside = new Map<Expr, Expr>();
    const local = substitution(pool, { get: (key) => inside.get(key) ?? rates.get(key) }, restful);
    // Followers hang on the rates of states alone, so each is put in whole.
    const dependent = group.filter(({ item }) => followed.has(item.rateSymbol));
    for (const { item, right } of dependent) inside.set(item.rateSymbol, local(right as Expr));
    const states = group.filter(({ item }) => !followed.has(item.rateSymbol));
    const names = states.map(({ item }) => item.name);
    const unknowns = states.map(({ item }) => item.rateSymbol);
    const residuals = states.map(({ item, right }) => {
      if (right !== null) return pool.subtract(item.rateSymbol, local(right));
      const row = item as RateRow;
      return pool.subtract(local(row.constraint as Expr), row.symbol);
    });
    const formOf = linearForms(pool, new Set(unknowns));
    const forms = residuals.map(formOf);
    const hidden = residuals.some((residual) => restsOnRates(residual, loops));
    if (hidden || forms.some((form) => form === null)) {
      const variables = states.map(({ item }) => (item as RateRow).rateVariable);
      const found = implicitRates(pool, unknowns, variables, residuals, hidden ? null : valueOf);
      for (const [rate, value] of found.rates) rates.set(rate, value);
      if (found.loop !== null) implicit.push({ names, loop: found.loop });
      finishDependent(dependent, inside);
      return;
    }
    const mass = forms.map((form) => unknowns.map((unknown) => form?.coefficients.get(unknown) ?? pool.zero));
    const right = forms.map((form) => pool.negate(form?.constant ?? pool.zero));
    const solution = solveLinearSystem(pool, mass, right);
    if (solution.kind === "singular" || deficiencyOf(mass, right, valueOf) !== null) {
      singular.push(names);
      return;
    }
    if (solution.kind === "large" && unknowns.length > 1) coupled.push({ names, mass, right });
    else if (solution.kind === "large") rates.set(unknowns[0], pool.divide(right[0], mass[0][0]));
    else
      for (const [i, unknown] of unknowns.entries()) rates.set(unknown, collected(pool, solution.values[i]));
    finishDependent(dependent, inside);
  }

  /** After the states' rates are known. */
  function finishDependent(
    dependent: readonly { item: RateRow | Follower }[],
    inside: ReadonlyMap<Expr, Expr>,
  ): void {
    const finish = substitution(pool, rates, restful);
    for (const { item } of dependent)
      rates.set(item.rateSymbol, collected(pool, finish(inside.get(item.rateSymbol) as Expr)));
  }
}

/** Looks for rate symbols, remembering what holds none: an expression without rates is known to be so at once. */
export class RateFinder {
  readonly #holds = new ById<boolean>();

  holds(root: Expr): boolean {
    postorder(
      [root],
      (expr) => this.#holds.has(expr),
      (expr) => this.#holds.set(expr, expr.role === "rate" || expr.args.some((arg) => this.#holds.get(arg))),
    );
    return this.#holds.get(root) as boolean;
  }

  in(root: Expr): ReadonlySet<Symbol> {
    const found = new Set<Symbol>();
    if (!this.holds(root)) return found;
    const seen = new Set<Expr>();
    postorder(
      [root],
      (expr) => seen.has(expr) || !this.#holds.get(expr),
      (expr) => {
        seen.add(expr);
        if (expr.role === "rate") found.add(expr as Symbol);
      },
    );
    return found;
  }
}
