import type { CausalGraph } from "../causality/strokes.ts";
import type { Span } from "../source/span.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import type { Unit } from "../units/unit.ts";

/**
 * The state model of one system: ẋ = f(x, u, t), or M(x)·ẋ = h(x, u, t) where the rates stay coupled, with
 * implicit variables held by residuals where an algebraic loop has no closed form.
 */
export interface StateModel {
  readonly causal: CausalGraph;
  readonly states: readonly State[];
  readonly dependent: readonly DependentStore[];
  readonly inputs: readonly ModelInput[];
  /** One a state, in the order of `states`. */
  readonly equations: readonly RateEquation[];
  /** Present where the rates could not be solved for symbolically: rows and columns in the order of `states`. */
  readonly implicit: { readonly mass: readonly (readonly Expr[])[]; readonly right: readonly Expr[] } | null;
  readonly loops: readonly AlgebraicLoop[];
  readonly outputs: readonly ModelOutput[];
  /** By bond index: effort and flow in terms of states, inputs, parameters, time and what loops leave unknown. */
  readonly efforts: readonly (Expr | null)[];
  readonly flows: readonly (Expr | null)[];
}

export interface State {
  /** `hull.p`, `rope.spring.q`, or a track's name. */
  readonly name: string;
  readonly symbol: Symbol;
  readonly kind: "p" | "q" | "tracked";
  readonly unit: Unit;
  /** SI. */
  readonly start: number;
  /** The store's node and bond; null for a track. */
  readonly node: number | null;
  readonly bond: number | null;
  readonly span: Span;
  /** The same store seen through its co-energy variable: f of an inertia, e of a compliance; null where the law can't be turned round. */
  readonly coEnergy: { readonly name: string; readonly value: Expr; readonly unit: Unit } | null;
}

export interface DependentStore {
  readonly name: string;
  readonly symbol: Symbol;
  readonly kind: "p" | "q";
  readonly unit: Unit;
  readonly node: number;
  readonly bond: number;
  /** The independent stores that settle it. */
  readonly of: readonly string[];
  /** g(x, u, t). */
  readonly value: Expr;
  readonly rate: Expr;
  readonly span: Span;
}

export interface ModelInput {
  readonly name: string;
  readonly symbol: Symbol;
  readonly unit: Unit;
  readonly nominal: number;
  /** The input's rate occurs in the equations. */
  readonly differentiated: boolean;
}

export interface RateEquation {
  readonly state: string;
  /** The left side's symbol: the rate of the state. */
  readonly rate: Expr;
  readonly span: Span;
}

export interface ModelOutput {
  readonly name: string;
  readonly unit: Unit;
  readonly value: Expr;
  readonly span: Span;
}

export interface AlgebraicLoop {
  /** What is unknown in the loop, as `armature->R_a.e`. */
  readonly variables: readonly { readonly name: string; readonly symbol: Symbol }[];
  /** Zero at the solution. */
  readonly residuals: readonly Expr[];
  readonly linear: boolean;
  /** The loop was solved in closed form and its variables no longer occur in the equations. */
  readonly solved: boolean;
  /** False for a law that can't be turned round and stands alone: nothing leads round in a circle. */
  readonly circular: boolean;
  readonly bonds: readonly number[];
}

/** One auditable step from a rate relation to the collected equation. */
export interface DerivationStep {
  readonly rule:
    | "rate"
    | "junction-sum"
    | "junction-equal"
    | "law"
    | "transformer"
    | "gyrator"
    | "substitution"
    | "collected";
  readonly left: Expr;
  readonly right: Expr;
  readonly bonds: readonly number[];
  readonly span: Span;
}

/** One summand of an equation with the bonds and nodes that it came through: what lights up together. */
export interface TracedTerm {
  readonly term: Expr;
  readonly bonds: readonly number[];
  readonly nodes: readonly number[];
}
