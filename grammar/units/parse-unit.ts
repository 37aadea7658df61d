import { DIMENSIONLESS, multiply, power } from "./dimension.ts";
import { type Entry, PREFIXES, UNITS } from "./table.ts";
import type { Dimension, Unit } from "./unit.ts";

const known = new Map<string, Unit | null>();
/** The words of real models fit many times over; beyond it the oldest knowledge is simply dropped. */
const KEPT = 4096;
const LONGEST = 120;

/**
 * The unit that `text` means, or null where it means none: `kN/m`, `N*m*s/rad`, `1/s`, `m^2`, `%`.
 * Factors are read from left to right; what follows a stroke divides, so that `a/b/c` is `a/(b*c)`.
 */
export function parseUnit(text: string): Unit | null {
  const seen = known.get(text);
  if (seen !== undefined) return seen;
  const unit = text.length > LONGEST ? null : read(text);
  if (known.size >= KEPT) known.clear();
  known.set(text, unit);
  return unit;
}

function read(text: string): Unit | null {
  let dimension: Dimension = DIMENSIONLESS;
  let above = 1;
  let below = 1;
  let tens = 0;
  let cycles = false;
  let angular = false;
  let offset = 0;
  const pieces = text.split(/([*/])/);
  for (let i = 0; i < pieces.length; i += 2) {
    const sign = i > 0 && pieces[i - 1] === "/" ? -1 : 1;
    const piece = /^([^^]+)(?:\^(-?[1-9][0-9]?))?$/.exec(pieces[i]);
    if (piece === null) return null;
    const entry = lookUp(piece[1]);
    if (entry === null) return null;
    const raised = piece[2] === undefined ? 1 : Number(piece[2]);
    if (piece[1] === "1" && (raised !== 1 || i > 0)) return null;
    const exponent = sign * raised;
    dimension = multiply(dimension, power(entry.dimension, exponent));
    if (exponent > 0) above *= entry.mantissa ** exponent;
    else below *= entry.mantissa ** -exponent;
    tens += entry.exponent * exponent;
    if (entry.angle === true && exponent > 0) angular = true;
    if (pieces.length === 1 && exponent === 1) {
      cycles = entry.cycles === true;
      offset = entry.offset ?? 0;
    }
  }
  const factor = below === 1 || tens > 0 ? scaled(above, tens) / below : above / scaled(below, -tens);
  if (!Number.isFinite(factor) || factor === 0) return null;
  return { text, dimension, factor, offset, cycles, angular };
}

/** An exact name wins over a prefix with a unit: `min` is a minute, `cd` a candela. */
function lookUp(name: string): Entry | null {
  const exact = UNITS.get(name === "\u2126" ? "Ω" : name);
  if (exact !== undefined) return exact;
  for (const length of [1, 2]) {
    const tens = PREFIXES.get(name.slice(0, length));
    if (tens === undefined) continue;
    const rest = name.slice(length);
    const entry = UNITS.get(rest === "\u2126" ? "Ω" : rest);
    if (entry?.prefixes === true) return { ...entry, exponent: entry.exponent + tens };
  }
  return null;
}

/** Times a power of ten, rounded once; `10 ** n` itself is not exact on every engine. */
function scaled(value: number, tens: number): number {
  if (value === 1 || tens < -22) return value * Number(`1e${tens}`);
  return tens >= 0 ? value * Number(`1e${tens}`) : value / Number(`1e${-tens}`);
}
