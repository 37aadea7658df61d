import { expect, test } from "vitest";
import { FINDINGS, type Severity } from "../../grammar/diagnostics/finding.ts";

/** The names that the notation's edition 1 promises. They stand in CI logs and accepted findings, so none goes. */
const PROMISED: Record<Severity, string> = {
  error: `syntax unknown-name duplicate-name reserved-name unknown-unit unit-mismatch unknown-variable domain-conflict
    domain-unknown unconnected wrong-port-count reversed-passive port-direction law-missing law-form modulated-store
    stroke-refused causal-conflict singular-junctions signal-circle sub-cycle file-missing import-cycle too-large
    expectation-failed not-computable run-stopped check-stopped not-yet`,
  warning: `derivative-causality algebraic-loop input-derivative not-reciprocal not-passive unit-or-name repeated-bond
    out-of-range curve-left no-equilibrium unstable-trial energy-not-closed stale-acceptance`,
  note: "implicit-equation stiff unused-name adjacent-junctions missing-description",
};

test("the findings are those promised, each with its severity", () => {
  const promised = Object.entries(PROMISED).flatMap(([severity, names]) =>
    names.split(/\s+/).map((name) => [name, severity]),
  );
  expect(FINDINGS).toEqual(Object.fromEntries(promised));
});
