import type { Expr, Symbol } from "../symbolic/expression.ts";
import type { EnergyBook } from "./energy-book.ts";
import { compileProgram, type Machine } from "./program.ts";
import { machineFor } from "./wasm.ts";

/** J, of the whole run; `stored` is the change. By element in the order of the text. */
export interface EnergyReport {
  readonly supplied: number;
  readonly dissipated: number;
  readonly stored: number;
  /** The largest share that was missing at any time, of what had been moved up to then: what stores gave to each other
   * (the swing of each), what was supplied, either way, and what was dissipated. */
  readonly closure: number;
  readonly elements: readonly {
    readonly name: string;
    readonly kind: "supplied" | "dissipated" | "stored";
    readonly energy: number;
  }[];
}

/** What the audit watches along a run, in its order. */
export function auditedExprs({ supplies, losses, stores }: EnergyBook): Expr[] {
  return [
    ...supplies.map(({ power }) => power),
    ...losses.map(({ power }) => power),
    ...stores.flatMap(({ values }) => [...values]),
  ];
}

/** Gauss–Legendre with five points on [0, 1]: Abramowitz, Stegun, 25.4.30; from memory, exact to degree 9. */
const POINTS = [0.046910077030668, 0.2307653449471585, 0.5, 0.7692346550528415, 0.953089922969332];
const WEIGHTS = [
  0.1184634425280945, 0.2393143352496832, 0.2844444444444444, 0.2393143352496832, 0.1184634425280945,
];
const NEGLIGIBLE = 1e-6;
/** Boole's rule on quarters of a step. */
const BOOLE = [7 / 90, 32 / 90, 12 / 90, 32 / 90, 7 / 90];

/**
 * Keeps the books of a run, step by step. Power is integrated over the step's dense output; what is stored follows from
 * the stores' own variables at the ends of the step by their laws, and knows nothing of that power.
 */
export class EnergyAudit {
  readonly #book: EnergyBook;
  readonly #laws: Machine;
  readonly #supplied: Float64Array;
  readonly #dissipated: Float64Array;
  readonly #stored: Float64Array;
  readonly #before: Float64Array;
  readonly #own: number;
  #moved = 0;
  readonly #low: Float64Array;
  readonly #high: Float64Array;
  /** After each step: what was missing, and what had been moved. */
  readonly #missing: number[] = [];
  readonly #scale: number[] = [];

  constructor(book: EnergyBook, valueOf: (expr: Expr) => number) {
    this.#book = book;
    const { supplies, losses, stores } = book;
    const own: Symbol[] = stores.flatMap((store) => [...store.own]);
    const program = compileProgram(
      stores.flatMap(({ given }) => [...given]),
      own,
    );
    this.#laws = machineFor(program);
    program.fixed.forEach((expr, i) => {
      this.#laws.fixed[i] = valueOf(expr);
    });
    this.#own = own.length;
    this.#supplied = new Float64Array(supplies.length);
    this.#dissipated = new Float64Array(losses.length);
    this.#stored = new Float64Array(stores.length);
    this.#before = new Float64Array(own.length);
    this.#low = new Float64Array(stores.length);
    this.#high = new Float64Array(stores.length);
  }

  /** `quarters`: what is watched at 0, 1/4, 1/2, 3/4 and 1 of the step; the part of it that is watched here. */
  step(length: number, quarters: readonly Float64Array[], fresh: boolean): void {
    const { supplies, losses } = this.#book;
    const at = supplies.length + losses.length;
    const [first, last] = [quarters[0].subarray(at), quarters[4].subarray(at)];
    if (fresh) this.#before.set(first);
    quarters.forEach((values, k) => {
      const weight = BOOLE[k] * length;
      let supplied = 0;
      for (let i = 0; i < supplies.length; i += 1) {
        this.#supplied[i] += weight * values[i];
        supplied += values[i];
      }
      this.#moved += weight * Math.abs(supplied);
      for (let i = 0; i < losses.length; i += 1) {
        const power = values[supplies.length + i];
        this.#dissipated[i] += weight * power;
        this.#moved += weight * Math.abs(power);
      }
    });
    this.#store(last);
    this.#before.set(last);
    this.#close();
  }

  #store(last: Float64Array): void {
    const { variables, results } = this.#laws;
    const change = last.map((value, i) => value - this.#before[i]);
    const integrals = new Float64Array(this.#own);
    POINTS.forEach((point, k) => {
      for (let i = 0; i < this.#own; i += 1) variables[i] = this.#before[i] + point * change[i];
      this.#laws.run();
      for (let i = 0; i < this.#own; i += 1) integrals[i] += WEIGHTS[k] * results[i] * change[i];
    });
    const ends = [this.#before, last].map((values) => {
      variables.set(values);
      this.#laws.run();
      return Float64Array.from(results);
    });
    let at = 0;
    this.#book.stores.forEach(({ by, signs }, s) => {
      signs.forEach((sign) => {
        const i = at;
        at += 1;
        if (by !== "co-energy") this.#stored[s] += sign * integrals[i];
        else this.#stored[s] += sign * (last[i] * ends[1][i] - this.#before[i] * ends[0][i] - integrals[i]);
      });
    });
  }

  #close(): void {
    let swing = 0;
    for (let i = 0; i < this.#stored.length; i += 1) {
      this.#low[i] = Math.min(this.#low[i], this.#stored[i]);
      this.#high[i] = Math.max(this.#high[i], this.#stored[i]);
      swing += this.#high[i] - this.#low[i];
    }
    const scale = swing + this.#moved;
    const missing = Math.abs(sum(this.#supplied) - sum(this.#dissipated) - sum(this.#stored));
    this.#missing.push(missing);
    this.#scale.push(scale);
  }

  get supplied(): number {
    return sum(this.#supplied);
  }

  get dissipated(): number {
    return sum(this.#dissipated);
  }

  /** Before a millionth of all was moved there is nothing to be seen but rounding. */
  #closure(): number {
    const least = NEGLIGIBLE * (this.#scale.at(-1) ?? 0);
    return this.#missing.reduce((worst, missing, i) => {
      const scale = this.#scale[i];
      return scale > least ? Math.max(worst, missing / scale) : worst;
    }, 0);
  }

  report(): EnergyReport {
    const { supplies, losses, stores } = this.#book;
    const of = (
      kind: "supplied" | "dissipated" | "stored",
      named: readonly { name: string }[],
      from: Float64Array,
    ) => named.map(({ name }, i) => ({ name, kind, energy: from[i] }));
    return {
      supplied: this.supplied,
      dissipated: this.dissipated,
      stored: sum(this.#stored),
      closure: this.#closure(),
      elements: [
        ...of("supplied", supplies, this.#supplied),
        ...of("dissipated", losses, this.#dissipated),
        ...of("stored", stores, this.#stored),
      ],
    };
  }
}

function sum(values: Float64Array): number {
  return values.reduce((total, value) => total + value, 0);
}
