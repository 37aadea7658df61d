import type { CausalGraph } from "../causality/strokes.ts";
import type { Finding } from "../diagnostics/finding.ts";
import { compareNames, type FlatTrack } from "../resolve/graph.ts";
import { ById } from "../symbolic/by-id.ts";
import type { Expr } from "../symbolic/expression.ts";
import { linearForms } from "../symbolic/linear.ts";
import type { Pool } from "../symbolic/pool.ts";
import { substitution } from "../symbolic/substitute.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import { type Assignments, assignmentsOf, type Store } from "./assignments.ts";
import { coEnergyOf } from "./coenergy-value.ts";
import { classifyStores, type Dependence, settledBy } from "./dependence.ts";
import { dependenceFinding, inputRateFinding, refusedRates } from "./dependence-findings.ts";
import type { AlgebraicLoop, DependentStore, ModelInput, RateEquation, State, StateModel } from "./model.ts";
import { followPaths, type Values } from "./paths.ts";
import { type Follower, RateFinder, type RateRow, type SolvedRates, solveRates } from "./rates.ts";
import { startValues } from "./start.ts";
import { collected, tidy } from "./tidy.ts";

/**
 * The state model of a causal graph: assignments as the strokes give them → followed along causal paths, loops
 * solved → rates of dependent stores put in and solved for. Null, with findings, where the graph has no equations.
 */
export function deriveEquations(causal: CausalGraph): { model: StateModel | null; findings: Finding[] } {
  if (causal.strokes.some((stroke) => stroke === null)) return { model: null, findings: [] };
  const { graph } = causal;
  const { pool } = graph;
  const assignments = assignmentsOf(causal);
  const followed = followPaths(assignments);
  const findings = [...followed.findings];
  if (followed.refused) return { model: null, findings };

  const settle = substitution(pool, followed.values);
  const dependence = classifyStores(assignments, followed.values);
  const rows = stateRows(assignments, dependence, followed.values, settle);
  const tied = dependence.followers.length + dependence.forced.length > 0;
  const followers = dependence.followers.map(
    ({ store, value }): Follower => ({ name: store.name, rateSymbol: store.rateSymbol, value }),
  );
  const solved = tied ? solveRates(pool, rows, followers, followed.loops) : NOTHING_TIED;
  const refused = refusedRates(assignments, dependence, solved, followed.loops);
  findings.push(...refused);
  if (refused.length > 0) return { model: null, findings };

  const finish = tied ? rateFree(pool, solved) : (expr: Expr) => expr;
  const dependent = dependence.followers.map((follower) =>
    dependentStore(assignments, follower.store, follower.value, followed.loops, finish),
  );
  const paths = dependence.followers.map(({ store, value }) =>
    dependenceFinding(assignments, store, settledBy(value, followed.loops)),
  );
  findings.push(...paths);

  const { starts, findings: startFindings } = startValues(assignments, dependence);
  findings.push(...startFindings);
  const states = rows.map((row) => stateOf(assignments, row, starts.get(row.symbol) ?? 0));
  const efforts = graph.bonds.map(({ effort }) => finishOrNull(followed.values.get(effort), finish));
  const flows = graph.bonds.map(({ flow }) => finishOrNull(followed.values.get(flow), finish));
  // Sums of what a loop or a group of rates gave share their denominators.
  const shorter = (expr: Expr) => (tied || followed.loops.length > 0 ? tidy(pool, expr) : expr);
  const outputs = graph.outputs.map(({ name, unit, value, span }) => ({
    name,
    unit,
    span,
    value: shorter(finish(settle(value))),
  }));
  const equations = states.map(({ name, span }, i): RateEquation => {
    const rate = (tied ? solved.rates.get(rows[i].rateSymbol) : rows[i].rate) ?? rows[i].rateSymbol;
    return { state: name, rate: shorter(rate), span };
  });

  const inputs = modelInputs(assignments, solved, dependent);
  for (const { store, value } of dependence.followers) {
    const driven = inputRateFinding(assignments, store, value);
    if (driven !== null) findings.push(driven);
  }
  const model: StateModel = {
    causal,
    states,
    dependent,
    inputs,
    equations,
    implicit: implicitSystem(pool, rows, solved),
    loops: followed.loops,
    outputs,
    efforts,
    flows,
  };
  return { model, findings };
}

/** Without dependent stores no rate stands in another's equation. */
const NOTHING_TIED: SolvedRates = { rates: new Map(), coupled: [], singular: [], nonlinear: [] };

/** Puts the solved rates in, and writes what they changed as one fraction where that is shorter. */
function rateFree(pool: Pool, solved: SolvedRates): (expr: Expr) => Expr {
  const finder = new RateFinder();
  const put = substitution(pool, solved.rates, (expr) => !finder.holds(expr), new ById());
  return (expr) => (finder.holds(expr) ? collected(pool, put(expr)) : expr);
}

function finishOrNull(value: Expr | undefined, finish: (expr: Expr) => Expr): Expr | null {
  return value === undefined ? null : finish(value);
}

/** A state with what it came from. */
interface StateRow extends RateRow {
  readonly store: Store | null;
  readonly track: FlatTrack | null;
}

