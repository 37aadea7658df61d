import type { Span } from "../source/span.ts";
import type { Condition, Expression } from "../syntax/tree.ts";
import { DIMENSIONLESS } from "../units/dimension.ts";
import { parseUnit } from "../units/parse-unit.ts";
import type { Unit } from "../units/unit.ts";
import type { MeasureKind, TrialExpectation, TrialMeasure, TrialSide } from "./flat-trial.ts";
import { unitFor } from "./numbers.ts";
import type { Scope } from "./scope.ts";
import type { Translator } from "./translate.ts";
import type { Call } from "./tree-walk.ts";
import { isDimension, type Measure, type Typed } from "./typed.ts";

const SECOND = parseUnit("s") as Unit;
const JOULE = parseUnit("J") as Unit;

/** By measure: how many values it takes. `max` and `min` of two values or more are the functions. */
const COUNTS: Readonly<Record<Exclude<MeasureKind, "energy_in" | "energy_lost">, number>> = {
  final: 1,
  max: 1,
  min: 1,
  peak: 1,
  rms: 1,
  mean: 1,
  at: 2,
  settling: 2,
  rise: 1,
  overshoot: 1,
  time_when: 1,
};

const IN_SECONDS: ReadonlySet<string> = new Set(["settling", "rise", "time_when"]);

/** An `expect` of a trial: its sides as expressions in which a symbol stands for each measure. Null where refused. */
export function trialExpectation(
  translator: Translator,
  condition: Condition,
  scope: Scope,
  text: string,
  span: Span,
): TrialExpectation | null {
  const measures: TrialMeasure[] = [];
  const refuse = (message: string) => {
    translator.refuse("law-form", condition.range, scope, message);
    return null;
  };
  if (condition.kind === "fact") {
    return refuse("A requirement of a trial compares a measure: `expect max(x) < 2 m`.");
  }
  const trees =
    condition.kind === "between"
      ? [condition.measure, condition.low, condition.high]
      : [condition.left, condition.right];
  translator.special = (tree, at) => measureIn(translator, tree, at, measures);
  const typed = translator.alike(trees, scope, "What is compared");
  const within =
    condition.kind === "comparison" && condition.within !== null
      ? translator.number(condition.within, scope)
      : null;
  translator.special = null;
  if ([...typed, ...(within === null ? [] : [within])].some(({ measure }) => measure === "unknown"))
    return null;
  if (measures.length === 0) {
    return refuse("Nothing here is measured in the run: write `final(x)`, `max(x)` or another measure.");
  }
  // The text speaks of what is wanted in its own unit; a bare number is shown as what it is compared with.
  const measure = typed.find((one) => isDimension(one.measure))?.measure ?? DIMENSIONLESS;
  const shown = typed.slice(1).find((one) => one.shown !== null)?.shown ?? typed[0].shown;
  const unit = unitFor(measure, shown);
  const [left, right, high] = typed.map(({ expr }): TrialSide => ({ value: expr, unit }));
  const base = { text, span, measures };
  if (condition.kind === "between") {
    return { ...base, condition: { kind: "between", left, low: right, high } };
  }
  const { operator } = condition;
  if (within === null) {
    return { ...base, condition: { kind: "comparison", left, operator, right, within: null } };
  }
  const relative = within.shown?.text === "%" || within.shown?.text === "ppm";
  if (!relative && condition.within !== null) {
    const fitting = translator.wanted(
      within,
      measure,
      unit,
      condition.within.range,
      scope,
      "This",
      "`within`",
    );
    if (fitting.measure === "unknown") return null;
  }
  const allowed = { value: within.expr, unit: within.shown ?? unit, relative };
  return { ...base, condition: { kind: "comparison", left, operator, right, within: allowed } };
}

function measureIn(
  translator: Translator,
  tree: Expression,
  scope: Scope,
  measures: TrialMeasure[],
): Typed | null {
  const { pool } = translator.draft;
  const add = (
    kind: MeasureKind,
    signal: TrialMeasure["signal"],
    argument: TrialMeasure["argument"],
    measure: Measure,
    shown: Unit | null,
  ): Typed => {
    const symbol = pool.symbol("unknown", `measure:${measures.length}`);
    measures.push({ kind, symbol, signal, argument });
    return { expr: symbol, measure, shown };
  };
  if (tree.kind === "reference" && tree.path.length === 1) {
    const name = tree.path[0].name.text;
    if (name !== "energy_in" && name !== "energy_lost") return null;
    return add(name, null, null, JOULE.dimension, JOULE);
  }
  if (tree.kind !== "call" || !Object.hasOwn(COUNTS, tree.name.text)) return null;
  const kind = tree.name.text as keyof typeof COUNTS;
  const args = tree.arguments;
  if ((kind === "max" || kind === "min") && args.length > 1) return null;
  if (args.length !== COUNTS[kind]) {
    const message = `\`${kind}\` takes ${COUNTS[kind] === 1 ? "one value" : "two values"}, here ${args.length}.`;
    return translator.refuse("syntax", tree.range, scope, message);
  }
  // A measure is not measured again: what is inside is a signal.
  const outer = translator.special;
  translator.special = null;
  const made = measured(translator, kind, tree, scope, add);
  translator.special = outer;
  return made;
}

function measured(
  translator: Translator,
  kind: keyof typeof COUNTS,
  tree: Call,
  scope: Scope,
  add: (
    kind: MeasureKind,
    signal: TrialMeasure["signal"],
    argument: TrialMeasure["argument"],
    measure: Measure,
    shown: Unit | null,
  ) => Typed,
): Typed {
  const [first, second] = tree.arguments;
  if (kind === "time_when") {
    return add(kind, translator.truth(first, scope), null, SECOND.dimension, SECOND);
  }
  const signal = translator.number(first, scope);
  if (signal.measure === "unknown") return signal;
  let argument: Typed | null = null;
  if (second !== undefined) {
    const fixed = { ...scope, fixed: true };
    const given = translator.number(second, fixed);
    const [dimension, unit] = kind === "at" ? [SECOND.dimension, SECOND] : [DIMENSIONLESS, null];
    argument = translator.wanted(given, dimension, unit, second.range, scope, "This value", `\`${kind}\``);
    if (argument.measure === "unknown") return argument;
  }
  const expr = argument?.expr ?? null;
  if (IN_SECONDS.has(kind)) return add(kind, signal.expr, expr, SECOND.dimension, SECOND);
  if (kind === "overshoot") return add(kind, signal.expr, expr, DIMENSIONLESS, null);
  return add(kind, signal.expr, expr, signal.measure, signal.shown);
}
