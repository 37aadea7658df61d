import type { FindingName, Severity } from "../../grammar/diagnostics/finding.ts";
import type { DiagramModel } from "../../grammar/writing/diagram-model.ts";
import type { Light, TiedLine } from "./light.ts";

/**
 * What the right page shows, as plain values: built in the worker, sent by structured clone, drawn without ever
 * touching an expression. Formulas arrive typeset, since typesetting is the dearest step of all.
 */
export interface FileView {
  readonly path: string;
  readonly systems: readonly string[];
  /** The system that was asked for, or the last of the file; null where the file declares none. */
  readonly system: SystemView | null;
  readonly findings: readonly FindingView[];
  readonly outline: readonly OutlineEntry[];
}

export interface SystemView {
  readonly name: string;
  readonly description: string | null;
  /** null while errors keep the equations from being derived: the page then keeps the last good ones. */
  readonly model: ModelView | null;
  readonly diagram: DiagramModel | null;
  readonly parameters: readonly ValueView[];
  readonly inputs: readonly ValueView[];
  readonly expectations: readonly ExpectationView[];
  readonly tied: readonly TiedLine[];
}

/** States as p and q, or as f of an inertia and e of a compliance. */
export type Variables = "energy" | "co-energy";

export interface ModelView {
  readonly variables: Variables;
  readonly states: readonly StateView[];
  /** One a state; where the rates stay coupled, one a row of M(x)·ẋ = h(x, u, t). */
  readonly equations: readonly EquationView[];
  /** The rates stand in M(x)·ẋ = h(x, u, t) and are solved for at each step. */
  readonly coupled: boolean;
  readonly dependent: readonly DependentView[];
  readonly loops: readonly LoopView[];
  readonly outputs: readonly OutputView[];
}

/** A formula as text (for reading aloud, copying and tests) and typeset. */
export interface Formula {
  readonly text: string;
  readonly html: string;
}

export interface StateView extends Light {
  readonly name: string;
  readonly symbol: Formula;
  readonly unit: string;
  readonly start: string;
  readonly kind: "p" | "q" | "tracked";
  readonly place: Place;
}

export interface EquationView extends Light {
  readonly state: string;
  /** The store or track whose derivation can be asked for; null for an output. */
  readonly store: string | null;
  readonly left: Formula;
  readonly leftLatex: string;
  /** The left side by its terms where the rates stay coupled; null where it is one rate or name. */
  readonly leftTerms: readonly SignedFormula[] | null;
  readonly text: string;
  readonly latex: string;
  readonly terms: readonly TermView[];
}

export interface SignedFormula {
  readonly sign: "+" | "-";
  /** Without its sign. */
  readonly formula: Formula;
}

export interface TermView extends SignedFormula, Light {}

export interface DependentView extends Light {
  readonly name: string;
  readonly of: readonly string[];
  readonly equation: EquationView;
  readonly unit: string;
  readonly place: Place;
}

export interface LoopView extends Light {
  readonly variables: readonly string[];
  readonly linear: boolean;
  readonly solved: boolean;
  readonly residuals: readonly Formula[];
}

export interface OutputView extends Light {
  readonly name: string;
  readonly equation: EquationView;
  readonly unit: string;
}

export interface ValueView extends Light {
  readonly name: string;
  readonly value: string;
  readonly unit: string;
  readonly range: string | null;
  readonly description: string | null;
  readonly place: Place;
}

export interface ExpectationView {
  readonly text: string;
  readonly verdict: "passed" | "failed" | "not judged";
  readonly measured: string | null;
  readonly wanted: string;
  readonly message: string | null;
  readonly place: Place;
}

export interface Place {
  readonly file: string;
  readonly line: number;
  readonly column: number;
  readonly endLine: number;
  readonly endColumn: number;
}

export interface FindingView {
  readonly name: FindingName;
  readonly severity: Severity;
  readonly message: string;
  readonly place: Place;
  readonly facts: readonly { readonly message: string; readonly place: Place | null }[];
  readonly fix: {
    readonly title: string;
    readonly edits: readonly { readonly place: Place; readonly text: string }[];
  } | null;
}

/** What a name stands for: for completion, hover, the outline and going to a definition. */
export interface OutlineEntry {
  readonly name: string;
  readonly space: "node" | "value" | "system" | "trial" | "function" | "curve" | "domain";
  /** `param`, `0`, `TF`, … as written. */
  readonly word: string;
  /** The system or trial it stands in; null at file level. */
  readonly within: string | null;
  /** The line it is declared on, as written. */
  readonly declaration: string;
  readonly description: string | null;
  readonly place: Place;
  /** Where the whole declaration ends; of a system, its closing brace. */
  readonly lastLine: number;
}
