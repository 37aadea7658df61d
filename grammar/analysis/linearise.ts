import type { ModelInput, ModelOutput, State, StateModel } from "../equations/model.ts";
import type { Expr } from "../symbolic/expression.ts";
import { finite, multiply, type Rows, solve, zeros } from "./dense.ts";
import { type Evaluated, evaluateModel } from "./evaluate-model.ts";
import type { Point } from "./point.ts";
import { movingStates } from "./recording-tracks.ts";
import { type ModelSlopes, slopes, slopesAt, slopesOf } from "./slopes.ts";
import { unknownsOf } from "./unknowns.ts";

/**
 * ẋ = A·x + B·u + E·u̇, y = C·x + D·u + G·u̇ for small deviations from a point. `states` are those that settle the
 * motion, and the recording tracks that an output reads; `moving` are the rows of the first kind, to which stability
 * and modes belong.
 */
export interface LinearModel {
  readonly kind: "linear";
  readonly states: readonly State[];
  readonly moving: readonly number[];
  readonly inputs: readonly ModelInput[];
  readonly outputs: readonly ModelOutput[];
  readonly A: Rows;
  readonly B: Rows;
  readonly C: Rows;
  readonly D: Rows;
  readonly E: Rows;
  readonly G: Rows;
}

/** One more observed quantity beside the outputs of the model. */
export type Signal = Pick<ModelOutput, "name" | "unit" | "value" | "span">;

export type Linearised = LinearModel | { readonly kind: "none"; readonly reason: string };

export function linearise(
  model: StateModel,
  point: Point,
  outputs: readonly Signal[] = model.outputs,
): Linearised {
  const evaluated = evaluateModel(model, point);
  return evaluated.kind === "none" ? evaluated : lineariseAt(model, evaluated, outputs);
}

export function lineariseAt(
  model: StateModel,
  at: Evaluated,
  outputs: readonly Signal[] = model.outputs,
): Linearised {
  const symbolic = slopesOf(model);
  const { symbols } = unknownsOf(model);
  const values = outputs.map(({ value }) => value);
  const { pool } = model.causal.graph;
  const outputSlopes = slopes(pool, values, symbolic.columns);
  const outputsByUnknown = slopes(pool, values, symbols);
  const total = totalSlopes(model, symbolic, at);
  if (total === null) {
    return { kind: "none", reason: "What the loops leave unknown has no finite slope at this point." };
  }
  const width = symbolic.columns.length;
  const n = model.states.length;
  const rates = total.of(symbolic.rates, symbolic.ratesByUnknown, n, width);
  const observed = total.of(outputSlopes, outputsByUnknown, values.length, width);
  const names = [
    ...model.states.map(({ name }) => `the rate of \`${name}\``),
    ...outputs.map(({ name }) => `\`${name}\``),
  ];
  const broken = [...rates, ...observed].findIndex((row) => !row.every(Number.isFinite));
  if (broken >= 0)
    return { kind: "none", reason: `The slope of ${names[broken]} is not finite at this point.` };

  const moving = movingStates(model);
  const settled = new Set(moving);
  const kept = model.states
    .map((_, i) => i)
    .filter((i) => settled.has(i) || observed.some((row) => row[i] !== 0));
  const m = model.inputs.length;
  const inputs = model.inputs.map((_, j) => n + j);
  const inputRates = inputs.map((column) => column + m);
  const take = (rows: Rows, columns: readonly number[]) => rows.map((row) => columns.map((j) => row[j]));
  const keptRates = kept.map((i) => rates[i]);
  return {
    kind: "linear",
    states: kept.map((i) => model.states[i]),
    moving: kept.flatMap((i, row) => (settled.has(i) ? [row] : [])),
    inputs: model.inputs,
    outputs,
    A: take(keptRates, kept),
    B: take(keptRates, inputs),
    C: take(observed, kept),
    D: take(observed, inputs),
    E: take(keptRates, inputRates),
    G: take(observed, inputRates),
  };
}

/** ∂ẋ/∂x over the moving states alone; what the search for an equilibrium asks for at every step. */
export function stateSlopesAt(
  model: StateModel,
  at: Evaluated,
  moving: readonly number[],
): number[][] | null {
  const symbolic = slopesOf(model);
  const total = totalSlopes(model, symbolic, at);
  if (total === null) return null;
  const rates = total.of(
    symbolic.rates,
    symbolic.ratesByUnknown,
    model.states.length,
    symbolic.columns.length,
  );
  const rows = moving.map((i) => moving.map((j) => rates[i][j]));
  return finite(rows) ? rows : null;
}

/** What is unknown follows the others so that its residuals stay zero: dw = -(∂r/∂w)⁻¹·∂r/∂v·dv. */
function totalSlopes(model: StateModel, symbolic: ModelSlopes, { valueOf }: Evaluated) {
  const size = unknownsOf(model).symbols.length;
  const width = symbolic.columns.length;
  let follow: Rows = [];
  if (size > 0) {
    const right = slopesAt(symbolic.residuals, size, width, valueOf);
    const solved = solve(
      slopesAt(symbolic.residualsByUnknown, size, size, valueOf),
      right.map((row) => row.map((value) => -value)),
    );
    if (solved === null) return null;
    follow = solved.x;
  }
  return {
    of(direct: ModelSlopes["rates"], byUnknown: ModelSlopes["rates"], rows: number, columns: number) {
      const own = slopesAt(direct, rows, columns, valueOf);
      if (size === 0) return own;
      const through = multiply(slopesAt(byUnknown, rows, size, valueOf), follow);
      return own.map((row, i) => row.map((value, j) => value + through[i][j]));
    },
  };
}

/** A, B, C, D (and E, G) as expressions; null where what is unknown has no closed form to be written with. */
export function symbolicMatrices(
  model: StateModel,
  linear: LinearModel,
): Record<"A" | "B" | "C" | "D" | "E" | "G", Expr[][]> | null {
  if (unknownsOf(model).symbols.length > 0) return null;
  const { pool } = model.causal.graph;
  const { columns, rates } = slopesOf(model);
  const full = (entries: ModelSlopes["rates"], rows: number): Expr[][] => {
    const matrix: Expr[][] = zeros(rows, columns.length).map((row) => row.map(() => pool.zero as Expr));
    for (const { row, column, value } of entries) matrix[row][column] = value;
    return matrix;
  };
  const kept = linear.states.map((state) => model.states.indexOf(state));
  const n = model.states.length;
  const inputs = model.inputs.map((_, j) => n + j);
  const inputRates = inputs.map((column) => column + inputs.length);
  const all = full(rates, n);
  const observed = full(
    slopes(
      pool,
      linear.outputs.map(({ value }) => value),
      columns,
    ),
    linear.outputs.length,
  );
  const take = (rows: Expr[][], chosen: readonly number[]) => rows.map((row) => chosen.map((j) => row[j]));
  const keptRates = kept.map((i) => all[i]);
  return {
    A: take(keptRates, kept),
    B: take(keptRates, inputs),
    C: take(observed, kept),
    D: take(observed, inputs),
    E: take(keptRates, inputRates),
    G: take(observed, inputRates),
  };
}
