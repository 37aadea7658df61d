import { holds } from "../symbolic/evaluate.ts";
import type { Expr } from "../symbolic/expression.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import type { Events, Settled } from "./ode.ts";
import type { RunSystem } from "./run-system.ts";

/** A switch that held something to its place sticks within this share of the largest it was seen at. */
const STUCK = 1e-6;
const LEAST_STUCK = 1e-9;
const MOST_FLIPS = 20_000;

/**
 * Keeps the switches of a run in force. Those that time alone turns are corners known beforehand. A `sign` whose both
 * sides lead back to it sticks (A. F. Filippov, Differential Equations with Discontinuous Righthand Sides, 1988: the
 * sliding mode): it is held by a slope so steep that what moves on meanwhile is a millionth of what moved before.
 */
export class RunEvents implements Events {
  readonly corners: readonly number[];
  readonly #system: RunSystem;
  readonly #largest: Float64Array;
  /** By switch: when time turns it, and which way; null where states have their say. */
  readonly #turns: readonly (readonly { readonly at: number; readonly rising: boolean }[] | null)[];
  readonly #tolerance: number;
  readonly #watching: readonly number[];
  #settled = false;
  #flips = 0;

  constructor(system: RunSystem, tolerance: number, start: Float64Array) {
    this.#system = system;
    this.#tolerance = tolerance;
    this.#largest = new Float64Array(system.switches.length);
    const none = system.senses(0, start);
    const [now, later] = [Float64Array.from(none), Float64Array.from(system.senses(1, start))];
    const twice = system.senses(2, start);
    this.#turns = system.switches.map(({ sense }, i) => {
      if ([...symbolsOf(sense)].some(({ role }) => !["time", "parameter", "constant"].includes(role)))
        return null;
      const slope = later[i] - now[i];
      const straight = Math.abs(twice[i] - later[i] - slope) <= 1e-12 * Math.abs(slope);
      return straight && slope !== 0 ? [{ at: -now[i] / slope, rising: slope > 0 }] : null;
    });
    this.corners = [...new Set(this.#turns.flatMap((turns) => turns?.map(({ at }) => at) ?? []))].sort(
      (a, b) => a - b,
    );
    this.#watching = this.#turns.flatMap((turns, i) => (turns === null ? [i] : []));
  }

  crossed(t: number, x: Float64Array): boolean {
    if (this.#watching.length === 0) return false;
    const senses = this.#system.senses(t, x);
    return this.#watching.some((i) => this.#differs(i, senses[i]));
  }

  #differs(i: number, sense: number): boolean {
    const { kind, operator } = this.#system.switches[i];
    const hold = this.#system.holds[i];
    if (kind === "truth") return holds(operator, sense, 0) !== (hold !== 0);
    if (kind === "side") return hold * sense < -1e-3 * this.#tolerance * this.#largest[i];
    const slant = this.#system.slants[i];
    return slant > 0 ? Math.abs(sense * slant) > 1 + 1e-9 : hold * sense < 0;
  }

  settle(t: number, x: Float64Array, step: number): Settled {
    const system = this.#system;
    let stick = false;
    const signs: number[] = [];
    const senses = Float64Array.from(system.senses(t, x));
    system.switches.forEach(({ kind, operator }, i) => {
      const sense = senses[i];
      this.#largest[i] = Math.max(this.#largest[i], Math.abs(sense));
      const turns = this.#turns[i];
      if (turns !== null) {
        const { at, rising } = turns[0];
        const past = t >= at - 1e-12 * Math.abs(at);
        const side = past === rising ? 1 : -1;
        system.holds[i] = kind === "truth" ? (holds(operator, side, 0) ? 1 : 0) : side;
        return;
      }
      if (this.#settled && !this.#differs(i, sense)) return;
      if (this.#settled) this.#flips += 1;
      if (kind === "truth") system.holds[i] = holds(operator, sense, 0) ? 1 : 0;
      else if (kind === "side") system.holds[i] = sense < 0 ? -1 : 1;
      else signs.push(i);
    });
    for (const i of signs) if (this.#settleSign(i, t, x, step, senses[i])) stick = true;
    this.#settled = true;
    if (this.#flips > MOST_FLIPS) {
      const busiest = system.switches.find(({ kind }) => kind !== "side") ?? system.switches[0];
      const reason = `The equations switched ${MOST_FLIPS.toLocaleString("en")} times, at ${whereOf(busiest.origin)} among others.`;
      return { kind: "stop", reason };
    }
    return { kind: "go", stick };
  }

  /** True where it sticks. */
  #settleSign(i: number, t: number, x: Float64Array, step: number, sense: number): boolean {
    const { holds: held, slants } = this.#system;
    const wasStuck = slants[i] > 0;
    const begins = !this.#settled && sense !== 0;
    slants[i] = 0;
    held[i] = sense < 0 ? -1 : 1;
    if (wasStuck || begins) return false;
    const drift = (side: number) => {
      held[i] = side;
      return this.#drift(i, t, x, step);
    };
    const [above, below] = [drift(1), drift(-1)];
    if (above <= 0 && below >= 0) {
      held[i] = 0;
      slants[i] = 1 / Math.max(STUCK * this.#largest[i], LEAST_STUCK);
      return true;
    }
    // On either side of it the model moves on to that side.
    held[i] = above > 0 && (below >= 0 || sense >= 0) ? 1 : -1;
    return false;
  }

  /** Which way the sense of a switch moves on, with what is held now. */
  #drift(i: number, t: number, x: Float64Array, step: number): number {
    const rates = new Float64Array(x.length);
    if (!this.#system.rates(t, x, rates)) return 0;
    const ahead = 1e-3 * step;
    const later = x.map((value, k) => value + ahead * rates[k]);
    const before = this.#system.senses(t, x)[i];
    return this.#system.senses(t + ahead, later)[i] - before;
  }
}

function whereOf(origin: Expr): string {
  const names = [...symbolsOf(origin)].map(({ name }) => `\`${name}\``).slice(0, 3);
  return `${origin.op === "compare" ? "the comparison" : `\`${origin.name}\``} of ${names.join(", ")}`;
}
