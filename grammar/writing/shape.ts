import { fractionOf } from "../symbolic/exact.ts";
import type { Expr } from "../symbolic/expression.ts";

/**
 * How people write what the pool keeps in canonical form: differences instead of products with -1, quotients instead
 * of negative powers, roots instead of powers of a half. Text and LaTeX both write from these shapes.
 */
export interface SignedTerm {
  readonly term: Expr;
  /** The place among the sum's arguments, whatever the place on paper. */
  readonly index: number;
  readonly negative: boolean;
}

export interface Factor {
  readonly base: Expr;
  /** A positive number where it is a number. */
  readonly exponent: number | Expr;
}

export interface Quotient {
  readonly negative: boolean;
  /** Whole or decimal coefficients, 1 where none is written. */
  readonly coefficient: number;
  readonly divisor: number;
  readonly above: readonly Factor[];
  readonly below: readonly Factor[];
}

/** The terms in the order of the pool; but a sum that would start with a minus starts with its first positive term. */
export function termsOf(sum: Expr): SignedTerm[] {
  const args = sum.op === "sum" ? sum.args : [sum];
  const terms = args.map((term, index) => ({ term, index, negative: isNegative(term) }));
  const first = terms.findIndex(({ negative }) => !negative);
  if (first > 0) terms.unshift(...terms.splice(first, 1));
  return terms;
}

export function isNegative(term: Expr): boolean {
  const head = term.op === "product" ? term.args[0] : term;
  return head.op === "number" && (head.value < 0 || Object.is(head.value, -0));
}

/** A product, power, number or any other expression as a signed quotient. */
export function quotientOf(expr: Expr): Quotient {
  const factors = expr.op === "product" ? expr.args : [expr];
  let value = 1;
  const above: Factor[] = [];
  const below: Factor[] = [];
  for (const factor of factors) {
    if (factor.op === "number") value *= factor.value;
    else if (factor.op !== "power") above.push({ base: factor, exponent: 1 });
    else {
      const [base, exponent] = factor.args;
      if (exponent.op !== "number") above.push({ base, exponent });
      else if (exponent.value < 0) below.push({ base, exponent: -exponent.value });
      else above.push({ base, exponent: exponent.value });
    }
  }
  const size = Math.abs(value);
  const { coefficient, divisor } = splitNumber(size, above.length + below.length > 0);
  return { negative: value < 0, coefficient, divisor, above, below };
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

/** The shortest decimal that reads back as the same number. */
export function numberText(value: number): string {
  if (Number.isNaN(value)) return "nan";
  if (!Number.isFinite(value)) return value > 0 ? "inf" : "-inf";
  return String(value).replace("e+", "e");
}
