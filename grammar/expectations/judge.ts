import { type Finding, finding } from "../diagnostics/finding.ts";
import type { StateModel } from "../equations/model.ts";
import type { FlatExpectation, FlatGraph } from "../resolve/graph.ts";
import type { Condition } from "../syntax/tree.ts";
import { equal } from "../units/dimension.ts";
import { numberText, unitText } from "../units/unit-text.ts";
import { COUNTS, FACTS, LATER } from "./facts.ts";
import type { ExpectationResult } from "./result.ts";
import { type Measured, measure } from "./value.ts";

type Value = Measured & { readonly kind: "value" };

/** What one condition came to, before it is bound to its line. */
type Verdict =
  | { readonly kind: "judged"; readonly passed: boolean; readonly measured: string; readonly wanted: string }
  | { readonly kind: "later"; readonly measure: string }
  | { readonly kind: "none"; readonly message: string };

/** Holds every `expect` line of a system against its model. Nothing passes that was not measured. */
export function judge(
  graph: FlatGraph,
  model: StateModel | null,
): { results: ExpectationResult[]; findings: Finding[] } {
  const results: ExpectationResult[] = [];
  const findings: Finding[] = [];
  let refusalSaid = false;
  for (const expectation of graph.expectations) {
    const verdict = verdictOf(expectation.condition, model);
    results.push(resultOf(graph.system, expectation.text, verdict));
    // Without equations all requirements fail for one cause, which is said once.
    if (verdict === NO_MODEL) {
      if (!refusalSaid) findings.push(findingOf(expectation, verdict));
      refusalSaid = true;
    } else if (verdict.kind !== "judged" || !verdict.passed) findings.push(findingOf(expectation, verdict));
  }
  return { results, findings };
}

const NO_MODEL: Verdict = {
  kind: "none",
  message: "Nothing can be measured: the system has no equations, as its other findings say.",
};

function verdictOf(condition: Condition, model: StateModel | null): Verdict {
  const later = laterMeasure(condition);
  if (later !== null) return { kind: "later", measure: later };
  if (model === null) return NO_MODEL;
  if (condition.kind === "fact") return factVerdict(condition, model);
  if (condition.kind === "between") {
    const [low, x, high] = [condition.low, condition.measure, condition.high].map((side) =>
      measure(side, model),
    );
    if (x.kind !== "value") return x;
    if (low.kind !== "value") return low;
    if (high.kind !== "value") return high;
    const wanted = `between ${shown(low)} and ${shown(high)}`;
    return compared(x, [low, high], wanted, low.value <= x.value && x.value <= high.value);
  }
  const left = measure(condition.left, model);
  if (left.kind !== "value") return left;
  const right = measure(condition.right, model);
  if (right.kind !== "value") return right;
  if (condition.within === null) {
    const wanted = `${condition.operator} ${shown(right)}`;
    return compared(left, [right], wanted, HOLDS[condition.operator](left.value, right.value));
  }
  const within = measure(condition.within, model);
  if (within.kind !== "value") return within;
  const allowed = within.relative ? within.value * Math.abs(right.value) : within.value;
  const wanted = `= ${shown(right)} within ${within.relative ? `${numberText(within.value * 100)} %` : shown(within)}`;
  const others = within.relative ? [right] : [right, within];
  return compared(left, others, wanted, Math.abs(left.value - right.value) <= allowed);
}

/** Rounding in the last places does not decide over a requirement for equality. */
const SAME = 1e-12;

const HOLDS: Readonly<Record<string, (a: number, b: number) => boolean>> = {
  "<": (a, b) => a < b,
  "<=": (a, b) => a <= b,
  ">": (a, b) => a > b,
  ">=": (a, b) => a >= b,
  "=": (a, b) => Math.abs(a - b) <= SAME * Math.max(Math.abs(a), Math.abs(b)),
};

function compared(left: Value, others: readonly Value[], wanted: string, passed: boolean): Verdict {
  if (others.some(({ dimension, value }) => !equal(dimension, left.dimension) && value !== 0)) {
    return { kind: "none", message: "The condition compares quantities of different units." };
  }
  if ([left, ...others].some(({ value }) => Number.isNaN(value))) {
    return { kind: "none", message: "The condition has no value: it comes out as not a number." };
  }
  return { kind: "judged", passed, measured: shown(left), wanted };
}

function factVerdict(condition: Condition & { readonly kind: "fact" }, model: StateModel): Verdict {
  const name = factName(condition);
  if (name !== null && Object.hasOwn(FACTS, name)) {
    const against = FACTS[name](model);
    return { kind: "judged", passed: against === null, measured: against ?? name, wanted: name };
  }
  if (name !== null && Object.hasOwn(COUNTS, name)) {
    return {
      kind: "none",
      message: `\`${name}\` is a number, so a requirement compares it: \`expect ${name} = …\`.`,
    };
  }
  return { kind: "none", message: "This is neither a fact nor a comparison." };
}

function factName({ measure: asked }: Condition & { readonly kind: "fact" }): string | null {
  return asked.kind === "reference" && asked.path.length === 1 ? asked.path[0].name.text : null;
}

/** A fact or a side of the condition that is read but not worked out; looked for even where there is no model. */
function laterMeasure(condition: Condition): string | null {
  const open =
    condition.kind === "comparison"
      ? [condition.left, condition.right]
      : condition.kind === "between"
        ? [condition.measure, condition.low, condition.high]
        : [condition.measure];
  for (let expr = open.pop(); expr !== undefined; expr = open.pop()) {
    if (expr.kind === "call") {
      if (LATER.has(expr.name.text)) return expr.name.text;
      for (const argument of expr.arguments) open.push(argument);
    } else if (expr.kind === "reference") {
      if (expr.path.length === 1 && LATER.has(expr.path[0].name.text)) return expr.path[0].name.text;
    } else if (expr.kind === "binary") open.push(expr.left, expr.right);
    else if (expr.kind === "unary") open.push(expr.operand);
    else if (expr.kind === "group") open.push(expr.inner);
  }
  return null;
}

function shown({ value, dimension }: Value): string {
  const unit = unitText(dimension);
  return unit === "1" ? numberText(value, 6) : `${numberText(value, 6)} ${unit}`;
}

function laterText(name: string): string {
  return `\`${name}\` is read, but not yet judged.`;
}

function resultOf(system: string, text: string, verdict: Verdict): ExpectationResult {
  const common = { system, trial: null, text };
  const unmeasured = { passed: false, measured: null, wanted: text };
  switch (verdict.kind) {
    case "judged": {
      const { passed, measured, wanted } = verdict;
      return { ...common, judged: true, passed, measured, wanted, message: null };
    }
    case "later":
      return { ...common, ...unmeasured, judged: false, message: laterText(verdict.measure) };
    case "none":
      return { ...common, ...unmeasured, judged: true, message: verdict.message };
  }
}

function findingOf({ text, span }: FlatExpectation, verdict: Verdict): Finding {
  switch (verdict.kind) {
    case "later":
      // A note: what this version can't measure must not stop a build that is otherwise clean.
      return { ...finding("not-yet", span, laterText(verdict.measure)), severity: "note" };
    case "none":
      return finding("not-computable", span, verdict.message);
    case "judged":
      return finding(
        "expectation-failed",
        span,
        `\`${text}\` is not met: measured ${verdict.measured}, wanted ${verdict.wanted}.`,
      );
  }
}
