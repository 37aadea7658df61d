import { Analysis } from "../analysis/analyse.ts";
import { type Finding, finding } from "../diagnostics/finding.ts";
import type { StateModel } from "../equations/model.ts";
import type { FlatExpectation, FlatGraph } from "../resolve/graph.ts";
import type { Condition } from "../syntax/tree.ts";
import { equal } from "../units/dimension.ts";
import type { Unit } from "../units/unit.ts";
import { quantityText, unitOf, unitText } from "../units/unit-text.ts";
import { COUNTS, FACTS, type Fact } from "./facts.ts";
import type { Value } from "./measured.ts";
import type { ExpectationResult } from "./result.ts";
import { hertz, modeThere } from "./system-measures.ts";
import { measure } from "./value.ts";

/** What one condition came to, before it is bound to its line. */
type Verdict =
  | { readonly kind: "judged"; readonly passed: boolean; readonly measured: string; readonly wanted: string }
  | { readonly kind: "none"; readonly message: string };

/** Holds every `expect` line of a system against its model. Nothing passes that was not measured. */
export function judge(
  graph: FlatGraph,
  model: StateModel | null,
): { results: ExpectationResult[]; findings: Finding[] } {
  const results: ExpectationResult[] = [];
  const findings: Finding[] = [];
  const analysis = model === null ? null : new Analysis(model);
  let refusalSaid = false;
  let equilibriumSaid = false;
  for (const expectation of graph.expectations) {
    const verdict = analysis === null ? NO_MODEL : verdictOf(expectation.condition, analysis);
    results.push(resultOf(graph.system, expectation.text, verdict));
    // Without equations all requirements fail for one cause, which is said once.
    if (verdict === NO_MODEL) {
      if (!refusalSaid) findings.push(findingOf(expectation, verdict));
      refusalSaid = true;
    } else if (verdict.kind !== "judged" || !verdict.passed) findings.push(findingOf(expectation, verdict));
    // Said once, where a requirement first asked for it.
    const reason = analysis?.missedEquilibrium ?? null;
    if (reason !== null && !equilibriumSaid) {
      findings.push(
        finding(
          "no-equilibrium",
          expectation.span,
          `There is no equilibrium under the nominal inputs. ${reason}`,
        ),
      );
      equilibriumSaid = true;
    }
  }
  return { results, findings };
}

const NO_MODEL: Verdict = {
  kind: "none",
  message: "Nothing can be measured: the system has no equations, as its other findings say.",
};

