/**
 * The contract of the solvers: ẋ = f(t, x) between `from` and `to`. All numbers are SI doubles.
 * A method tries single steps (`dormand-prince.ts`, `rodas.ts`); `integrate.ts` drives them: it chooses the method and
 * the step, steps onto corners and events, and gives every accepted step away with its dense output.
 */
export interface Problem {
  readonly size: number;
  /** ẋ at (t, x) into `out`; false where it has no finite value. */
  rates(t: number, x: Float64Array, out: Float64Array): boolean;
  /** Places of the Jacobian's entries that can be other than 0. */
  readonly pattern: readonly Place[];
  /** ∂f/∂x into `entries`, one for each place, and ∂f/∂t into `slope`. */
  slopes(t: number, x: Float64Array, entries: Float64Array, slope: Float64Array): boolean;
  /** What each rate is added up from, whatever cancels: below it a difference is rounding. */
  magnitudes(t: number, x: Float64Array): Float64Array;
}

export interface Place {
  readonly row: number;
  readonly column: number;
}

/** Changes of the equations at places in time and state, which a step must end at. */
export interface Events {
  /** Do the equations at (t, x) differ from those in force? */
  crossed(t: number, x: Float64Array): boolean;
  /** Puts those in force that hold just after (t, x); `step` is about how far a step may look. */
  settle(t: number, x: Float64Array, step: number): Settled;
}

export type Settled =
  /** `stick`: something is now held that only the stiff method can follow. */
  { readonly kind: "go"; readonly stick: boolean } | { readonly kind: "stop"; readonly reason: string };

export interface Method {
  readonly name: "dormand-prince" | "rodas";
  /** Order of the result; the error is one of a result one order lower. */
  readonly order: number;
  /** Tries the step; the results stand in `end` and `error`. False where f has no finite value on the way. */
  attempt(t: number, x: Float64Array, rates: Float64Array, h: number): boolean;
  readonly end: Float64Array;
  readonly error: Float64Array;
  /** The state within the step just tried, at the fraction `s` of it. */
  within(s: number, out: Float64Array): void;
  /** About h times the largest eigenvalue in the step just tried; `sizes` make states of all units comparable. */
  stiffness(h: number, sizes: Float64Array): number;
}

/** An accepted step. `within` is valid until the next one. */
export interface Step {
  readonly from: number;
  readonly to: number;
  readonly start: Float64Array;
  readonly end: Float64Array;
  /** The equations changed at its start: what is read there is not what was read at the end of the step before. */
  readonly fresh: boolean;
  within(s: number, out: Float64Array): void;
}

export interface Counters {
  steps: number;
  rejected: number;
  evaluations: number;
  jacobians: number;
  factorizations: number;
  events: number;
  /** Accepted steps by method. */
  /** About how many explicit steps the implicit method's stood for. */
  spared: number;
  readonly by: { "dormand-prince": number; rodas: number };
}

export type Outcome = {
  readonly time: number;
  readonly state: Float64Array;
  readonly counters: Counters;
} & ({ readonly status: "reached" } | { readonly status: "stopped"; readonly reason: string });
