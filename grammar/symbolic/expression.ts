import type { Curve } from "./curve.ts";

/**
 * Expression graphs. Every distinct expression exists once in its pool (hash-consing), so that equality is
 * identity, and work that is memoised by node is linear in the graph however large the text would be.
 */
export type Operator =
  | "number"
  | "symbol"
  | "sum"
  | "product"
  | "power"
  | "call"
  | "curve"
  | "where"
  | "compare"
  | "and"
  | "or"
  | "not";

/** What a symbol stands for. The order is the canonical order of factors within a product. */
export const SYMBOL_ROLES = [
  "constant",
  "parameter",
  "input",
  "time",
  "state",
  "effort",
  "flow",
  "rate",
  "inputRate",
  "unknown",
] as const;

export type SymbolRole = (typeof SYMBOL_ROLES)[number];

export type FunctionName =
  | "sin"
  | "cos"
  | "tan"
  | "asin"
  | "acos"
  | "atan"
  | "atan2"
  | "sinh"
  | "cosh"
  | "tanh"
  | "exp"
  | "ln"
  | "log10"
  | "sqrt"
  | "abs"
  | "sign"
  | "min"
  | "max";

export interface Expr {
  /** Order of creation in the pool: an identity, never an order that may reach a text. */
  readonly id: number;
  readonly op: Operator;
  readonly args: readonly Expr[];
  /** Of a number; of a curve: which derivative of it is meant, 0 for itself. */
  readonly value: number;
  /** Of a symbol: its full name (`rope.k`, `spring.q`, `armature->motor`); of a call: the function; of a curve: its own; of a comparison: its operator. */
  readonly name: string;
  /** Of a symbol. */
  readonly role: SymbolRole | null;
  /** Of a curve: its points; one object for equal data in a pool. */
  readonly curve: Curve | null;
  /** Known to be ≥ 0 wherever it is defined, whatever its symbols are. */
  readonly nonNegative: boolean;
}

export type Symbol = Expr & { readonly op: "symbol"; readonly role: SymbolRole };
