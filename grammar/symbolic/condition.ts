import { holds } from "./evaluate.ts";
import type { Node } from "./node.ts";
import { compareFactors } from "./order.ts";
import type { Pool } from "./pool.ts";

const MIRRORED: Record<string, string> = { "<": ">", "<=": ">=", ">": "<", ">=": "<=", "=": "=", "!=": "!=" };

/** A comparison with a number has it on the right; otherwise the sides stand in canonical order. */
export function canonicalCompare(pool: Pool, op: string, a: Node, b: Node): Node {
  if (a.op === "number" && b.op === "number") return holds(op, a.value, b.value) ? pool.one : pool.zero;
  const mirror = a.op === "number" || (b.op !== "number" && compareFactors(a, b) > 0);
  return mirror
    ? pool.intern("compare", [b, a], 0, MIRRORED[op] ?? op)
    : pool.intern("compare", [a, b], 0, op);
}

export function canonicalConnective(pool: Pool, op: "and" | "or", args: readonly Node[]): Node {
  const settles = op === "and" ? pool.zero : pool.one;
  const parts = new Set<Node>();
  for (const arg of args.flatMap((each) => (each.op === op ? each.args : [each]))) {
    if (arg === settles) return settles;
    if (arg.op !== "number") parts.add(arg);
  }
  const sorted = [...parts].sort(compareFactors);
  if (sorted.length === 0) return op === "and" ? pool.one : pool.zero;
  return sorted.length === 1 ? sorted[0] : pool.intern(op, sorted, 0, "");
}

export function canonicalNot(pool: Pool, x: Node): Node {
  if (x.op === "number") return x.value === 0 ? pool.one : pool.zero;
  return x.op === "not" ? x.args[0] : pool.intern("not", [x], 0, "");
}
