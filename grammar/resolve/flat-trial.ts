import type { Span } from "../source/span.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import type { Unit } from "../units/unit.ts";
import type { FlatGraph, FlatStart } from "./graph.ts";

/** A trial as it is run: names looked up, units checked, numbers in SI. Expressions live in the pool of its graph. */
export interface FlatTrial {
  readonly name: string;
  readonly system: string;
  readonly description: string | null;
  readonly span: Span;
  /** The system it runs; null where that, or the trial itself, is refused: its findings say why. */
  readonly graph: FlatGraph | null;
  /** SI, by full name of the parameter. */
  readonly sets: ReadonlyMap<string, number>;
  /** Consts that the trial uses and its system does not. */
  readonly constants: ReadonlyMap<Symbol, number>;
  readonly steady: Span | null;
  readonly starts: readonly FlatStart[];
  readonly drives: readonly FlatDrive[];
  /** s; null where there is no `run`. */
  readonly duration: number | null;
  readonly tolerance: number | null;
  readonly every: number | null;
  readonly records: readonly TrialSignal[];
  readonly varies: readonly FlatVary[];
  readonly scatter: number | null;
  readonly comparisons: readonly FlatComparison[];
  readonly expectations: readonly TrialExpectation[];
  /** As written, by the whole statement: for results of a trial that is refused. */
  readonly texts: readonly { readonly text: string; readonly span: Span }[];
}

export interface FlatDrive {
  readonly input: string;
  /** In terms of time and parameters. */
  readonly value: Expr;
  /** s: where it steps; `settling`, `rise` and `overshoot` count from the last one. */
  readonly steps: readonly Expr[];
  readonly span: Span;
}

export interface FlatVary {
  readonly parameter: string;
  readonly unit: Unit;
  readonly low: number;
  readonly high: number;
  /** Number of steps from low to high, so that there is one value more. */
  readonly steps: number;
}

export interface TrialSignal {
  readonly name: string;
  readonly value: Expr;
  readonly unit: Unit;
}

/** A measured signal beside a computed one; times in s, values in SI. */
export interface FlatComparison {
  readonly signal: TrialSignal;
  readonly path: string;
  readonly times: readonly number[];
  readonly values: readonly number[];
  readonly limit: { readonly measure: string; readonly operator: "<" | "<="; readonly value: number } | null;
  readonly text: string;
  readonly span: Span;
}

export type MeasureKind =
  | "final"
  | "max"
  | "min"
  | "peak"
  | "rms"
  | "mean"
  | "at"
  | "settling"
  | "rise"
  | "overshoot"
  | "time_when"
  | "energy_in"
  | "energy_lost";

/** What is read off a run; `symbol` stands for it in the sides of a condition. */
export interface TrialMeasure {
  readonly kind: MeasureKind;
  readonly symbol: Symbol;
  /** What is looked at; of `time_when` the condition; null for energies. */
  readonly signal: Expr | null;
  /** Of `at` the time, of `settling` the band. */
  readonly argument: Expr | null;
}

/** One side of a condition, with the unit its value is shown in. */
export interface TrialSide {
  readonly value: Expr;
  readonly unit: Unit;
}

export interface TrialExpectation {
  readonly text: string;
  readonly span: Span;
  readonly measures: readonly TrialMeasure[];
  readonly condition:
    | {
        readonly kind: "comparison";
        readonly left: TrialSide;
        readonly operator: "<" | "<=" | ">" | ">=" | "=";
        readonly right: TrialSide;
        readonly within: (TrialSide & { readonly relative: boolean }) | null;
      }
    | {
        readonly kind: "between";
        readonly left: TrialSide;
        readonly low: TrialSide;
        readonly high: TrialSide;
      };
}
