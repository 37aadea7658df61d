import { fromSI } from "./convert.ts";
import { equal, isDimensionless, multiply, power } from "./dimension.ts";
import { engineeringText } from "./engineering-text.ts";
import { parseUnit } from "./parse-unit.ts";
import type { Dimension, Unit } from "./unit.ts";

/** How the trade writes what its models are made of, where base units alone would be harder to read. */
const HABITS = [
  ..."N kg N/m N*s N*s/m m/N m/s m/s^2".split(" "),
  ..."N*m*s kg*m^2 1/s J J/K W W/K Pa Pa*s Pa*s/m^3 Pa*s^2/m^3 m^3/s m^3/Pa".split(" "),
  ..."V A C ohm S H F Wb T V/m A/m H/m A/s V/s K K/W J/mol mol/s J/kg kg/s kg/m^3".split(" "),
  ..."N/A N/s Pa/s W/m^2 W/s J/m^3".split(" "),
];

/** Heads that a compound may be built on where no habit fits; base units make up the rest. */
const HEADS = ["", "N", "V", "Pa", "W", "J", "C", "ohm", "H", "F", "Wb"];
const BASE = ["kg", "m", "s", "A", "K", "mol", "cd"];

const written = new Map<string, string>();

/**
 * A readable SI unit for a dimension: `N*s`, `V`, `N*s^2/m^2`; `1` for none. `preferred` gives units that are
 * tried first (a rotation's torque is `N*m` rather than `J`).
 */
export function unitText(dimension: Dimension, preferred: readonly Unit[] = []): string {
  for (const unit of preferred) if (equal(unit.dimension, dimension)) return unit.text;
  if (isDimensionless(dimension)) return "1";
  if (written.size === 0) {
    for (const text of HABITS) {
      const unit = parseUnit(text);
      if (unit !== null && !written.has(unit.dimension.join())) written.set(unit.dimension.join(), text);
    }
  }
  const key = dimension.join();
  const habit = written.get(key);
  if (habit !== undefined) return habit;
  const text = build(dimension);
  if (written.size < 4096) written.set(key, text);
  return text;
}

/** The coherent SI unit of a dimension. */
export function unitOf(dimension: Dimension, preferred: readonly Unit[] = []): Unit {
  const text = unitText(dimension, preferred);
  return { text, dimension, factor: 1, offset: 0, cycles: false, angular: false };
}

function build(dimension: Dimension): string {
  let best = "";
  let least = Number.POSITIVE_INFINITY;
  for (const head of HEADS) {
    const headDimension = head === "" ? null : (parseUnit(head)?.dimension ?? null);
    for (const exponent of headDimension === null ? [0] : [1, 2, -1, -2]) {
      const rest = headDimension === null ? dimension : multiply(dimension, power(headDimension, -exponent));
      const cost = costOf(rest) + (exponent === 0 ? 0 : 1 + 3 * Math.abs(exponent));
      if (cost < least) {
        least = cost;
        best = compound([[head, exponent], ...BASE.map((name, i): [string, number] => [name, rest[i]])]);
      }
    }
  }
  return best;
}

/** Few different units read better than small powers of many. */
function costOf(exponents: Dimension): number {
  return exponents.reduce((sum, x) => sum + (x === 0 ? 0 : 3 + Math.abs(x) / 2), 0);
}

function compound(factors: readonly (readonly [string, number])[]): string {
  const write = ([name, exponent]: readonly [string, number]) =>
    Math.abs(exponent) === 1 ? name : `${name}^${Math.abs(exponent)}`;
  const above = factors.filter(([, exponent]) => exponent > 0).map(write);
  const below = factors.filter(([, exponent]) => exponent < 0).map(write);
  return [above.join("*") || "1", ...below].join("/");
}

/** An SI value shown in a unit: `52.3 kN`, `2.1 mH`, `0.25` where it has none. */
export function quantityText(value: number, unit: Unit, digits = 4): string {
  const number = numberText(fromSI(value, unit), digits);
  return unit.text === "1" ? number : `${number} ${unit.text}`;
}

const ENGINEERING: readonly (readonly [number, string])[] = [
  [9, "G"],
  [6, "M"],
  [3, "k"],
  [0, ""],
  [-3, "m"],
  [-6, "µ"],
  [-9, "n"],
  [-12, "p"],
];

/** As `quantityText`, with a prefix chosen so that one to three digits stand before the point. */
export function readableQuantity(
  value: number,
  dimension: Dimension,
  preferred: readonly Unit[] = [],
  digits = 4,
): string {
  const text = unitText(dimension, preferred);
  const size = Math.abs(value);
  if (text !== "1" && size > 0 && Number.isFinite(value)) {
    for (const [tens, prefix] of ENGINEERING) {
      if (size < Number(`1e${tens}`)) continue;
      const scaled = parseUnit(`${prefix}${text}`);
      if (scaled !== null && equal(scaled.dimension, dimension)) return quantityText(value, scaled, digits);
      break;
    }
  }
  return quantityText(value, unitOf(dimension, preferred), digits);
}

/** Up to `digits` significant digits, never more than needed: `0.25`, `120e-9`, `81.6`. */
export function numberText(value: number, digits = 4): string {
  if (!Number.isFinite(value)) return Number.isNaN(value) ? "nan" : value > 0 ? "inf" : "-inf";
  return engineeringText(Number(value.toPrecision(digits)));
}
