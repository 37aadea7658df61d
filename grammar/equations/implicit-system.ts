import type { Expr } from "../symbolic/expression.ts";
import { linearForms } from "../symbolic/linear.ts";
import type { Pool } from "../symbolic/pool.ts";
import type { StateModel } from "./model.ts";
import { RateFinder, type RateRow, type SolvedRates } from "./rates.ts";

/** M(x)·ẋ = h for all states, where some rates stay coupled; the others have a 1 in their row. */
export function implicitSystem(
  pool: Pool,
  rows: readonly RateRow[],
  solved: SolvedRates,
): StateModel["implicit"] {
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
