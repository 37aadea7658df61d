import type { StateModel } from "../equations/model.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";

/** What no closed form gives: variables of unsolved loops, and the rates of M(x)·ẋ = h; one residual for each. */
export interface Unknowns {
  readonly symbols: readonly Symbol[];
  readonly residuals: readonly Expr[];
}

const known = new WeakMap<StateModel, Unknowns>();

export function unknownsOf(model: StateModel): Unknowns {
  let unknowns = known.get(model);
  if (unknowns === undefined) {
    unknowns = collect(model);
    known.set(model, unknowns);
  }
  return unknowns;
}

function collect({ causal, states, loops, implicit }: StateModel): Unknowns {
  const { pool } = causal.graph;
  const unsolved = loops.filter(({ solved }) => !solved);
  const symbols = unsolved.flatMap(({ variables }) => variables.map(({ symbol }) => symbol));
  const residuals = unsolved.flatMap((loop) => [...loop.residuals]);
  if (implicit === null) return { symbols, residuals };
  const rates = states.map(({ name }) => pool.symbol("rate", name));
  const rows = implicit.mass.map((row, i) => {
    const terms = row.map((entry, j) => pool.product(entry, rates[j]));
    return pool.subtract(pool.sum(terms), implicit.right[i]);
  });
  return { symbols: [...symbols, ...rates], residuals: [...residuals, ...rows] };
}
