import type { StateModel } from "../equations/model.ts";
import type { Expr, SymbolRole } from "../symbolic/expression.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import { quantityText } from "../units/unit-text.ts";
import { balance } from "./balance.ts";
import { norm, type Rows, solve } from "./dense.ts";
import { type Evaluated, evaluateModel } from "./evaluate-model.ts";
import { stateSlopesAt } from "./linearise.ts";
import { small } from "./newton.ts";
import { conserved, newtonSteps } from "./newton-step.ts";
import { type Point, startPoint } from "./point.ts";
import { rateUnit } from "./rate-unit.ts";
import { movingStates } from "./recording-tracks.ts";
import { slopesOf } from "./slopes.ts";
import { unknownsOf } from "./unknowns.ts";

export interface EquilibriumOptions {
  /** SI, in the order of the model's inputs; the nominal values otherwise. */
  readonly inputs?: readonly number[];
  readonly parameters?: ReadonlyMap<string, number>;
  /** In the order of the model's states; the start values otherwise. */
  readonly start?: readonly number[];
}

/** The states at which all rates are zero; tracks that only record stay as the start has them. */
export type Equilibrium =
  | { readonly kind: "found"; readonly point: Point; readonly evaluated: Evaluated }
  | { readonly kind: "none"; readonly reason: string };

/**
 * Newton's method from the start under inputs that rest; where it fails, the way that the model itself would take
 * in time, in ever longer steps. Totals that the equations conserve (where A is singular) are kept as the start has
 * them.
 */
export function equilibrium(model: StateModel, options: EquilibriumOptions = {}): Equilibrium {
  const nominal = startPoint(model);
  const start: Point = {
    ...nominal,
    states: options.start ?? nominal.states,
    inputs: options.inputs ?? nominal.inputs,
    parameters: options.parameters ?? nominal.parameters,
  };
  const driven = drivenByTime(model);
  if (driven !== null) {
    return {
      kind: "none",
      reason: `The rate of \`${driven}\` changes with time itself, so nothing comes to rest.`,
    };
  }
  const search = new Search(model, start);
  return search.run();
}

function drivenByTime(model: StateModel): string | null {
  const holds = (expr: Expr) => [...symbolsOf(expr)].some(({ role }) => role === "time");
  const at = movingStates(model).find((i) => holds(model.equations[i].rate));
  if (at !== undefined) return model.states[at].name;
  return unknownsOf(model).residuals.some(holds) ? (model.states[0]?.name ?? null) : null;
}

interface Place {
  readonly x: readonly number[];
  readonly evaluated: Evaluated;
  readonly rates: readonly number[];
}

class Search {
  readonly #model: StateModel;
  readonly #start: Point;
  readonly #moving: readonly number[];
  #guess: readonly number[] | undefined;

  constructor(model: StateModel, start: Point) {
    this.#model = model;
    this.#start = start;
    this.#moving = movingStates(model);
  }

