import type { Span } from "../source/span.ts";

export type Severity = "error" | "warning" | "note";

/**
 * Every finding the product can make, with its usual severity. The names are a contract: they stand in
 * CI logs, in accepted findings and in the reference, and are never renamed or reused.
 */
export const FINDINGS = {
  syntax: "error",
  "unknown-name": "error",
  "duplicate-name": "error",
  "reserved-name": "error",
  "unknown-unit": "error",
  "unit-mismatch": "error",
  "unknown-variable": "error",
  "domain-conflict": "error",
  "domain-unknown": "error",
  unconnected: "error",
  "wrong-port-count": "error",
  "reversed-passive": "error",
  "port-direction": "error",
  "law-missing": "error",
  "law-form": "error",
  "modulated-store": "error",
  "stroke-refused": "error",
  "causal-conflict": "error",
  "singular-junctions": "error",
  "signal-circle": "error",
  "sub-cycle": "error",
  "file-missing": "error",
  "import-cycle": "error",
  "too-large": "error",
  "expectation-failed": "error",
  "not-computable": "error",
  "run-stopped": "error",
  "check-stopped": "error",
  /** A form of edition 1 that is read and formatted, but that this version does not yet work out. */
  "not-yet": "error",
  "derivative-causality": "warning",
  "algebraic-loop": "warning",
  "input-derivative": "warning",
  "not-reciprocal": "warning",
  "not-passive": "warning",
  "unit-or-name": "warning",
  "repeated-bond": "warning",
  "out-of-range": "warning",
  "curve-left": "warning",
  "no-equilibrium": "warning",
  "unstable-trial": "warning",
  "energy-not-closed": "warning",
  "stale-acceptance": "warning",
  "implicit-equation": "note",
  stiff: "note",
  "unused-name": "note",
  "adjacent-junctions": "note",
  "missing-description": "note",
} as const satisfies Record<string, Severity>;

export type FindingName = keyof typeof FINDINGS;

/** One thing that led to a finding, in the trade's words; with a span where it stands in the text. */
export interface Fact {
  readonly message: string;
  readonly span?: Span;
}

/** An edit that mends the finding. Edits do not overlap. */
export interface Fix {
  readonly title: string;
  readonly edits: readonly TextEdit[];
}

export interface TextEdit {
  readonly span: Span;
  readonly text: string;
}

export interface Finding {
  readonly name: FindingName;
  readonly severity: Severity;
  /** One sentence: what is wrong, where, and if it fits how to mend it. */
  readonly message: string;
  readonly span: Span;
  readonly facts: readonly Fact[];
  readonly fix?: Fix;
  /** Where the finding is held against a set's settings: what it is known by, and by whose leave it stands. */
  readonly fingerprint?: string;
  readonly accepted?: Acceptance;
}

/** A finding that is known and may stay for a while. It is still shown, and fails nothing. */
export interface Acceptance {
  readonly owner: string;
  readonly reason: string;
  /** The last day on which it counts, `2027-03-31`, in UTC. */
  readonly until: string;
}

export function finding(
  name: FindingName,
  span: Span,
  message: string,
  more: { facts?: readonly Fact[]; fix?: Fix } = {},
): Finding {
  return { name, severity: FINDINGS[name], message, span, facts: more.facts ?? [], fix: more.fix };
}

/** Keeps the words of mistakes with the stage that finds them: each stage reports here and goes on. */
export type Report = (finding: Finding) => void;

const RANK: Record<Severity, number> = { error: 0, warning: 1, note: 2 };

export function atLeast(severity: Severity, threshold: Severity): boolean {
  return RANK[severity] <= RANK[threshold];
}
