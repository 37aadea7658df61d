import { type Finding, finding } from "../diagnostics/finding.ts";
import type { FlatStart } from "../resolve/graph.ts";
import { derivative } from "../symbolic/derivative.ts";
import { evaluate } from "../symbolic/evaluate.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import { turnRound } from "../symbolic/turn.ts";
import type { Assignments, Store } from "./assignments.ts";
import type { Dependence } from "./dependence.ts";

/** The start of each state in SI: 0 unless the text says otherwise; by state symbol. */
export function startValues(
  assignments: Assignments,
  dependence: Dependence,
): { starts: ReadonlyMap<Symbol, number>; findings: Finding[] } {
  const { graph } = assignments.causal;
  const starts = new Map<Symbol, number>(graph.tracks.map(({ symbol, from }) => [symbol, from]));
  const findings: Finding[] = [];
  if (graph.starts.length === 0) return { starts, findings };
  const states = new Map<Symbol, Store>();
  for (const store of dependence.independent) states.set(store.symbol, store).set(store.coVariable, store);
  for (const { store } of dependence.forced) states.set(store.symbol, store).set(store.coVariable, store);
  const followers = new Map<Symbol, Store>();
  for (const { store } of dependence.followers)
    followers.set(store.symbol, store).set(store.coVariable, store);

  for (const start of graph.starts) {
    const store = states.get(start.target);
    const follower = followers.get(start.target);
    if (store === undefined) {
      if (starts.has(start.target)) starts.set(start.target, start.value);
      else findings.push(finding("not-computable", start.span, refusal(start, follower)));
      continue;
    }
    const value = start.target === store.symbol ? start.value : solveBack(assignments, store, start.value);
    if (value !== null) starts.set(store.symbol, value);
    else {
      const message = `No value of \`${store.name}\` gives \`${start.target.name}\` this start through the store's law.`;
      findings.push(finding("not-computable", start.span, message));
    }
  }
  return { starts, findings };
}

function refusal(start: FlatStart, follower: Store | undefined): string {
  return follower === undefined
    ? `\`${start.target.name}\` is no state and settles none: give a start to a store's p or q, to f of an inertia or to e of a compliance.`
    : `\`${follower.name}\` is settled by other stores or a source, so it can't have a start of its own; give one to what it follows.`;
}

/** The state at which the store's law gives this effort or flow; in closed form, else by Newton's method from 0. */
function solveBack(assignments: Assignments, store: Store, wanted: number): number | null {
  const { pool } = assignments.causal.graph;
  const assignment = assignments.of.get(store.integral ? store.coVariable : store.symbol);
  if (assignment === undefined) return null;
  const at = (values: ReadonlyMap<Expr, number>) => (symbol: Symbol) =>
    values.get(symbol) ?? assignments.valueOf(symbol) ?? Number.NaN;
  const known = new Map<Expr, number>([[store.coVariable, wanted]]);
  const law = assignment.right;
  if (law === null || !store.integral) {
    // The law as written already has the state alone on its left, or stands as a residual.
    const direct = law ?? null;
    if (direct !== null) return finite(evaluate(direct, at(known)));
  } else {
    const solved = turnRound(pool, law, store.symbol, store.coVariable, assignments.valueOf);
    if (solved !== null) return finite(evaluate(solved, at(known)));
  }
  const residual = law === null ? assignment.residual : pool.subtract(law, store.coVariable);
  if (residual === null) return null;
  return newton(residual, derivative(pool, residual, store.symbol), (x) =>
    at(new Map([...known, [store.symbol, x]])),
  );
}

function newton(residual: Expr, slope: Expr, at: (x: number) => (symbol: Symbol) => number): number | null {
  let x = 0;
  for (let step = 0; step < 60; step += 1) {
    const value = evaluate(residual, at(x));
    let change = value / evaluate(slope, at(x));
    if (value === 0) return x;
    if (!Number.isFinite(change)) change = x === 0 ? -1e-3 : x / 2;
    x -= change;
    if (Math.abs(change) <= 1e-14 * Math.abs(x)) return finite(x);
  }
  return null;
}

function finite(value: number): number | null {
  return Number.isFinite(value) ? value : null;
}
