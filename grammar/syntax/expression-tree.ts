import type { Range } from "../source/span.ts";

export interface Identifier {
  readonly text: string;
  readonly range: Range;
}

export interface StringLiteral {
  readonly value: string;
  readonly range: Range;
}

/** A unit as written, without blanks; its meaning is looked up by the resolver. */
export interface UnitText {
  readonly text: string;
  readonly range: Range;
}

/** A name that may carry indices: `cell[i-1]`, `grid[i][j]`. */
export interface IndexedName {
  readonly name: Identifier;
  readonly indices: readonly Expression[];
  readonly range: Range;
}

/** `armature.f`, `cell[i-1].spring.q`, `u`: a path of names, each with its indices. */
export interface Reference {
  readonly kind: "reference";
  readonly path: readonly IndexedName[];
  readonly range: Range;
}

/**
 * A chain of left-associative operators (`a + b - c`) nests to the left, up to 20,000 deep: walk it with a loop.
 * Every other nesting is at most 200 deep.
 */
export type Expression =
  | { readonly kind: "number"; readonly value: number; readonly text: string; readonly range: Range }
  | {
      readonly kind: "quantity";
      readonly value: number;
      readonly text: string;
      readonly unit: UnitText;
      readonly range: Range;
    }
  | { readonly kind: "string"; readonly value: string; readonly range: Range }
  | Reference
  | {
      readonly kind: "unary";
      readonly operator: "-" | "+" | "not";
      readonly operand: Expression;
      readonly range: Range;
    }
  | {
      readonly kind: "binary";
      readonly operator: BinaryOperator;
      readonly left: Expression;
      readonly right: Expression;
      readonly range: Range;
    }
  | {
      readonly kind: "call";
      readonly name: Identifier;
      readonly arguments: readonly Expression[];
      readonly range: Range;
    }
  | {
      readonly kind: "where";
      readonly then: Expression;
      readonly condition: Expression;
      readonly otherwise: Expression;
      readonly range: Range;
    }
  | { readonly kind: "group"; readonly inner: Expression; readonly range: Range }
  /** What stands where an expression could not be read; a `syntax` finding says why. */
  | { readonly kind: "missing"; readonly range: Range };

export type BinaryOperator = "+" | "-" | "*" | "/" | "^" | "<" | "<=" | ">" | ">=" | "=" | "and" | "or";
