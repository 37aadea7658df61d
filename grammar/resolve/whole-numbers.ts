import type { Expression } from "../syntax/tree.ts";

/** Values of the bare names that a count or an index may use; null where a name has none. */
export type WholeScope = (name: string) => number | null;

const DEEPEST = 200;

/** The number that an index or the bound of a `repeat` stands for; null where it is none. */
export function plainNumber(tree: Expression, scope: WholeScope, depth = 0): number | null {
  if (depth > DEEPEST) return null;
  const inner = (part: Expression) => plainNumber(part, scope, depth + 1);
  switch (tree.kind) {
    case "number":
      return tree.value;
    case "group":
      return inner(tree.inner);
    case "reference": {
      const [first, ...more] = tree.path;
      return more.length > 0 || first.indices.length > 0 ? null : scope(first.name.text);
    }
    case "unary": {
      const operand = inner(tree.operand);
      if (operand === null || tree.operator === "not") return null;
      return tree.operator === "-" ? -operand : operand;
    }
    case "binary": {
      const left = inner(tree.left);
      const right = inner(tree.right);
      if (left === null || right === null) return null;
      switch (tree.operator) {
        case "+":
          return left + right;
        case "-":
          return left - right;
        case "*":
          return left * right;
        case "/":
          return left / right;
        case "^":
          return left ** right;
        default:
          return null;
      }
    }
    default:
      return null;
  }
}

export function wholeNumber(tree: Expression, scope: WholeScope): number | null {
  const value = plainNumber(tree, scope);
  return value !== null && Number.isSafeInteger(value) ? value : null;
}
