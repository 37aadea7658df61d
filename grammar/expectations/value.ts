import type { Analysis } from "../analysis/analyse.ts";
import { applyFunction } from "../symbolic/evaluate.ts";
import type { FunctionName } from "../symbolic/expression.ts";
import type { Expression } from "../syntax/tree.ts";
import { toSI } from "../units/convert.ts";
import { divide, equal, isDimensionless, multiply, power } from "../units/dimension.ts";
import { parseUnit } from "../units/parse-unit.ts";
import { COUNTS, FACTS } from "./facts.ts";
import { type Measured, none, value } from "./measured.ts";
import { SYSTEM_MEASURES } from "./system-measures.ts";

const NUMBERS: ReadonlySet<string> = new Set([
  ..."sin cos tan asin acos atan atan2 sinh cosh tanh".split(" "),
  ..."exp ln log10 sqrt abs sign min max".split(" "),
]);

/** Deeper than any requirement that a person writes; beyond it nothing is measured. */
const DEEPEST = 500;

/** Works a side of a condition out. */
export function measure(expr: Expression, analysis: Analysis, depth = 0): Measured {
  if (depth > DEEPEST) return none("The condition is nested too deeply to be worked out.");
  switch (expr.kind) {
    case "number":
      return value(expr.value);
    case "quantity": {
      const unit = parseUnit(expr.unit.text);
      if (unit === null) return none(`\`${expr.unit.text}\` is not a known unit.`);
      return value(toSI(expr.value, unit), unit.dimension, unit);
    }
    case "group":
      return measure(expr.inner, analysis, depth + 1);
    case "unary": {
      const inner = measure(expr.operand, analysis, depth + 1);
      if (inner.kind !== "value" || expr.operator === "+") return inner;
      return expr.operator === "-"
        ? { ...inner, value: -inner.value }
        : none("A condition compares numbers.");
    }
    case "binary":
      return combine(
        expr.operator,
        measure(expr.left, analysis, depth + 1),
        measure(expr.right, analysis, depth + 1),
      );
    case "call": {
      const { name, arguments: args } = expr;
      const worth = (argument: Expression) => measure(argument, analysis, depth + 1);
      if (Object.hasOwn(SYSTEM_MEASURES, name.text)) return SYSTEM_MEASURES[name.text](analysis, args, worth);
      return callOf(name.text, args.map(worth));
    }
    case "reference":
      return nameOf(expr.path.map(({ name }) => name.text).join("."), analysis);
    default:
      return none("The condition cannot be read as a comparison of numbers.");
  }
}

function nameOf(name: string, { model }: Analysis): Measured {
  if (Object.hasOwn(COUNTS, name)) return value(COUNTS[name](model));
  if (Object.hasOwn(FACTS, name))
    return none(`\`${name}\` holds or does not; it is not a number to compare.`);
  if (name === "pi") return value(Math.PI);
  const parameter = model.causal.graph.parameters.find((one) => one.name === name);
  if (parameter !== undefined) return value(parameter.value, parameter.unit.dimension, parameter.unit);
  return none(
    Object.hasOwn(SYSTEM_MEASURES, name)
      ? `\`${name}\` needs to be told of what: it takes arguments in brackets.`
      : `\`${name}\` is neither a measure of a system nor a parameter; \`order\`, \`dependent\`, \`loops\`, \`stable\`, \`frequency(1)\`, \`gain(u, y)\` are some.`,
  );
}

function combine(operator: string, left: Measured, right: Measured): Measured {
  if (left.kind !== "value") return left;
  if (right.kind !== "value") return right;
  const [a, b] = [left.value, right.value];
  const plain = ({ dimension, unit }: typeof left) => isDimensionless(dimension) && unit === null;
  // Twice a frequency is still told in Hz.
  const kept = plain(left) ? right.unit : plain(right) ? left.unit : null;
  switch (operator) {
    case "*":
      return value(a * b, multiply(left.dimension, right.dimension), kept);
    case "/":
      return value(a / b, divide(left.dimension, right.dimension), plain(right) ? left.unit : null);
    case "^":
      return isDimensionless(right.dimension)
        ? value(a ** b, power(left.dimension, b))
        : none("An exponent has no unit.");
    case "+":
    case "-":
      if (!equal(left.dimension, right.dimension))
        return none("The condition adds quantities of different units.");
      return value(operator === "+" ? a + b : a - b, left.dimension, left.unit ?? right.unit);
    default:
      return none("A condition is one comparison; write one `expect` line for each.");
  }
}

function callOf(name: string, args: readonly Measured[]): Measured {
  if (!NUMBERS.has(name)) return none(`\`${name}\` is not a measure of a system.`);
  const found: (Measured & { kind: "value" })[] = [];
  for (const arg of args) {
    if (arg.kind !== "value") return arg;
    found.push(arg);
  }
  const worth = applyFunction(
    name as FunctionName,
    found.map((one) => one.value),
  );
  const [first, ...rest] = found;
  if (LIKE_ITS_ARGUMENTS.has(name)) {
    if (rest.some(({ dimension }) => !equal(dimension, first.dimension)))
      return none("The condition compares quantities of different units.");
    return value(worth, first.dimension, first.unit);
  }
  if (name === "sqrt") return value(worth, power(first.dimension, 0.5));
  if (name !== "sign" && found.some(({ dimension }) => !isDimensionless(dimension)))
    return none(`\`${name}\` takes numbers without a unit in a condition.`);
  return value(worth);
}

const LIKE_ITS_ARGUMENTS: ReadonlySet<string> = new Set(["abs", "min", "max"]);
