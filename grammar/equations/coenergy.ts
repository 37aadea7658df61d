import { derivative } from "../symbolic/derivative.ts";
import { evaluate } from "../symbolic/evaluate.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import type { Pool } from "../symbolic/pool.ts";
import { substitution } from "../symbolic/substitute.ts";
import { turnRound } from "../symbolic/turn.ts";
import type { Unit } from "../units/unit.ts";
import { assignmentsOf } from "./assignments.ts";
import type { RateEquation, State, StateModel } from "./model.ts";
import { tidy } from "./tidy.ts";

/** How a model in co-energy variables came from the one in energy variables. */
interface Origin {
  readonly model: StateModel;
  /** What a summand of the i-th equation has become. */
  readonly image: (i: number, term: Expr) => Expr;
}

const origins = new WeakMap<StateModel, Origin>();

export function originOf(model: StateModel): Origin | undefined {
  return origins.get(model);
}

interface Change {
  readonly state: State;
  readonly name: string;
  readonly unit: Unit;
  /** The new variable as the law gives it from the old one, and the other way round. */
  readonly toNew: Expr;
  readonly toOld: Expr;
  /** d new/d old, in the new variable. */
  readonly slope: Expr;
}

/**
 * The same model in co-energy variables: f of an inertia for its p, e of a compliance for its q. With x = φ(p),
 * ẋ = φ'(p)·ṗ. A store whose law can't be turned round keeps its energy variable.
 */
export function inCoEnergy(model: StateModel): StateModel {
  const { graph } = model.causal;
  const { pool } = graph;
  const { valueOf } = assignmentsOf(model.causal);
  const changes = model.states.map((state) => changeOf(pool, state, valueOf));
  const old = new Map<Expr, Expr>();
  for (const change of changes) if (change !== null) old.set(change.state.symbol, change.toOld);
  const put = substitution(pool, old);
  const slopes = changes.map((change) => (change === null ? pool.one : put(change.slope)));

  const names = new Map(
    changes.flatMap((change) => (change === null ? [] : [[change.state.name, change.name]])),
  );
  const newName = (name: string) => names.get(name) ?? name;
  // Only solved rates and loops leave quotients in which the change cancels something.
  const quotients = model.dependent.length + model.loops.length > 0;
  const shorter = (expr: Expr) => (quotients ? tidy(pool, expr) : expr);
  const view: StateModel = {
    ...model,
    states: model.states.map((state, i) => {
      const change = changes[i];
      return change === null ? state : renamed(pool, change, valueOf);
    }),
    dependent: model.dependent.map((store) => ({
      ...store,
      of: store.of.map((name) => newName(name)),
      value: shorter(put(store.value)),
      rate: shorter(put(store.rate)),
    })),
    equations: model.equations.map(
      ({ state, rate, span }, i): RateEquation => ({
        state: newName(state),
        rate: shorter(pool.product(slopes[i], put(rate))),
        span,
      }),
    ),
    implicit: model.implicit && {
      mass: model.implicit.mass.map((row) => row.map((entry, j) => pool.divide(put(entry), slopes[j]))),
      right: model.implicit.right.map(put),
    },
    loops: model.loops.map((loop) => ({ ...loop, residuals: loop.residuals.map(put) })),
    outputs: model.outputs.map((output) => ({ ...output, value: shorter(put(output.value)) })),
    efforts: model.efforts.map((effort) => effort && put(effort)),
    flows: model.flows.map((flow) => flow && put(flow)),
  };
  origins.set(view, { model, image: (i, term) => pool.product(slopes[i], put(term)) });
  return view;
}

function changeOf(pool: Pool, state: State, valueOf: (symbol: Symbol) => number | undefined): Change | null {
  const { coEnergy } = state;
  if (coEnergy === null) return null;
  const { name, value, unit } = coEnergy;
  const toOld = turnRound(pool, value, state.symbol, pool.symbol("state", name), valueOf);
  if (toOld === null) return null;
  return { state, name, unit, toNew: value, toOld, slope: derivative(pool, value, state.symbol) };
}

function renamed(pool: Pool, change: Change, valueOf: (symbol: Symbol) => number | undefined): State {
  const { state, name, unit, toNew } = change;
  const start = evaluate(toNew, (symbol) =>
    symbol === state.symbol ? state.start : (valueOf(symbol) ?? Number.NaN),
  );
  return { ...state, name, symbol: pool.symbol("state", name), unit, start };
}
