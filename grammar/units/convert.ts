import { equal } from "./dimension.ts";
import type { Unit } from "./unit.ts";

/**
 * A value in `unit` as an SI number. Where the factor is a power of ten the decimal point is moved in the
 * written number, so that 2.1 mH is the same double as 0.0021 H; the product would be off in the last place.
 */
export function toSI(value: number, unit: Unit): number {
  if (unit.factor === 1) return value + unit.offset;
  const tens = powerOfTen(unit.factor);
  if (tens !== 0) return shifted(value, tens) + unit.offset;
  const divisor = wholeDivisor(unit.factor);
  return (divisor === 0 ? value * unit.factor : value / divisor) + unit.offset;
}

export function fromSI(value: number, unit: Unit): number {
  if (unit.factor === 1) return value - unit.offset;
  const tens = powerOfTen(unit.factor);
  if (tens !== 0) return shifted(value - unit.offset, -tens);
  const divisor = wholeDivisor(unit.factor);
  return divisor === 0 ? (value - unit.offset) / unit.factor : (value - unit.offset) * divisor;
}

/** Throws where the dimensions differ: callers have checked them, and a wrong number would be worse. */
export function convert(value: number, from: Unit, to: Unit): number {
  if (!equal(from.dimension, to.dimension)) throw new Error(`${from.text} cannot be converted to ${to.text}`);
  return fromSI(toSI(value, from), to);
}

/** 0 where `factor` is none, or is 1. */
function powerOfTen(factor: number): number {
  const tens = Math.round(Math.log10(factor));
  return Number(`1e${tens}`) === factor ? tens : 0;
}

/** 18 L/min is 18/60000 m^3/s, not 18 times a rounded sixtieth. */
function wholeDivisor(factor: number): number {
  const whole = factor < 1 ? Math.round(1 / factor) : 0;
  return whole > 0 && 1 / whole === factor ? whole : 0;
}

function shifted(value: number, tens: number): number {
  if (!Number.isFinite(value)) return value;
  const [digits, exponent] = String(value).split("e");
  return Number(`${digits}e${Number(exponent ?? 0) + tens}`);
}
