import type { Expr } from "./expression.ts";

/**
 * Calls `visit` once for every distinct expression below `roots`, arguments before what they stand in, without
 * recursion: a chain of laws may be 10^5 deep. `known` ones are passed over; a `leaf` is visited without
 * what stands below it.
 */
export function postorder(
  roots: readonly Expr[],
  known: (expr: Expr) => boolean,
  visit: (expr: Expr) => void,
  leaf: (expr: Expr) => boolean = () => false,
): void {
  const stack: Expr[] = [];
  const next: number[] = [];
  for (const root of roots) {
    if (known(root)) continue;
    if (root.args.length === 0) {
      visit(root);
      continue;
    }
    stack.push(root);
    next.push(0);
    while (stack.length > 0) {
      const top = stack.length - 1;
      const expr = stack[top];
      const at = next[top];
      if (at < expr.args.length && (at > 0 || !leaf(expr))) {
        next[top] = at + 1;
        const arg = expr.args[at];
        if (known(arg)) continue;
        if (arg.args.length === 0) visit(arg);
        else {
          stack.push(arg);
          next.push(0);
        }
        continue;
      }
      if (!known(expr)) visit(expr);
      stack.pop();
      next.pop();
    }
  }
}
