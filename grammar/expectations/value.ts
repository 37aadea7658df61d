import type { StateModel } from "../equations/model.ts";
import { applyFunction } from "../symbolic/evaluate.ts";
import type { FunctionName } from "../symbolic/expression.ts";
import type { Expression } from "../syntax/tree.ts";
import { toSI } from "../units/convert.ts";
import { DIMENSIONLESS, divide, equal, isDimensionless, multiply, power } from "../units/dimension.ts";
import { parseUnit } from "../units/parse-unit.ts";
import type { Dimension } from "../units/unit.ts";
import { COUNTS, FACTS, LATER } from "./facts.ts";

/** One side of a condition: an SI value; or a measure that is not worked out yet; or why it has no value. */
export type Measured =
  | {
      readonly kind: "value";
      readonly value: number;
      readonly dimension: Dimension;
      readonly relative: boolean;
    }
  | { readonly kind: "later"; readonly measure: string }
  | { readonly kind: "none"; readonly message: string };

const NUMBERS: ReadonlySet<string> = new Set([
  ..."sin cos tan asin acos atan atan2 sinh cosh tanh".split(" "),
  ..."exp ln log10 sqrt abs sign min max".split(" "),
]);

/** Deeper than any requirement that a person writes; beyond it nothing is measured. */
const DEEPEST = 500;

export function measure(expr: Expression, model: StateModel, depth = 0): Measured {
  if (depth > DEEPEST) return none("The condition is nested too deeply to be worked out.");
  switch (expr.kind) {
    case "number":
      return value(expr.value);
    case "quantity": {
      const unit = parseUnit(expr.unit.text);
      if (unit === null) return none(`\`${expr.unit.text}\` is not a known unit.`);
      return value(toSI(expr.value, unit), unit.dimension, unit.text === "%" || unit.text === "ppm");
    }
    case "group":
      return measure(expr.inner, model, depth + 1);
    case "unary": {
      const inner = measure(expr.operand, model, depth + 1);
      if (inner.kind !== "value" || expr.operator === "+") return inner;
      return expr.operator === "-"
        ? { ...inner, value: -inner.value }
        : none("A condition compares numbers.");
    }
    case "binary":
      return combine(
        expr.operator,
        measure(expr.left, model, depth + 1),
        measure(expr.right, model, depth + 1),
      );
    case "call": {
      if (LATER.has(expr.name.text)) return later(expr.name.text);
      return callOf(
        expr.name.text,
        expr.arguments.map((argument) => measure(argument, model, depth + 1)),
      );
    }
    case "reference":
      return nameOf(expr.path.map(({ name }) => name.text).join("."), model);
    default:
      return none("The condition cannot be read as a comparison of numbers.");
  }
}

function nameOf(name: string, model: StateModel): Measured {
  if (Object.hasOwn(COUNTS, name)) return value(COUNTS[name](model));
  if (LATER.has(name)) return later(name);
  if (Object.hasOwn(FACTS, name))
    return none(`\`${name}\` holds or does not; it is not a number to compare.`);
  if (name === "pi") return value(Math.PI);
  const parameter = model.causal.graph.parameters.find((one) => one.name === name);
  if (parameter !== undefined) return value(parameter.value, parameter.unit.dimension);
  return none(
    `\`${name}\` is neither a measure of a system nor a parameter; \`order\`, \`dependent\`, \`loops\` and \`integral\` are measures.`,
  );
}

function combine(operator: string, left: Measured, right: Measured): Measured {
  if (left.kind !== "value") return left;
  if (right.kind !== "value") return right;
  const [a, b] = [left.value, right.value];
  switch (operator) {
    case "*":
      return value(a * b, multiply(left.dimension, right.dimension));
    case "/":
      return value(a / b, divide(left.dimension, right.dimension));
    case "^":
      return isDimensionless(right.dimension)
        ? value(a ** b, power(left.dimension, b))
        : none("An exponent has no unit.");
    case "+":
    case "-":
      if (!equal(left.dimension, right.dimension))
        return none("The condition adds quantities of different units.");
      return value(operator === "+" ? a + b : a - b, left.dimension);
    default:
      return none("A condition is one comparison; write one `expect` line for each.");
  }
}

function callOf(name: string, args: readonly Measured[]): Measured {
  if (!NUMBERS.has(name)) return none(`\`${name}\` is not a measure of a system.`);
  const values: number[] = [];
  for (const arg of args) {
    if (arg.kind !== "value") return arg;
    if (!isDimensionless(arg.dimension))
      return none(`\`${name}\` takes numbers without a unit in a condition.`);
    values.push(arg.value);
  }
  return value(applyFunction(name as FunctionName, values));
}

function value(number: number, dimension: Dimension = DIMENSIONLESS, relative = false): Measured {
  return { kind: "value", value: number, dimension, relative };
}

function later(name: string): Measured {
  return { kind: "later", measure: name };
}

function none(message: string): Measured {
  return { kind: "none", message };
}
