import type { IToken, TokenType } from "chevrotain";
import type { Range } from "../source/span.ts";
import {
  And,
  Caret,
  Equals,
  Greater,
  GreaterEqual,
  Less,
  LessEqual,
  Minus,
  Not,
  Or,
  Plus,
  Slash,
  Star,
} from "./tokens.ts";
import type { BinaryOperator, Expression } from "./tree.ts";

/** How tightly an operator binds; `where … else` binds least of all and is read outside. */
const BINDING: ReadonlyMap<TokenType, number> = new Map([
  [Or, 1],
  [And, 2],
  [Less, 4],
  [LessEqual, 4],
  [Greater, 4],
  [GreaterEqual, 4],
  [Equals, 4],
  [Plus, 5],
  [Minus, 5],
  [Star, 6],
  [Slash, 6],
  [Caret, 8],
]);
const COMPARISON = 4;
/** `not a < b` is `not (a < b)`; `-x^2` is `-(x^2)`. */
const NOT = 3;
const SIGN = 7;

interface Pending {
  readonly token: IToken;
  readonly prefix: boolean;
  readonly binding: number;
}

/**
 * Operands and operators of one expression as they come, made into a tree by operator precedence without recursion,
 * so that a sum of any length is read in a loop (Dijkstra's shunting yard).
 */
export class Chain {
  readonly #operands: Expression[] = [];
  readonly #pending: Pending[] = [];
  readonly #chained: (range: Range) => void;
  terms = 0;

  /** `chained` is told of `a < b < c`, which has no meaning here. */
  constructor(chained: (range: Range) => void) {
    this.#chained = chained;
  }

  /** How many operators wait for their right side: how deep the tree will nest at the next operand. */
  get depth(): number {
    return this.#pending.length;
  }

  prefix(token: IToken): void {
    this.#pending.push({ token, prefix: true, binding: token.tokenType === Not ? NOT : SIGN });
  }

  operand(expression: Expression): void {
    this.terms += 1;
    this.#operands.push(expression);
  }

  binary(token: IToken): void {
    const binding = BINDING.get(token.tokenType) ?? 0;
    const leftAssociative = token.tokenType !== Caret;
    for (let top = this.#pending.at(-1); top !== undefined; top = this.#pending.at(-1)) {
      if (top.binding < binding || (top.binding === binding && !leftAssociative)) break;
      this.#reduce();
    }
    this.#pending.push({ token, prefix: false, binding });
  }

  finish(): Expression {
    while (this.#pending.length > 0) this.#reduce();
    return this.#operands[0];
  }

  #reduce(): void {
    const { token, prefix, binding } = this.#pending.pop() as Pending;
    const right = this.#operands.pop() as Expression;
    if (prefix) {
      const operator = token.image as "-" | "+" | "not";
      const range = { start: token.startOffset, end: right.range.end };
      this.#operands.push({ kind: "unary", operator, operand: right, range });
      return;
    }
    const left = this.#operands.pop() as Expression;
    const range = { start: left.range.start, end: right.range.end };
    if (binding === COMPARISON && isComparison(left)) this.#chained(range);
    this.#operands.push({ kind: "binary", operator: token.image as BinaryOperator, left, right, range });
  }
}

export function isComparison(expression: Expression): boolean {
  return (
    expression.kind === "binary" &&
    (expression.operator === "<" ||
      expression.operator === "<=" ||
      expression.operator === ">" ||
      expression.operator === ">=" ||
      expression.operator === "=")
  );
}
