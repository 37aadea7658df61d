import type { Expr } from "./expression.ts";

/** What `ById` and `Map` have in common. */
export interface Memo<Value> {
  get(expr: Expr): Value | undefined;
  has(expr: Expr): boolean;
  set(expr: Expr, value: Value): unknown;
}

/**
 * A map from expressions of one pool, for work that touches most of them: ids are small whole numbers, so a list
 * serves, at a fraction of what a hash map costs. For a few expressions of a large pool a `Map` is the better choice.
 */
export class ById<Value> {
  readonly #values: (Value | undefined)[] = [];

  get(expr: Expr): Value | undefined {
    return this.#values[expr.id];
  }

  has(expr: Expr): boolean {
    return this.#values[expr.id] !== undefined;
  }

  set(expr: Expr, value: Value): void {
    const values = this.#values;
    // Without holes, so that the list stays one block of memory.
    while (values.length < expr.id) values.push(undefined);
    values[expr.id] = value;
  }
}
