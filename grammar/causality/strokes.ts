import type { FlatGraph } from "../resolve/graph.ts";
import type { Span } from "../source/span.ts";

/**
 * Which end of a bond carries the causal stroke. The stroke stands where the effort arrives: that end is told
 * the effort and answers with the flow (Karnopp, Margolis, Rosenberg: System Dynamics, causality chapter).
 */
export type Stroke = "from" | "to";

/** Why a stroke stands; `premises` are the bonds whose strokes led to it through `node`. */
export interface Reason {
  readonly rule:
    | "source"
    | "demanded"
    | "one-way-law"
    | "heat-bond"
    | "integral-store"
    | "derivative-store"
    | "law-not-invertible"
    | "chosen-resistor"
    | "chosen-bond"
    /** A choice whose opposite, followed to its end, contradicts the premises. */
    | "excluded"
    | "open-port"
    | "junction"
    | "transformer"
    | "gyrator";
  readonly node: number;
  readonly premises: readonly number[];
}

export interface CausalGraph {
  readonly graph: FlatGraph;
  /** By bond index; null where a conflict left it open. */
  readonly strokes: readonly (Stroke | null)[];
  readonly reasons: readonly (Reason | null)[];
  /** By node index and port index: does this store's port integrate? */
  readonly stores: readonly StorePort[];
  /** Bonds whose stroke no rule forces: where algebraic loops are torn, in the order they were chosen. */
  readonly chosen: readonly number[];
}

export interface StorePort {
  readonly node: number;
  readonly port: number;
  readonly variable: "p" | "q";
  /** `spring.q`, `coils.a.p`. */
  readonly name: string;
  readonly integral: boolean;
}

/** One step of the chain that explains a stroke, for findings and for the page. */
export interface ReasonStep {
  readonly bond: number;
  readonly stroke: Stroke;
  /** In the trade's words: Se `supply` sets the effort of `supply->armature`. */
  readonly text: string;
  readonly span: Span;
}
