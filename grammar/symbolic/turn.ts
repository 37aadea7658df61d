import { evaluate } from "./evaluate.ts";
import type { Expr, Symbol } from "./expression.ts";
import { affineIn } from "./linear.ts";
import type { Pool } from "./pool.ts";
import { holdsSymbol } from "./symbols.ts";

/** Values of parameters, where the sign of a coefficient decides; undefined for what has no fixed value. */
export type ValueOf = (symbol: Symbol) => number | undefined;

/**
 * Solves left = right(own) for `own`; null for what the notation does not turn round. What it does:
 * affine in `own`; a·s(z, r) with z affine in `own`, where s(z, r) = sign(z)·|z|^r and r is 2, an odd whole number,
 * or one over such; and a·s(z, r) + b·s(z, 2r) or a·z + b·z³ with a and b of equal sign. Each of these rises (or
 * falls) all the way, so that the solution is the only one.
 */
export function turnRound(
  pool: Pool,
  right: Expr,
  own: Symbol,
  left: Expr,
  valueOf: ValueOf = () => undefined,
): Expr | null {
  const affine = affineIn(pool, right, own);
  if (affine !== null) {
    return affine.slope === pool.zero
      ? null
      : pool.divide(pool.subtract(left, affine.constant), affine.slope);
  }
  const free: Expr[] = [];
  const powers: SignedPower[] = [];
  for (const term of right.op === "sum" ? right.args : [right]) {
    if (!holdsSymbol(term, own)) {
      free.push(term);
      continue;
    }
    const power = signedPower(pool, term, own);
    if (power === null) return null;
    powers.push(power);
  }
  const base = powers[0].base;
  if (powers.some((power) => power.base !== base)) return null;
  const rest = pool.subtract(left, pool.sum(free));
  const solved =
    powers.length === 1
      ? singlePower(pool, powers[0], rest, valueOf)
      : powers.length === 2
        ? twoPowers(pool, powers, rest, valueOf)
        : null;
  return solved === null || base === own ? solved : turnRound(pool, base, own, solved, valueOf);
}

/** coefficient · sign(base)·|base|^exponent */
interface SignedPower {
  readonly coefficient: Expr;
  readonly base: Expr;
  readonly exponent: number;
}

function signedPower(pool: Pool, term: Expr, own: Symbol): SignedPower | null {
  const outside: Expr[] = [];
  let base: Expr | null = null;
  let exponent = 0;
  let odd = false;
  for (const factor of term.op === "product" ? term.args : [term]) {
    if (!holdsSymbol(factor, own)) {
      outside.push(factor);
      continue;
    }
    const raised = factor.op === "power";
    const [inner, power] = raised ? factor.args : [factor, pool.one];
    if (power.op !== "number") return null;
    const call = inner.op === "call" && (inner.name === "abs" || inner.name === "sign") ? inner : null;
    const here = call === null ? inner : call.args[0];
    if (base !== null && here !== base) return null;
    base = here;
    if (call?.name === "sign") {
      if (power.value !== 1) return null;
      odd = !odd;
    } else {
      if (call === null) {
        if (!Number.isInteger(power.value)) return null;
        odd = odd !== (power.value % 2 !== 0);
      }
      exponent += power.value;
    }
  }
  if (base === null || !odd || !turnable(exponent)) return null;
  // Only a sum or `own` itself may stand inside, so that the step inwards makes the problem smaller.
  if (base !== own && affineIn(pool, base, own) === null) return null;
  return { coefficient: pool.product(outside), base, exponent };
}

/** 2 and the odd whole numbers, and one over each. */
function turnable(exponent: number): boolean {
  if (exponent <= 0) return false;
  const whole = exponent >= 1 ? exponent : 1 / exponent;
  return whole === 2 || (Math.abs(whole - Math.round(whole)) < 1e-12 && Math.round(whole) % 2 === 1);
}

/** sign(x)·|x|^exponent */
function signed(pool: Pool, x: Expr, exponent: Expr): Expr {
  return pool.product(pool.call("sign", x), pool.power(pool.call("abs", x), exponent));
}

function singlePower(pool: Pool, { coefficient, exponent }: SignedPower, rest: Expr, valueOf: ValueOf): Expr {
  const inverse = pool.rational(1, exponent);
  const sign = signOf(coefficient, valueOf);
  // Where the coefficient is known to be positive it leaves the modulus: sign(e)*sqrt(abs(e)/K) is how it is read.
  if (sign === 0) return signed(pool, pool.divide(rest, coefficient), inverse);
  const size = pool.product(pool.number(sign), coefficient);
  const ratio = pool.divide(pool.call("abs", rest), size);
  return pool.product(pool.number(sign), pool.call("sign", rest), pool.power(ratio, inverse));
}

function twoPowers(pool: Pool, powers: readonly SignedPower[], rest: Expr, valueOf: ValueOf): Expr | null {
  const [low, high] = [...powers].sort((p, q) => p.exponent - q.exponent);
  const sign = signOf(low.coefficient, valueOf);
  if (sign === 0 || sign !== signOf(high.coefficient, valueOf)) return null;
  const s = pool.number(sign);
  const [a, b, y] = [low.coefficient, high.coefficient, rest].map((each) => pool.product(s, each));
  if (high.exponent === 2 * low.exponent) {
    const z = quadratic(pool, a, b, y);
    return low.exponent === 1 ? z : signed(pool, z, pool.rational(1, low.exponent));
  }
  return high.exponent === 3 && low.exponent === 1 ? cubic(pool, a, b, y) : null;
}

/** a·z + b·z·|z| = y with a, b > 0: z = 2y/(a + sqrt(a² + 4b|y|)), which loses no digits where y is small. */
function quadratic(pool: Pool, a: Expr, b: Expr, y: Expr): Expr {
  const inside = pool.sum(pool.product(a, a), pool.product(pool.number(4), b, pool.call("abs", y)));
  return pool.divide(pool.product(pool.number(2), y), pool.sum(a, pool.call("sqrt", inside)));
}

/**
 * a·z + b·z³ = y with a, b > 0: Cardano's root, z = q/(A² + p/3 + B²) with p = a/b, q = y/b,
 * A³, B³ = D ± q/2 and D² = (q/2)² + (p/3)³.
 */
function cubic(pool: Pool, a: Expr, b: Expr, y: Expr): Expr {
  const third = pool.product(pool.rational(1, 3), pool.divide(a, b));
  const q = pool.divide(y, b);
  const half = pool.product(pool.number(0.5), q);
  const d = pool.call("sqrt", pool.sum(pool.power(half, pool.number(2)), pool.power(third, pool.number(3))));
  const squared = (x: Expr) => pool.power(x, pool.rational(2, 3));
  return pool.divide(q, pool.sum(squared(pool.sum(d, half)), third, squared(pool.subtract(d, half))));
}

function signOf(coefficient: Expr, valueOf: ValueOf): number {
  const value = evaluate(coefficient, (symbol) => valueOf(symbol) ?? Number.NaN);
  return Number.isNaN(value) ? 0 : Math.sign(value);
}