  run(): Equilibrium {
    slopesOf(this.#model);
    const begin = this.#moving.map((i) => this.#start.states[i]);
    const first = this.#placeWithSlopes(begin);
    if (first === null)
      return { kind: "none", reason: "The rates have no finite value at the start values." };
    const direct = this.#newton(first.place);
    const verdict = direct === null ? LOST : this.#verdict(direct, begin);
    // At a start where slopes vanish, as those of a square law at rest, Newton's method stays where it is.
    // Where slopes never change it has said all there is to say.
    if (verdict.kind === "found" || linearInStates(this.#model)) return verdict;
    return this.#inTime(first.place, begin) ?? verdict;
  }

  #pointOf(x: readonly number[]): Point {
    const states = [...this.#start.states];
    this.#moving.forEach((i, k) => {
      states[i] = x[k];
    });
    return { ...this.#start, states };
  }

  #place(x: readonly number[]): Place | null {
    const evaluated = evaluateModel(this.#model, this.#pointOf(x), this.#guess);
    if (evaluated.kind === "none") return null;
    const rates = this.#moving.map((i) => evaluated.rates[i]);
    if (!rates.every(Number.isFinite)) return null;
    this.#guess = evaluated.unknowns;
    return { x, evaluated, rates };
  }

  #slopes({ evaluated }: Place): number[][] | null {
    return stateSlopesAt(this.#model, evaluated, this.#moving);
  }

  /** At a corner or a root's infinite slope the start is moved aside a little. */
  #placeWithSlopes(x: readonly number[]): { place: Place; slopes: Rows } | null {
    for (const aside of [0, 1e-6, 1e-3, 1]) {
      const moved = x.map((value, i) => value + aside * (value === 0 ? 1e-3 * (1 + i / x.length) : value));
      const place = this.#place(moved);
      const slopes = place === null ? null : this.#slopes(place);
      if (place !== null && slopes !== null) return { place, slopes };
      if (place !== null && aside === 0 && place.rates.every((rate) => rate === 0))
        return { place, slopes: [] };
    }
    return null;
  }

  #newton(from: Place): Place | null {
    let place = from;
    const seen = place.x.map(Math.abs);
    for (let step = 0; step < 60; step += 1) {
      if (place.rates.every((rate) => rate === 0)) return place;
      const slopes = this.#slopes(place);
      if (slopes === null) return null;
      const inverse = newtonSteps(
        slopes,
        this.#start.states.filter((_, i) => this.#moving.includes(i)),
      );
      const change = inverse(place.x, place.rates);
      if (!change.every(Number.isFinite)) return null;
      const weights = change.map((c, i) => 1 / Math.max(seen[i], Math.abs(c), 1e-300));
      const length = norm(change.map((c, i) => c * weights[i]));
      let next: Place | null = null;
      let damping = 1;
      for (; damping >= 2 ** -12; damping /= 2) {
        next = this.#place(place.x.map((value, i) => value + damping * change[i]));
        if (next === null) continue;
        const again = inverse(next.x, next.rates);
        if (norm(again.map((c, i) => c * weights[i])) <= (1 - damping / 2) * length) break;
        if (damping === 1 && small(change, seen, 1e-8)) return next;
      }
      if (next === null || damping < 2 ** -12) return null;
      next.x.forEach((value, i) => {
        seen[i] = Math.max(seen[i], Math.abs(value));
      });
      place = next;
      if (damping === 1 && small(change, seen, 1e-13)) return place;
    }
    return null;
  }

