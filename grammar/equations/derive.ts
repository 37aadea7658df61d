import type { CausalGraph } from "../causality/strokes.ts";
import type { Finding } from "../diagnostics/finding.ts";
import { compareNames } from "../resolve/graph.ts";
import { ById } from "../symbolic/by-id.ts";
import type { Expr } from "../symbolic/expression.ts";
import type { Pool } from "../symbolic/pool.ts";
import { substitution } from "../symbolic/substitute.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import { type Assignments, assignmentsOf } from "./assignments.ts";
import { classifyStores } from "./dependence.ts";
import {
  dependenceFinding,
  implicitRateNotes,
  inputRateFinding,
  refusedRates,
} from "./dependence-findings.ts";
import { implicitSystem } from "./implicit-system.ts";
import type { DependentStore, ModelInput, RateEquation, StateModel } from "./model.ts";
import { followPaths } from "./paths.ts";
import { type Follower, RateFinder, type SolvedRates, solveRates } from "./rates.ts";
import { settledBy } from "./settled-by.ts";
import { startValues } from "./start.ts";
import { dependentStore, stateOf, stateRows } from "./states.ts";
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
  const dependence = classifyStores(assignments, followed.values, followed.loops);
  const rows = stateRows(assignments, dependence, followed.values, settle);
  const tied = dependence.followers.length + dependence.forced.length > 0;
  const followers = dependence.followers.map(
    ({ store, value }): Follower => ({ name: store.name, rateSymbol: store.rateSymbol, value }),
  );
  const solved = tied ? solveRates(pool, rows, followers, followed.loops, assignments.valueOf) : NOTHING_TIED;
  const refused = refusedRates(assignments, dependence, solved, followed.loops);
  findings.push(...refused);
  if (refused.length > 0) return { model: null, findings };

  const finish = tied ? rateFree(pool, solved) : (expr: Expr) => expr;
  const dependent = dependence.followers.map((follower) =>
    dependentStore(assignments, follower, followed.loops, finish),
  );
  const paths = dependence.followers.map(({ store, value }) =>
    dependenceFinding(assignments, store, settledBy(value, followed.loops)),
  );
  findings.push(...paths, ...implicitRateNotes(assignments, solved));

  const { starts, findings: startFindings } = startValues(assignments, dependence);
  findings.push(...startFindings);
  const states = rows.map((row) => stateOf(assignments, row, starts.get(row.symbol) ?? 0));
  const efforts = once(() =>
    graph.bonds.map(({ effort }) => finishOrNull(followed.values.get(effort), finish)),
  );
  const flows = once(() => graph.bonds.map(({ flow }) => finishOrNull(followed.values.get(flow), finish)));
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
    const driven = inputRateFinding(assignments, store, settledBy(value, followed.loops));
    if (driven !== null) findings.push(driven);
  }
  const model: StateModel = {
    causal,
    states,
    dependent,
    inputs,
    equations,
    implicit: implicitSystem(pool, rows, solved),
    loops: [
      ...followed.loops.map((loop) => ({ ...loop, residuals: loop.residuals.map(finish) })),
      ...solved.implicit.map(({ loop }) => loop),
    ],
    outputs,
    // Who asks for equations alone does not wait for what every bond carries.
    get efforts() {
      return efforts();
    },
    get flows() {
      return flows();
    },
  };
  return { model, findings };
}

/** Without dependent stores no rate stands in another's equation. */
const NOTHING_TIED: SolvedRates = {
  rates: new Map(),
  coupled: [],
  implicit: [],
  singular: [],
  stuck: new Set(),
};

/** Puts the solved rates in, and writes what they changed as one fraction where that is shorter. */
function rateFree(pool: Pool, solved: SolvedRates): (expr: Expr) => Expr {
  const finder = new RateFinder();
  const put = substitution(pool, solved.rates, (expr) => !finder.holds(expr), new ById());
  return (expr) => (finder.holds(expr) ? collected(pool, put(expr)) : expr);
}

function once<Value>(work: () => Value): () => Value {
  let known: { readonly value: Value } | null = null;
  return () => {
    known ??= { value: work() };
    return known.value;
  };
}

function finishOrNull(value: Expr | undefined, finish: (expr: Expr) => Expr): Expr | null {
  return value === undefined ? null : finish(value);
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
