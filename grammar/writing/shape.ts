import { fractionOf } from "../symbolic/exact.ts";
import type { Expr } from "../symbolic/expression.ts";
import { engineeringText } from "../units/engineering-text.ts";
import { joinModuli, joinRoots } from "./joined-factors.ts";

/**
 * How people write what the pool keeps in canonical form: differences instead of products with -1, quotients instead
 * of negative powers, roots instead of powers of a half, one root instead of many, `J*(T - m)` instead of
 * `-J*(m - T)`. Text and LaTeX both write from these shapes.
 */
export interface SignedTerm {
  readonly term: Expr;
  /** The place among the sum's arguments, whatever the place on paper. */
  readonly index: number;
  readonly negative: boolean;
  /** A difference in it is written the other way round, and `negative` is what that leaves to write. */
  readonly turned: boolean;
}

export type Factor = Power | { readonly kind: "root" | "modulus"; readonly of: Quotient };

export interface Power {
  readonly kind: "power";
  readonly base: Expr;
  /** A positive number where it is a number. */
  readonly exponent: number | Expr;
  /** The base is a difference that is written the other way round. */
  readonly turned: boolean;
}

export interface Quotient {
  readonly negative: boolean;
  /** Whole or decimal coefficients, 1 where none is written. */
  readonly coefficient: number;
  readonly divisor: number;
  readonly above: readonly Factor[];
  readonly below: readonly Factor[];
}

/**
 * The terms in the order of the pool, of a sum as it is or with every sign turned; but a sum that would start with a
 * minus starts with its first positive term, or with one that a turned difference makes positive.
 */
export function termsOf(sum: Expr, turned = false): SignedTerm[] {
  const args = sum.op === "sum" ? sum.args : [sum];
  const terms = args.map((term, index) => ({
    term,
    index,
    negative: isNegative(term) !== turned,
    turned: false,
  }));
  const idiom = terms.filter(({ term }) => turnable(term, offsetFrom));
  const others = terms.some((one) => !one.negative && !idiom.includes(one));
  for (const one of idiom) {
    if (!one.negative && !others) continue;
    one.negative = !one.negative;
    one.turned = true;
  }
  let first = terms.findIndex(({ negative }) => !negative);
  if (first === -1) {
    first = terms.findIndex(({ term }) => turnable(term, difference));
    if (first !== -1) terms[first] = { ...terms[first], negative: false, turned: true };
  }
  if (first > 0) terms.unshift(...terms.splice(first, 1));
  return terms;
}

export function isNegative(term: Expr): boolean {
  const head = term.op === "product" ? term.args[0] : term;
  return head.op === "number" && (head.value < 0 || Object.is(head.value, -0));
}

/** A sum that holds a minus, or could, may take the minus of its product. */
function difference(factor: Expr): boolean {
  return factor.op === "sum" && factor.args.some((arg) => isNegative(arg) || turnable(arg, offsetFrom));
}

/** `1 - exp(x)`: the trade writes `exp(x) - 1` in any case. */
function offsetFrom(factor: Expr): boolean {
  if (factor.op !== "sum" || factor.args.length !== 2) return false;
  const [number, other] = factor.args;
  const isExp = (arg: Expr) => arg.op === "call" && arg.name === "exp";
  return number.op === "number" && isNegative(other) && other.op === "product" && other.args.some(isExp);
}

function turnable(term: Expr, by: (factor: Expr) => boolean): boolean {
  return term.op === "product" && term.args.some(by);
}

/** A term whose minus a difference within it can take, when it stands alone. */
export function takesMinus(term: Expr): boolean {
  return isNegative(term) && turnable(term, difference);
}

/** A product, power, number or any other expression as a signed quotient; of its negative where it is turned. */
export function quotientOf(expr: Expr, turned = false): Quotient {
  const shape = bareQuotientOf(expr, turned);
  return joinModuli(joinRoots(shape, bareQuotientOf));
}

function bareQuotientOf(expr: Expr, turned = false): Quotient {
  const factors = expr.op === "product" ? expr.args : [expr];
  const opposed = turned ? (factors.find(offsetFrom) ?? factors.find(difference)) : undefined;
  let value = 1;
  const above: Power[] = [];
  const below: Power[] = [];
  for (const factor of factors) {
    if (factor.op === "number") value *= factor.value;
    else if (factor.op !== "power")
      above.push({ kind: "power", base: factor, exponent: 1, turned: factor === opposed });
    else {
      const [base, exponent] = factor.args;
      const side = exponent.op === "number" && exponent.value < 0 ? below : above;
      side.push({ kind: "power", turned: false, ...flattened(base, exponent) });
    }
  }
  const size = Math.abs(value);
  const { coefficient, divisor } = splitNumber(size, above.length + below.length > 0);
  return { negative: value < 0 !== turned, coefficient, divisor, above, below };
}

/** The root of a quotient in a power of a whole exponent is written as one power: x^(3/2), 1/sqrt(x). */
function flattened(base: Expr, exponent: Expr): { base: Expr; exponent: number | Expr } {
  if (exponent.op !== "number") return { base, exponent };
  const size = Math.abs(exponent.value);
  if (base.op !== "power" || base.args[1].op !== "number") return { base, exponent: size };
  const inner = base.args[1].value;
  const whole = Number.isInteger(inner * size) || Number.isInteger(inner);
  return whole || inner < 0 ? { base, exponent: size } : { base: base.args[0], exponent: inner * size };
}

/** x/2 and 2*x/3, but 0.35*x: a fraction where a decimal would be long, or where it is halves, quarters or eighths. */
export function splitNumber(size: number, beside: boolean): { coefficient: number; divisor: number } {
  const fraction = Number.isInteger(size) ? null : fractionOf(size);
  if (fraction !== null && fraction.denominator <= MOST_DIVISOR) {
    const long = numberText(size).length > SHORT_DECIMAL;
    const halves = beside && HALVES.has(fraction.denominator) && fraction.numerator < 16;
    if (long || halves) return { coefficient: fraction.numerator, divisor: fraction.denominator };
  }
  return { coefficient: size, divisor: 1 };
}

const MOST_DIVISOR = 1000;
const SHORT_DECIMAL = 8;
const HALVES: ReadonlySet<number> = new Set([2, 4, 8]);

/** The shortest decimal that reads back as the same number: `81.6`, `1.2e9`, `22e-6`. */
export function numberText(value: number): string {
  if (Number.isNaN(value)) return "nan";
  if (!Number.isFinite(value)) return value > 0 ? "inf" : "-inf";
  return engineeringText(value);
}
