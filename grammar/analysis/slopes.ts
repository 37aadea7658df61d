import type { StateModel } from "../equations/model.ts";
import { differentiation } from "../symbolic/derivative.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import type { Pool } from "../symbolic/pool.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import { zeros } from "./dense.ts";
import { unknownsOf } from "./unknowns.ts";

/** The entries of a symbolic Jacobian that are not zero. */
export interface Slope {
  readonly row: number;
  readonly column: number;
  readonly value: Expr;
}

/** ∂rows/∂columns, each column's shared parts differentiated once. */
export function slopes(pool: Pool, rows: readonly Expr[], columns: readonly Symbol[]): Slope[] {
  const at = new Map(columns.map((symbol, i) => [symbol, i]));
  const of = new Map<Symbol, (expr: Expr) => Expr>();
  const found: Slope[] = [];
  rows.forEach((expr, row) => {
    for (const symbol of symbolsOf(expr)) {
      const column = at.get(symbol);
      if (column === undefined) continue;
      let differentiate = of.get(symbol);
      if (differentiate === undefined) {
        differentiate = differentiation(pool, symbol);
        of.set(symbol, differentiate);
      }
      const value = differentiate(expr);
      if (value !== pool.zero) found.push({ row, column, value });
    }
  });
  return found;
}

export function slopesAt(
  entries: readonly Slope[],
  rows: number,
  columns: number,
  valueOf: (expr: Expr) => number,
): number[][] {
  const matrix = zeros(rows, columns);
  for (const { row, column, value } of entries) matrix[row][column] = valueOf(value);
  return matrix;
}

/** Columns in the order states, inputs, rates of inputs; `unknown` by what has no closed form. */
export interface ModelSlopes {
  readonly columns: readonly Symbol[];
  readonly rates: readonly Slope[];
  readonly ratesByUnknown: readonly Slope[];
  readonly residuals: readonly Slope[];
  readonly residualsByUnknown: readonly Slope[];
}

const known = new WeakMap<StateModel, ModelSlopes>();

/** The symbolic Jacobians of a model, worked out once. */
export function slopesOf(model: StateModel): ModelSlopes {
  let all = known.get(model);
  if (all === undefined) {
    const { pool } = model.causal.graph;
    const columns = columnsOf(model);
    const { symbols, residuals } = unknownsOf(model);
    const rates = model.equations.map(({ rate }) => rate);
    all = {
      columns,
      rates: slopes(pool, rates, columns),
      ratesByUnknown: slopes(pool, rates, symbols),
      residuals: slopes(pool, residuals, columns),
      residualsByUnknown: slopes(pool, residuals, symbols),
    };
    known.set(model, all);
  }
  return all;
}

function columnsOf({ causal, states, inputs }: StateModel): Symbol[] {
  const { pool } = causal.graph;
  return [
    ...states.map(({ symbol }) => symbol),
    ...inputs.map(({ symbol }) => symbol),
    ...inputs.map(({ symbol }) => pool.symbol("inputRate", symbol.name)),
  ];
}
