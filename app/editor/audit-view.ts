import type { DerivationStep } from "../../grammar/equations/model.ts";
import type { Light } from "./light.ts";
import type { Formula, Place } from "./view-model.ts";

/** How an equation comes about, step by step, and why a bond is as it is: what a reviewer audits. Plain values. */
export interface DerivationView {
  readonly steps: readonly StepView[];
}

export interface StepView extends Light {
  /** `implicit`: what a loop leaves unknown, and a solver finds at each step. */
  readonly rule: DerivationStep["rule"] | "implicit";
  readonly equation: Formula;
  readonly place: Place;
}

export interface BondView {
  readonly id: string;
  readonly from: string;
  readonly to: string;
  readonly domain: string;
  readonly place: Place;
  /** The node that sets the effort, and the one that sets the flow; null while causality is open. */
  readonly effortBy: string | null;
  readonly flowBy: string | null;
  /** In terms of states, inputs and parameters; null where the equations are not derived. */
  readonly effort: VariableView | null;
  readonly flow: VariableView | null;
  /** Each after what it rests on; the bond itself last. */
  readonly why: readonly ReasonView[];
}

export interface VariableView {
  readonly equation: Formula;
  readonly unit: string;
}

export interface ReasonView extends Light {
  readonly text: string;
  readonly bond: string;
  readonly place: Place;
}
