/**
 * A number's shortest exact digits as engineers write them: the power of ten a multiple of three where the number is
 * far from one and that is no longer (`1.2e9`, `22e-6`, but `101325`).
 */
export function engineeringText(value: number): string {
  const plain = String(value).replace("e+", "e");
  const size = Math.abs(value);
  if (size === 0 || !Number.isFinite(value) || (size >= LEAST && size < MOST)) return plain;
  const [mantissa, power] = size.toExponential().split("e");
  const digits = mantissa.replace(".", "");
  const tens = 3 * Math.floor(Number(power) / 3);
  const whole = 1 + Number(power) - tens;
  const before = digits.slice(0, whole).padEnd(whole, "0");
  const after = digits.slice(whole);
  const text = `${value < 0 ? "-" : ""}${before}${after === "" ? "" : `.${after}`}e${tens}`;
  return tens !== 0 && (text.length <= plain.length || plain.includes("e")) ? text : plain;
}

/** Between these a plain decimal is read at a glance. */
const LEAST = 1e-3;
const MOST = 1e5;
