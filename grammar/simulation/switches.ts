import type { Expr, Symbol } from "../symbolic/expression.ts";
import type { Pool } from "../symbolic/pool.ts";
import { postorder } from "../symbolic/postorder.ts";
import { withArgs } from "../symbolic/substitute.ts";
import { symbolsOf } from "../symbolic/symbols.ts";

/**
 * Places where the equations change their form: a comparison, `sign`, `abs`, `min`, `max`. Each is held as it stands
 * by a symbol of its own, so that within a step the equations are smooth; a step ends where `sense` changes its sign.
 */
export interface Switch {
  /**
   * `truth`: holds 0 or 1. `sign`: holds -1 or 1, and max(-1, min(1, hold + sense*slope)) stands in its place, so
   * that with hold 0 and a great slope it can stick between. `side`: -1 or 1, of what is continuous but bends.
   */
  readonly kind: "truth" | "sign" | "side";
  readonly operator: string;
  readonly sense: Expr;
  readonly hold: Symbol;
  readonly slope: Symbol | null;
  /** As written, for findings. */
  readonly origin: Expr;
}

export interface Frozen {
  readonly roots: readonly Expr[];
  readonly switches: readonly Switch[];
}

export function freeze(pool: Pool, roots: readonly Expr[]): Frozen {
  const free = continuousParts(roots);
  const switches: Switch[] = [];
  const done = new Map<Expr, Expr>();
  const symbol = (word: string) => pool.symbol("unknown", `${word}:${switches.length}`);
  const add = (kind: Switch["kind"], operator: string, sense: Expr, origin: Expr): Switch => {
    const slope = kind === "sign" ? symbol("slope") : null;
    const made: Switch = { kind, operator, sense, hold: symbol("hold"), slope, origin };
    switches.push(made);
    return made;
  };
  const frozen = (expr: Expr, args: readonly Expr[]): Expr => {
    const same = args.every((arg, i) => arg === expr.args[i]);
    const plain = () => (same ? expr : withArgs(pool, expr, args));
    if (free.has(expr) || !isSwitch(expr)) return plain();
    if (expr.op === "compare") {
      return add("truth", expr.name, pool.subtract(args[0], args[1]), expr).hold;
    }
    if (expr.name === "sign") {
      const { hold, slope, sense } = add("sign", ">", args[0], expr);
      const between = pool.sum(hold, pool.product(sense, slope as Expr));
      return pool.call("max", pool.number(-1), pool.call("min", pool.one, between));
    }
    if (expr.name === "abs") return pool.product(add("side", ">", args[0], expr).hold, args[0]);
    return args.slice(1).reduce((best, arg) => {
      const { hold } = add("side", ">", pool.subtract(best, arg), expr);
      const above = pool.compare(">", hold, pool.zero);
      return expr.name === "max" ? pool.where(above, best, arg) : pool.where(above, arg, best);
    }, args[0]);
  };
  postorder(
    roots,
    (expr) => done.has(expr),
    (expr) => {
      const args = expr.args.map((arg) => done.get(arg) as Expr);
      done.set(expr, expr.args.length === 0 ? expr : frozen(expr, args));
    },
  );
  return { roots: roots.map((root) => done.get(root) as Expr), switches };
}

function isSwitch(expr: Expr): boolean {
  if (expr.op === "compare") return expr.name !== "=" && expr.name !== "!=" && moves(expr);
  return expr.op === "call" && ["sign", "abs", "min", "max"].includes(expr.name) && moves(expr);
}

function moves(expr: Expr): boolean {
  return [...symbolsOf(expr)].some(({ role }) => role !== "parameter" && role !== "constant");
}

/**
 * What stays as it is: conditions that choose a root where it has a value; `abs`, `min` and `max` under a root, where the other side of a held `abs` has no value, and a `sign` that is
 * multiplied by the root of the `abs` of the same, as in the law of an orifice: together they do not jump.
 */
function continuousParts(roots: readonly Expr[]): ReadonlySet<Expr> {
  const free = new Set<Expr>();
  const rooted: Expr[] = [];
  const chosen: Expr[] = [];
  const products: Expr[] = [];
  const withRoot = new Set<Expr>();
  const seen = new Set<Expr>();
  postorder(
    roots,
    (expr) => seen.has(expr),
    (expr) => {
      seen.add(expr);
      if (isRoot(expr)) rooted.push(expr.args[0]);
      if (isRoot(expr) || expr.args.some((arg) => withRoot.has(arg))) withRoot.add(expr);
      if (expr.op === "where" && expr.args.slice(1).some((arg) => withRoot.has(arg)))
        chosen.push(expr.args[0]);
      if (expr.op === "product") products.push(expr);
    },
  );
  const below = (from: readonly Expr[], stays: (expr: Expr) => boolean) => {
    const met = new Set<Expr>();
    postorder(
      from,
      (expr) => met.has(expr),
      (expr) => {
        met.add(expr);
        if (stays(expr)) free.add(expr);
      },
    );
  };
  below(rooted, ({ op }) => op === "call");
  below(chosen, (expr) => expr.op === "compare" && !turnsWithTime(expr));
  for (const { args } of products) {
    for (const sign of args) {
      if (sign.op !== "call" || sign.name !== "sign") continue;
      const vanishes = args.some((other) => isRoot(other) && holdsAbsOf(other, sign.args[0]));
      if (vanishes) free.add(sign);
    }
  }
  return free;
}

/** Drives step at times that are known: nothing under a root is left by it in mid-step. */
function turnsWithTime(expr: Expr): boolean {
  return [...symbolsOf(expr)].every(({ role }) => ["time", "parameter", "constant"].includes(role));
}

function isRoot(expr: Expr): boolean {
  if (expr.op === "call") return ["sqrt", "ln", "log10"].includes(expr.name);
  return expr.op === "power" && !(expr.args[1].op === "number" && Number.isInteger(expr.args[1].value));
}

function holdsAbsOf(expr: Expr, inner: Expr): boolean {
  let found = false;
  const seen = new Set<Expr>();
  postorder(
    [expr],
    (one) => seen.has(one),
    (one) => {
      seen.add(one);
      found ||= one.op === "call" && one.name === "abs" && sameButForSign(one.args[0], inner);
    },
  );
  return found;
}

/** `abs(c*x)` and `sign(x)` vanish together. */
function sameButForSign(a: Expr, b: Expr): boolean {
  if (a === b) return true;
  const bare = (expr: Expr) =>
    expr.op === "product"
      ? expr.args.filter(({ op, role }) => op !== "number" && role !== "parameter" && role !== "constant")
      : [expr];
  const [x, y] = [bare(a), bare(b)];
  return x.length === y.length && x.every((factor, i) => factor === y[i]);
}