/** Stores that integrate, those that a demanded stroke forced, and tracks: all states, by name. */
function stateRows(
  assignments: Assignments,
  dependence: Dependence,
  values: Values,
  settle: (expr: Expr) => Expr,
): StateRow[] {
  const { graph } = assignments.causal;
  const { pool } = graph;
  const rows: StateRow[] = dependence.independent.map((store) => {
    const carried = values.get(store.rateVariable) ?? pool.zero;
    const rate = store.sign === 1 ? carried : pool.negate(carried);
    return rowOf(pool, {
      name: store.name,
      symbol: store.symbol,
      rate,
      constraint: null,
      store,
      track: null,
    });
  });
  for (const { store, value } of dependence.forced) {
    const { name, symbol } = store;
    rows.push(rowOf(pool, { name, symbol, rate: null, constraint: value, store, track: null }));
  }
  for (const track of graph.tracks) {
    const { name, symbol, rate } = track;
    rows.push(rowOf(pool, { name, symbol, rate: settle(rate), constraint: null, store: null, track }));
  }
  return rows.sort((a, b) => compareNames(a.name, b.name));
}

function rowOf(pool: Pool, row: Omit<StateRow, "rateSymbol">): StateRow {
  return {
    ...row,
    get rateSymbol() {
      return pool.symbol("rate", row.name);
    },
  };
}

function stateOf(assignments: Assignments, row: StateRow, start: number): State {
  const { name, symbol, store, track } = row;
  if (store === null) {
    const { unit, span } = track as FlatTrack;
    return { name, symbol, kind: "tracked", unit, start, node: null, bond: null, span, coEnergy: null };
  }
  return {
    name,
    symbol,
    kind: store.variable,
    unit: unitOf(assignments, store),
    start,
    node: store.node,
    bond: store.bond,
    span: assignments.causal.graph.nodes[store.node].span,
    // Only the view in co-energy variables asks for it.
    get coEnergy() {
      return coEnergyOf(assignments, store);
    },
  };
}

function unitOf({ causal }: Assignments, store: Store) {
  const { domain } = causal.graph.bonds[store.bond];
  return store.variable === "p" ? domain.momentum : domain.displacement;
}

function dependentStore(
  assignments: Assignments,
  store: Store,
  value: Expr,
  loops: readonly AlgebraicLoop[],
  finish: (expr: Expr) => Expr,
): DependentStore {
  const of = [...settledBy(value, loops)].filter(({ role }) => role === "state").map(({ name }) => name);
  return {
    name: store.name,
    symbol: store.symbol,
    kind: store.variable,
    unit: unitOf(assignments, store),
    node: store.node,
    bond: store.bond,
    of: of.sort(compareNames),
    value,
    rate: finish(store.rateSymbol),
    span: assignments.causal.graph.nodes[store.node].span,
  };
}

function modelInputs(
  assignments: Assignments,
  solved: SolvedRates,
  dependent: readonly DependentStore[],
): ModelInput[] {
  const used = new Set<string>();
  const expressions = dependent.length === 0 ? [] : [...solved.rates.values()];
  for (const { role, name } of symbolsOf(...expressions)) if (role === "inputRate") used.add(name);
  const declared = assignments.causal.graph.inputs.map(({ name, symbol, unit, nominal }) => ({
    name,
    symbol,
    unit,
    nominal,
    differentiated: used.has(symbol.name),
  }));
  return [
    ...declared,
    ...assignments.outside.map((input) => ({ ...input, differentiated: used.has(input.symbol.name) })),
  ].sort((a, b) => compareNames(a.name, b.name));
}

/** M(x)·ẋ = h for all states, where some rates stay coupled; the others have a 1 in their row. */
function implicitSystem(pool: Pool, rows: readonly RateRow[], solved: SolvedRates): StateModel["implicit"] {
  if (solved.coupled.length === 0) return null;
  const { zero, one }: { zero: Expr; one: Expr } = pool;
  const at = new Map(rows.map((row, i) => [row.name, i]));
  const mass = rows.map((_, i) => rows.map((_, j) => (i === j ? one : zero)));
  const right = rows.map((row) => solved.rates.get(row.rateSymbol) ?? zero);
  const finder = new RateFinder();
  for (const group of solved.coupled) {
    group.names.forEach((name, i) => {
      const row = at.get(name) as number;
      right[row] = group.right[i];
      mass[row] = rows.map(() => zero);
      group.names.forEach((other, j) => {
        mass[row][at.get(other) as number] = group.mass[i][j];
      });
    });
  }
  // A rate that only hangs on coupled ones goes to the left side with them.
  const formOf = linearForms(pool, new Set(rows.map(({ rateSymbol }) => rateSymbol)));
  rows.forEach((_, i) => {
    if (!finder.holds(right[i])) return;
    const form = formOf(right[i]);
    if (form === null) return;
    right[i] = form.constant;
    rows.forEach(({ rateSymbol }, j) => {
      const coefficient = form.coefficients.get(rateSymbol);
      if (coefficient !== undefined) mass[i][j] = pool.subtract(mass[i][j], coefficient);
    });
  });
  return { mass, right };
}
