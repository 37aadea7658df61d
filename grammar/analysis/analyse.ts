import type { StateModel } from "../equations/model.ts";
import type { Symbol } from "../symbolic/expression.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import { atRest, type Equilibrium, equilibrium } from "./equilibrium.ts";
import { evaluateModel } from "./evaluate-model.ts";
import { type Linearised, lineariseAt, type Signal } from "./linearise.ts";
import { type Modes, modesOf } from "./modes.ts";
import { type Point, startPoint } from "./point.ts";
import { movingStates } from "./recording-tracks.ts";
import { slopes, slopesOf } from "./slopes.ts";

/** Where a model is linearised when nothing else is asked: its equilibrium, or its start where there is none. */
export interface OperatingPoint {
  readonly point: Point;
  readonly equilibrium: boolean;
  /** Why there is no equilibrium. */
  readonly reason: string | null;
}

/** Everything about a model that numbers say, each part worked out when it is first asked for. */
export class Analysis {
  readonly model: StateModel;
  readonly #given: Point | null;
  readonly #parameters: ReadonlyMap<string, number>;
  #equilibrium: Equilibrium | null = null;
  #linear: Linearised | null = null;
  #modes: Modes | null = null;

  constructor(
    model: StateModel,
    parameters: ReadonlyMap<string, number> = new Map(),
    given: Point | null = null,
  ) {
    this.model = model;
    this.#given = given;
    this.#parameters = given?.parameters ?? parameters;
  }

  /** At a given point instead of the equilibrium. */
  static at(model: StateModel, point: Point): Analysis {
    return new Analysis(model, point.parameters, point);
  }

  get equilibrium(): Equilibrium {
    this.#equilibrium ??= equilibrium(this.model, { parameters: this.#parameters });
    return this.#equilibrium;
  }

  get operatingPoint(): OperatingPoint {
    if (this.#given !== null) {
      const evaluated = evaluateModel(this.model, this.#given);
      const resting = evaluated.kind === "values" && atRest(this.model, evaluated);
      return { point: this.#given, equilibrium: resting, reason: null };
    }
    const found = this.equilibrium;
    if (found.kind === "found") return { point: found.point, equilibrium: true, reason: null };
    const point = { ...startPoint(this.model), parameters: this.#parameters };
    return { point, equilibrium: false, reason: found.reason };
  }

  get linear(): Linearised {
    this.#linear ??= this.linearFor(this.model.outputs);
    return this.#linear;
  }

  /** As `linear` for other observed quantities. */
  linearFor(outputs: readonly Signal[]): Linearised {
    const found = this.#given === null ? this.equilibrium : null;
    const at =
      found?.kind === "found" ? found.evaluated : evaluateModel(this.model, this.operatingPoint.point);
    return at.kind === "none" ? at : lineariseAt(this.model, at, outputs);
  }

  /** null where the model can't be linearised. */
  get modes(): Modes | null {
    const { linear } = this;
    if (linear.kind === "none") return null;
    this.#modes ??= modesOf(linear);
    return this.#modes;
  }

  /** Why there is no equilibrium, once something has asked for one. */
  get missedEquilibrium(): string | null {
    return this.#equilibrium?.kind === "none" ? this.#equilibrium.reason : null;
  }

  /** Are the slopes of the rates and of some signals the same wherever the states and inputs are? */
  sameSlopesEverywhere(signals: readonly Signal[]): boolean {
    const moving = new Set(movingStates(this.model).map((i) => this.model.states[i].symbol));
    const { columns, rates, residuals, ratesByUnknown, residualsByUnknown } = slopesOf(this.model);
    const observed = slopes(
      this.model.causal.graph.pool,
      signals.map(({ value }) => value),
      columns,
    );
    const fixed = (symbol: Symbol) =>
      symbol.role === "parameter" ||
      symbol.role === "constant" ||
      (symbol.role === "state" && !moving.has(symbol));
    return [...rates, ...residuals, ...ratesByUnknown, ...residualsByUnknown, ...observed].every(
      ({ value }) => [...symbolsOf(value)].every(fixed),
    );
  }
}
