import type { StateModel } from "../../grammar/equations/model.ts";
import { checkFile } from "../../grammar/pipeline.ts";
import { type RunPlan, type RunResult, simulate } from "../../grammar/simulation/simulate.ts";
import { fileSet } from "../../grammar/source/text.ts";
import type { Expr } from "../../grammar/symbolic/expression.ts";
import type { Pool } from "../../grammar/symbolic/pool.ts";

/** The model of the last system of a text, which must have no errors. */
export function modelOf(text: string): StateModel {
  const report = checkFile(fileSet([["m.wright", `notation 1\n${text}`]]), "m.wright");
  const model = report.systems.at(-1)?.model;
  if (model == null) throw new Error(report.findings.map(({ message }) => message).join("\n"));
  return model;
}

/** Runs from the start values with the outputs as signals. */
export function runModel(
  model: StateModel,
  plan: Partial<RunPlan> & { readonly duration: number },
  drive: (pool: Pool, time: Expr) => Record<string, Expr> = () => ({}),
): RunResult {
  const { pool } = model.causal.graph;
  return simulate(model, {
    drives: new Map(Object.entries(drive(pool, pool.symbol("time", "time")))),
    parameters: new Map(),
    start: model.states.map(({ start }) => start),
    tolerance: 1e-6,
    every: plan.duration / 100,
    signals: model.outputs.map(({ value }) => value),
    ...plan,
  });
}
