/**
 * Arithmetic of coefficients. A double that is the nearest one to some n/d with |n|, d ≤ LIMIT stands for that
 * fraction: two such fractions differ by more than 1e-12 of their size, so no double stands for two of them.
 * That keeps 1/3*3 = 1 and 0.1 + 0.2 = 0.3 without a second kind of number in the graph.
 */
const LIMIT = 1e6;

export interface Fraction {
  readonly numerator: number;
  /** Positive, without a factor in common with the numerator. */
  readonly denominator: number;
}

/** The fraction that a double stands for, or null where there is no small one (continued fraction expansion). */
export function fractionOf(value: number): Fraction | null {
  if (Number.isInteger(value)) {
    return Math.abs(value) <= LIMIT ? { numerator: value, denominator: 1 } : null;
  }
  if (!Number.isFinite(value)) return null;
  const size = Math.abs(value);
  let [n0, d0, n1, d1] = [1, 0, Math.floor(size), 1];
  let rest = size - n1;
  while (n1 <= LIMIT && d1 <= LIMIT) {
    if (n1 / d1 === size) return { numerator: value < 0 ? -n1 : n1, denominator: d1 };
    if (rest === 0) return null;
    const inverse = 1 / rest;
    const whole = Math.floor(inverse);
    rest = inverse - whole;
    [n0, d0, n1, d1] = [n1, d1, whole * n1 + n0, whole * d1 + d0];
  }
  return null;
}

/** Exact where both are small fractions; the nearest double otherwise. */
export function add(a: number, b: number): number {
  if (Number.isInteger(a) && Number.isInteger(b)) return a + b;
  const x = fractionOf(a);
  const y = fractionOf(b);
  if (x === null || y === null) return a + b;
  return (x.numerator * y.denominator + y.numerator * x.denominator) / (x.denominator * y.denominator);
}

/** Exact where both are small fractions; the nearest double otherwise. */
export function multiply(a: number, b: number): number {
  if (Number.isInteger(a) && Number.isInteger(b)) return a * b;
  const x = fractionOf(a);
  const y = fractionOf(b);
  if (x === null || y === null) return a * b;
  return (x.numerator * y.numerator) / (x.denominator * y.denominator);
}

export function divide(a: number, b: number): number {
  const x = fractionOf(a);
  const y = fractionOf(b);
  if (x === null || y === null) return a / b;
  return (x.numerator * y.denominator) / (x.denominator * y.numerator);
}

/** base^exponent where that is again an exact coefficient (8^(2/3) = 4, but not 2^(1/2)); null otherwise. */
export function power(base: number, exponent: number): number | null {
  if (base === 0) return exponent > 0 ? 0 : null;
  const fraction = fractionOf(base);
  if (Number.isInteger(exponent)) return integerPower(base, fraction, exponent);
  const root = fractionOf(exponent);
  if (fraction === null || root === null || base < 0) return null;
  const numerator = wholeRoot(fraction.numerator, root.denominator);
  const denominator = wholeRoot(fraction.denominator, root.denominator);
  if (numerator === null || denominator === null) return null;
  return integerPower(numerator / denominator, { numerator, denominator }, root.numerator);
}

function integerPower(base: number, fraction: Fraction | null, exponent: number): number | null {
  const size = Math.abs(exponent);
  const [above, below] = fraction === null ? [base ** size, 1] : raised(fraction, size);
  const result = !Number.isFinite(below) ? base ** exponent : exponent > 0 ? above / below : below / above;
  return Number.isFinite(result) && result !== 0 ? result : null;
}

function raised({ numerator, denominator }: Fraction, exponent: number): [number, number] {
  return [numerator ** exponent, denominator ** exponent];
}

function wholeRoot(value: number, degree: number): number | null {
  const root = Math.round(value ** (1 / degree));
  return root ** degree === value ? root : null;
}

export function gcd(a: number, b: number): number {
  let x = Math.abs(a);
  let y = Math.abs(b);
  while (y !== 0) [x, y] = [y, x % y];
  return x;
}
