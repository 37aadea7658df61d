import type { Span } from "../source/span.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import { compareNames } from "../symbolic/names.ts";
import type { Pool } from "../symbolic/pool.ts";
import type { Condition, ElementKind } from "../syntax/tree.ts";
import type { Unit } from "../units/unit.ts";

/**
 * One system as a flat bond graph: subs expanded, repeats unrolled, names full (`rope.spring`, `cell[3]`),
 * laws as expressions in SI. What a stage after this needs to know about a model stands here.
 */
export interface FlatGraph {
  readonly system: string;
  readonly description: string | null;
  readonly span: Span;
  /** All expressions of the graph and of what is derived from it live in this pool. */
  readonly pool: Pool;
  /** In the order of the text; every stage that chooses goes by `byName` so that this order does not matter. */
  readonly nodes: readonly FlatNode[];
  readonly bonds: readonly FlatBond[];
  readonly parameters: readonly FlatParameter[];
  readonly inputs: readonly FlatInput[];
  readonly outputs: readonly FlatOutput[];
  readonly tracks: readonly FlatTrack[];
  readonly starts: readonly FlatStart[];
  readonly expectations: readonly FlatExpectation[];
}

export type NodeKind = "0" | "1" | ElementKind | "port";

export interface FlatNode {
  readonly index: number;
  readonly name: string;
  /** `port`: an open port of the system itself; the world outside is at its other side. */
  readonly kind: NodeKind;
  readonly modulated: boolean;
  /** Domain of a junction or one-port; null for what joins two domains. */
  readonly domain: Domain | null;
  /** In the order: `in`, `out` of a two-port; as declared of a field; as wired of a junction. */
  readonly ports: readonly FlatPort[];
  readonly laws: readonly FlatLaw[];
  readonly description: string | null;
  /** The declaration, and the names of the subs it was reached through are in `name`. */
  readonly span: Span;
}

export interface FlatPort {
  /** Empty for junctions and one-ports. */
  readonly name: string;
  readonly bond: number;
  /** Which end of the bond is at this node: `to` where power counts into the node. */
  readonly end: "from" | "to";
  readonly domain: Domain;
}

export interface FlatBond {
  readonly index: number;
  /** `from->to` with a field's port, `#2` for a second one. */
  readonly id: string;
  readonly from: number;
  readonly to: number;
  readonly domain: Domain;
  /** The end at which the text demands the causal stroke. */
  readonly demanded: { readonly end: "from" | "to"; readonly span: Span } | null;
  /** Positive along the arrow. */
  readonly effort: Symbol;
  readonly flow: Symbol;
  readonly span: Span;
}

export interface Domain {
  readonly name: string;
  readonly effort: Unit;
  readonly flow: Unit;
  /** Unit of ∫e dt (p) and of ∫f dt (q). */
  readonly momentum: Unit;
  readonly displacement: Unit;
  readonly pseudo: boolean;
}

export type StoreVariable = "p" | "q";

/**
 * Laws in one normal form each.
 * `relation`: `variable` of the port equals `right`; sources, R, RS, C, I, IC and fields.
 *   `right` holds the bond symbols of the element's own ports (effort, flow), its own states (`state` symbols
 *   named `spring.q`, `coils.a.p`), and signals.
 * `ratio`: TF: out.f = ratio*in.f and in.e = ratio*out.e; GY: out.e = ratio*in.f and in.e = ratio*out.f.
 * `energy`: a store's energy in its own states; e = ∂E/∂q, f = ∂E/∂p.
 */
export type FlatLaw =
  | {
      readonly kind: "relation";
      readonly port: number;
      readonly variable: "e" | "f" | StoreVariable;
      readonly right: Expr;
      readonly oneWay: boolean;
      readonly span: Span;
    }
  | { readonly kind: "ratio"; readonly ratio: Expr; readonly span: Span }
  | { readonly kind: "energy"; readonly energy: Expr; readonly span: Span };

export interface FlatParameter {
  readonly name: string;
  readonly symbol: Symbol;
  /** In terms of other parameters and constants. */
  readonly definition: Expr;
  /** SI. */
  readonly value: number;
  /** As written, for showing. */
  readonly unit: Unit;
  readonly constant: boolean;
  readonly range: { readonly low: number; readonly high: number } | null;
  readonly description: string | null;
  readonly span: Span;
}

export interface FlatInput {
  readonly name: string;
  readonly symbol: Symbol;
  readonly unit: Unit;
  /** SI. */
  readonly nominal: number;
  readonly description: string | null;
  readonly span: Span;
}

export interface FlatOutput {
  readonly name: string;
  readonly value: Expr;
  /** The unit it is shown in. */
  readonly unit: Unit;
  readonly description: string | null;
  readonly span: Span;
}

export interface FlatTrack {
  readonly name: string;
  readonly symbol: Symbol;
  readonly rate: Expr;
  readonly unit: Unit;
  /** SI. */
  readonly from: number;
  readonly span: Span;
}

/** `start spring.q = 4 mm`: a state, or an effort or flow of a store's bond that is solved back through its law. */
export interface FlatStart {
  readonly target: Symbol;
  /** SI. */
  readonly value: number;
  readonly span: Span;
}

/** A requirement; its measures are judged by the expectations stage, which reads the condition as written. */
export interface FlatExpectation {
  readonly condition: Condition;
  readonly text: string;
  readonly span: Span;
}

export { compareNames } from "../symbolic/names.ts";

/** The natural order of `compareNames`, for sorting what has a name. */
export function byName(a: { readonly name: string }, b: { readonly name: string }): number {
  return compareNames(a.name, b.name);
}
