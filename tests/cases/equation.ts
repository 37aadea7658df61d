import type { FileReport } from "../../grammar/pipeline.ts";
import { SourceText } from "../../grammar/source/text.ts";
import type { Expr, FunctionName } from "../../grammar/symbolic/expression.ts";
import type { Pool } from "../../grammar/symbolic/pool.ts";
import { equivalent } from "../../grammar/symbolic/rational-form.ts";
import { parse } from "../../grammar/syntax/parse.ts";
import type { Expression } from "../../grammar/syntax/tree.ts";
import { expressionText } from "../../grammar/writing/text.ts";
import type { ExpectedEquation } from "./case.ts";

/** Empty where the last system has the equation; otherwise what it has instead. */
export function holds({ kind, left, right }: ExpectedEquation, report: FileReport): string {
  const model = report.systems.at(-1)?.model;
  if (model == null) return "the last system has no state model";
  const { graph } = model.causal;
  const found =
    kind === "equation"
      ? model.equations.find(({ state }) => `${state}'` === left)?.rate
      : model.outputs.find(({ name }) => name === left)?.value;
  if (found === undefined) return `there is no ${kind} of ${left}`;
  const symbols = new Map<string, Expr>([
    ["time", graph.pool.symbol("time", "time")],
    ["g0", graph.pool.symbol("constant", "g0")],
    ["pi", graph.pool.symbol("constant", "pi")],
  ]);
  for (const { name, symbol } of [...graph.parameters, ...graph.inputs, ...model.states])
    symbols.set(name, symbol);
  const wanted = translate(graph.pool, read(right), symbols);
  return equivalent(graph.pool, found, wanted) === true ? "" : expressionText(found);
}

function read(text: string): Expression {
  const { tree, findings } = parse(new SourceText("equation", `notation 1\nfunction wanted(x) = ${text}`));
  const [item] = tree.items;
  if (item?.kind !== "function") throw new Error(`${text}: ${findings[0]?.message}`);
  return item.body;
}

function translate(pool: Pool, expression: Expression, symbols: ReadonlyMap<string, Expr>): Expr {
  const go = (part: Expression) => translate(pool, part, symbols);
  switch (expression.kind) {
    case "number":
      return pool.number(expression.value);
    case "group":
      return go(expression.inner);
    case "reference": {
      const name = expression.path.map(({ name: { text } }) => text).join(".");
      const symbol = symbols.get(name);
      if (symbol === undefined) throw new Error(`${name} is no state, input or parameter`);
      return symbol;
    }
    case "unary":
      return expression.operator === "-" ? pool.negate(go(expression.operand)) : go(expression.operand);
    case "call":
      return pool.call(expression.name.text as FunctionName, ...expression.arguments.map(go));
    case "binary": {
      const [left, right] = [go(expression.left), go(expression.right)];
      if (expression.operator === "+") return pool.sum(left, right);
      if (expression.operator === "-") return pool.subtract(left, right);
      if (expression.operator === "*") return pool.product(left, right);
      if (expression.operator === "/") return pool.divide(left, right);
      if (expression.operator === "^") return pool.power(left, right);
      return pool.compare(expression.operator, left, right);
    }
    default:
      throw new Error(`a ${expression.kind} can't stand in an expected equation`);
  }
}
