import { expect, it } from "vitest";
import { affineIn } from "../../grammar/symbolic/linear.ts";
import { Pool } from "../../grammar/symbolic/pool.ts";
import { symbolsOf } from "../../grammar/symbolic/symbols.ts";

it("an unknown that cancels inside a factor is left nowhere in the linear form", () => {
  const pool = new Pool();
  const x = pool.symbol("unknown", "x");
  const u = pool.symbol("input", "u");
  const r = pool.symbol("parameter", "r");
  const k = pool.symbol("parameter", "k");
  // (x - (x + u))/r as a loop writes it, times k.
  const inner = pool.sum(pool.divide(x, r), pool.negate(pool.divide(pool.sum(x, u), r)));
  const form = affineIn(pool, pool.product(k, pool.sum(inner, k)), x);
  expect(form?.slope).toBe(pool.zero);
  expect(symbolsOf(form?.constant ?? x).has(x)).toBe(false);
});