function verdictOf(condition: Condition, analysis: Analysis): Verdict {
  if (condition.kind === "fact") return factVerdict(condition, analysis);
  if (condition.kind === "between") {
    const [low, x, high] = [condition.low, condition.measure, condition.high].map((side) =>
      measure(side, analysis),
    );
    if (x.kind !== "value") return x;
    if (low.kind !== "value") return low;
    if (high.kind !== "value") return high;
    const wanted = `between ${shown(low)} and ${shown(high)}`;
    return compared(x, [low, high], wanted, (value, [least, most]) => least <= value && value <= most);
  }
  const left = measure(condition.left, analysis);
  if (left.kind !== "value") return left;
  const right = measure(condition.right, analysis);
  if (right.kind !== "value") return right;
  if (condition.within === null) {
    const wanted = `${condition.operator} ${shown(right)}`;
    return compared(left, [right], wanted, (value, [other]) => HOLDS[condition.operator](value, other));
  }
  const within = measure(condition.within, analysis);
  if (within.kind !== "value") return within;
  const wanted = `= ${shown(right)} within ${shown(within)}`;
  if (within.relative) {
    return compared(
      left,
      [right],
      wanted,
      (value, [other]) => Math.abs(value - other) <= within.value * Math.abs(other),
    );
  }
  return compared(left, [right, within], wanted, (value, [other, width]) => Math.abs(value - other) <= width);
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

/** Compares in one unit; a frequency in Hz with one in rad/s by what both mean. */
function compared(
  left: Value,
  others: readonly Value[],
  wanted: string,
  holds: (value: number, others: readonly number[]) => boolean,
): Verdict {
  const values: number[] = [];
  for (const other of others) {
    const number = inTheUnitOf(left, other);
    if (number === null) return { kind: "none", message: apart(left, other) };
    values.push(number);
  }
  if ([left.value, ...values].some(Number.isNaN)) {
    return { kind: "none", message: "The condition has no value: it comes out as not a number." };
  }
  return { kind: "judged", passed: holds(left.value, values), measured: shownLike(left, others[0]), wanted };
}

function inTheUnitOf(left: Value, other: Value): number | null {
  if (!equal(other.dimension, left.dimension)) return other.value === 0 ? 0 : null;
  const turns = [left, other].some(({ unit }) => unit?.cycles === true);
  if (!turns || (left.unit?.cycles === true && other.unit?.cycles === true)) return other.value;
  const frequency = hertz(other);
  if (frequency === null) return other.value === 0 ? 0 : null;
  if (left.unit?.cycles === true) return frequency;
  return left.unit?.angular === true ? frequency * 2 * Math.PI : null;
}

function apart(left: Value, other: Value): string {
  const [a, b] = [left, other].map(({ unit, dimension }) => unit?.text ?? unitText(dimension));
  return `The condition compares a value in ${a} with one in ${b}.`;
}

function factVerdict(condition: Condition & { readonly kind: "fact" }, analysis: Analysis): Verdict {
  const { measure: asked, within } = condition;
  if (asked.kind === "call" && asked.name.text === "mode") {
    const [wanted, width] = [asked.arguments[0], within].map((side) =>
      side === undefined || side === null ? null : measure(side, analysis),
    );
    if (wanted === null || asked.arguments.length !== 1)
      return { kind: "none", message: "Ask for a mode by its frequency: `mode(3.3 Hz) within 5 %`." };
    if (wanted.kind === "none") return wanted;
    if (width?.kind === "none") return width;
    const near = width === null ? "" : ` within ${shown(width)}`;
    return factOf(modeThere(analysis, wanted, width), `mode(${shown(wanted)})${near}`);
  }
  const name = asked.kind === "reference" && asked.path.length === 1 ? asked.path[0].name.text : null;
  if (name !== null && Object.hasOwn(FACTS, name)) return factOf(FACTS[name](analysis), name);
  if (name !== null && Object.hasOwn(COUNTS, name)) {
    return {
      kind: "none",
      message: `\`${name}\` is a number, so a requirement compares it: \`expect ${name} = …\`.`,
    };
  }
  return { kind: "none", message: "This is neither a fact nor a comparison." };
}

function factOf(fact: Fact, wanted: string): Verdict {
  if ("message" in fact) return { kind: "none", message: fact.message };
  return { kind: "judged", passed: fact.holds, measured: fact.measured, wanted };
}

function shown(side: Value): string {
  return shownLike(side, side);
}

/** A value in the unit of another, so that what was measured stands beside what was wanted. */
function shownLike({ value, dimension, unit }: Value, other: Value): string {
  const frequencies = unit?.cycles === true && other.unit?.angular === true;
  if (frequencies) return quantityText(value * 2 * Math.PI, other.unit as Unit, 6);
  const fits = other.unit !== null && equal(other.unit.dimension, dimension) && other.unit.text !== "1";
  return quantityText(value, (fits ? other.unit : unit) ?? unitOf(dimension), 6);
}

function resultOf(system: string, text: string, verdict: Verdict): ExpectationResult {
  const common = { system, trial: null, text };
  const unmeasured = { passed: false, measured: null, wanted: text };
  switch (verdict.kind) {
    case "judged": {
      const { passed, measured, wanted } = verdict;
      return { ...common, judged: true, passed, measured, wanted, message: null };
    }
    case "none":
      return { ...common, ...unmeasured, judged: true, message: verdict.message };
  }
}

function findingOf({ text, span }: FlatExpectation, verdict: Verdict): Finding {
  switch (verdict.kind) {
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