  /** Pseudo-transient continuation (Kelley and Keyes 1998; from memory): implicit Euler steps that grow as rates fall. */
  #inTime(from: Place, begin: readonly number[]): Equilibrium | null {
    let place = from;
    let slopes = this.#slopes(place);
    let stride = 1e-2 / (slopes === null ? 1 : Math.max(...slopes.map((row, i) => Math.abs(row[i]))) || 1);
    for (let step = 1; step <= 240 && slopes !== null; step += 1) {
      const lhs = slopes.map((row, i) => row.map((value, j) => (i === j ? 1 / stride - value : -value)));
      const solved = solve(
        lhs,
        place.rates.map((rate) => [rate]),
      );
      const next = solved === null ? null : this.#place(place.x.map((value, i) => value + solved.x[i][0]));
      const nextSlopes = next === null ? null : this.#slopes(next);
      if (next === null || nextSlopes === null) {
        stride /= 10;
        if (stride < 1e-30) return null;
        continue;
      }
      [place, slopes] = [next, nextSlopes];
      stride *= 2;
      if (step % 12 !== 0) continue;
      const found = this.#newton(place);
      const verdict = found === null ? null : this.#verdict(found, begin);
      if (verdict?.kind === "found") return verdict;
    }
    return null;
  }

  /**
   * Where A is singular, Newton's method also comes to rest at points at which a conserved total has moved, or is
   * driven on by what no change of state takes away: those are no equilibria.
   */
  #verdict(place: Place, begin: readonly number[]): Equilibrium {
    const slopes = this.#slopes(place);
    const { totals, scale } = slopes === null ? { totals: [], scale: [] } : conserved(slopes);
    for (const weights of totals) {
      const reason = this.#drivenOn(place, weights, scale) ?? this.#moved(place, begin, weights, scale);
      if (reason !== null) return { kind: "none", reason };
    }
    return { kind: "found", point: this.#pointOf(place.x), evaluated: place.evaluated };
  }

  #drivenOn(
    { rates, evaluated }: Place,
    weights: readonly number[],
    scale: readonly number[],
  ): string | null {
    const { states } = this.#model;
    const share = (i: number, value: number) => (weights[i] * value) / scale[i];
    const sizes = this.#moving.map((of, i) =>
      Math.abs(share(i, magnitude(rightSide(this.#model, of), evaluated.valueOf))),
    );
    const driven = rates.reduce((sum, rate, i) => sum + share(i, rate), 0);
    if (Math.abs(driven) <= 1e-9 * sizes.reduce((sum, part) => sum + part, 0)) return null;
    const most = greatest(rates.map((rate, i) => share(i, rate)));
    const state = states[this.#moving[most]];
    const unit = rateUnit(this.#model, state);
    return `Nothing brings the rate of \`${state.name}\` to zero: it stays ${quantityText(rates[most], unit)}.`;
  }

  #moved(
    { x }: Place,
    begin: readonly number[],
    weights: readonly number[],
    scale: readonly number[],
  ): string | null {
    const parts = weights.map((w, i) => (w * (x[i] - begin[i])) / scale[i]);
    const sizes = weights.map((w, i) =>
      Math.abs((w * Math.max(Math.abs(x[i]), Math.abs(begin[i]))) / scale[i]),
    );
    if (Math.abs(parts.reduce((sum, part) => sum + part, 0)) <= 1e-6 * Math.max(...sizes)) return null;
    const name = this.#model.states[this.#moving[greatest(weights)]].name;
    return `The equations conserve a total of \`${name}\`, and nothing rests at the one that the start values give.`;
  }
}

const LOST: Equilibrium = {
  kind: "none",
  reason: "The search from the start values came to no point at which all rates are zero.",
};

function linearInStates(model: StateModel): boolean {
  const { rates, residuals, ratesByUnknown, residualsByUnknown } = slopesOf(model);
  const fixed = new Set<SymbolRole | null>(["parameter", "constant", "input"]);
  return [...rates, ...residuals, ...ratesByUnknown, ...residualsByUnknown].every(({ value }) =>
    [...symbolsOf(value)].every(({ role }) => fixed.has(role)),
  );
}

function greatest(values: readonly number[]): number {
  return values.reduce((best, value, i) => (Math.abs(value) > Math.abs(values[best]) ? i : best), 0);
}

/** Do all rates at a point count as zero, against what they are added up from? */
export function atRest(model: StateModel, evaluated: Evaluated): boolean {
  const moving = movingStates(model);
  const slopes = stateSlopesAt(model, evaluated, moving);
  const scale = slopes === null ? moving.map(() => 1) : balance(slopes).scale;
  const sizes = moving.map((i, k) => magnitude(rightSide(model, i), evaluated.valueOf) / scale[k]);
  const most = Math.max(0, ...sizes);
  return moving.every((i, k) => Math.abs(evaluated.rates[i]) / scale[k] <= 1e-9 * most);
}

/** What a rate is made of: where rates are coupled, the side of M·ẋ = h that holds none. */
function rightSide({ implicit, equations }: StateModel, i: number): Expr {
  return implicit === null ? equations[i].rate : implicit.right[i];
}

/** The size of what is added up in an expression, whatever cancels: against it zero is told from rounding. */
function magnitude(expr: Expr, valueOf: (expr: Expr) => number): number {
  if (expr.op === "sum") return expr.args.reduce((sum, term) => sum + magnitude(term, valueOf), 0);
  if (expr.op === "product")
    return expr.args.reduce((product, factor) => product * magnitude(factor, valueOf), 1);
  return Math.abs(valueOf(expr));
}
