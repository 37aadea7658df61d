import type { Condition, Expression, Reference, Statement } from "../syntax/tree.ts";

export type Call = Extract<Expression, { kind: "call" }>;

/** Every reference and call in an expression, indices included; without recursion, since sums may be long. */
export function eachReference(
  root: Expression,
  visit: (reference: Reference) => void,
  visitCall: (call: Call) => void = () => {},
): void {
  const open: Expression[] = [root];
  for (let tree = open.pop(); tree !== undefined; tree = open.pop()) {
    switch (tree.kind) {
      case "reference":
        visit(tree);
        for (const part of tree.path) for (const index of part.indices) open.push(index);
        break;
      case "unary":
        open.push(tree.operand);
        break;
      case "binary":
        open.push(tree.left, tree.right);
        break;
      case "call":
        visitCall(tree);
        for (const argument of tree.arguments) open.push(argument);
        break;
      case "where":
        open.push(tree.then, tree.condition, tree.otherwise);
        break;
      case "group":
        open.push(tree.inner);
        break;
    }
  }
}

/** Every expression that stands in a statement itself; those in a `repeat` body belong to its statements. */
export function expressionsOf(statement: Statement): Expression[] {
  switch (statement.kind) {
    case "param":
    case "const": {
      const { bounds } = statement;
      return [statement.value, ...statement.indices, ...(bounds === null ? [] : [bounds.low, bounds.high])];
    }
    case "input":
      return [...statement.indices, ...given(statement.nominal)];
    case "output":
    case "let":
      return [statement.value, ...statement.indices];
    case "track":
      return [statement.rate, ...statement.indices, ...given(statement.from)];
    case "junction":
    case "port":
      return [...statement.name.indices];
    case "element":
      return [
        ...statement.name.indices,
        ...(statement.valueOf === null ? [] : [statement.valueOf]),
        ...statement.laws.map((law) => law.right),
      ];
    case "sub":
      return [...statement.name.indices, ...statement.overrides.map((override) => override.value)];
    case "wiring": {
      // Most names have no index, and most lines of a large model are wiring.
      const indices: Expression[] = [];
      for (const group of statement.groups)
        for (const end of group) for (const part of end.path) indices.push(...part.indices);
      return indices;
    }
    case "start":
      return [...given(statement.target), ...given(statement.value)];
    case "repeat":
      return [statement.low, statement.high];
    case "expect":
      return conditionExpressions(statement.condition);
    case "unreadable":
      return [];
  }
}

export function conditionExpressions(condition: Condition): Expression[] {
  switch (condition.kind) {
    case "fact":
      return condition.within === null ? [condition.measure] : [condition.measure, condition.within];
    case "comparison":
      return [condition.left, condition.right, ...(condition.within === null ? [] : [condition.within])];
    case "between":
      return [condition.measure, condition.low, condition.high];
  }
}

function given(expression: Expression | null): Expression[] {
  return expression === null ? [] : [expression];
}
