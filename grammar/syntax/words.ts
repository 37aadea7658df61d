/** The words of edition 1, for the grammar, for messages, and for the editor's highlighter and completion. */

/** At the head of a line of a file. */
export const FILE_WORDS = [
  "notation",
  "use",
  "domain",
  "const",
  "function",
  "curve",
  "system",
  "trial",
] as const;

/** At the head of a line of a system; junctions (`0`, `1`), elements and wiring stand beside them. */
export const SYSTEM_WORDS = [
  "param",
  "const",
  "input",
  "output",
  "let",
  "track",
  "sub",
  "port",
  "start",
  "repeat",
  "expect",
] as const;

/** At the head of a line of a trial. */
export const TRIAL_WORDS = [
  "set",
  "start",
  "drive",
  "run",
  "record",
  "vary",
  "scatter",
  "compare",
  "expect",
] as const;

export const STATEMENT_WORDS: ReadonlySet<string> = new Set([...FILE_WORDS, ...SYSTEM_WORDS, ...TRIAL_WORDS]);

/** Kinds of elements as the trade spells them; a modulated one may be written with an `M` before it. */
export const ELEMENT_WORDS: ReadonlyMap<string, "Se" | "Sf" | "R" | "C" | "I" | "TF" | "GY" | "IC" | "RS"> =
  new Map(
    (["Se", "Sf", "R", "C", "I", "TF", "GY", "IC", "RS"] as const).flatMap((kind) => [
      [kind, kind] as const,
      [`M${kind}`, kind] as const,
    ]),
  );

/** Words inside a statement; elsewhere they are free as names. After a number they are never a unit. */
export const CLAUSE_WORDS = [
  "range",
  "as",
  "from",
  "takes",
  "gives",
  "within",
  "between",
  "over",
  "steps",
  "with",
  "columns",
  "tolerance",
  "every",
  "of",
  "for",
  "effort",
  "flow",
  "pseudo",
  "linear",
  "smooth",
  "steady",
] as const;

/** Operators written as words; never names. */
export const OPERATOR_WORDS = ["and", "or", "not", "where", "else"] as const;

/** Names that mean something in every expression and can't be declared. */
export const RESERVED_NAMES: ReadonlySet<string> = new Set([
  "e",
  "f",
  "p",
  "q",
  "time",
  "in",
  "out",
  ...OPERATOR_WORDS,
  "pi",
  "g0",
]);

export const FUNCTION_NAMES: ReadonlySet<string> = new Set([
  "sin",
  "cos",
  "tan",
  "asin",
  "acos",
  "atan",
  "atan2",
  "sinh",
  "cosh",
  "tanh",
  "exp",
  "ln",
  "log10",
  "sqrt",
  "abs",
  "sign",
  "min",
  "max",
]);

/** What a `drive` may be made of. */
export const DRIVE_HELPERS: ReadonlySet<string> = new Set([
  "step",
  "ramp",
  "pulse",
  "sine",
  "sweep_sine",
  "recorded",
]);

/** What an `expect` of a system measures. */
export const SYSTEM_MEASURES: ReadonlySet<string> = new Set([
  "order",
  "dependent",
  "loops",
  "stable",
  "integral",
  "frequency",
  "damping",
  "mode",
  "gain",
  "phase",
  "bandwidth",
  "steady",
]);

/** What an `expect` of a trial measures. */
export const TRIAL_MEASURES: ReadonlySet<string> = new Set([
  "final",
  "max",
  "min",
  "peak",
  "rms",
  "mean",
  "at",
  "settling",
  "rise",
  "overshoot",
  "time_when",
  "energy_in",
  "energy_lost",
]);

export const BUILT_IN_DOMAINS: ReadonlySet<string> = new Set([
  "translation",
  "rotation",
  "electrical",
  "hydraulic",
  "thermal",
  "heat",
  "magnetic",
  "acoustic",
  "chemical",
]);
