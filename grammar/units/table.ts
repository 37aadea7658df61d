import type { Dimension } from "./unit.ts";

/**
 * The units that may stand after a number. Factors are exact by definition unless a remark says otherwise:
 * SI base and derived units, prefixes and the units accepted for use with the SI from the SI Brochure,
 * 9th edition (2019), tables 2, 4, 7 and 8; the others from NIST SP 811 (2008), appendix B.8. Both recalled
 * from memory; tests compare every unit with an independent library where that library knows it.
 *
 * A factor is mantissa * 10^exponent, kept apart so that powers and quotients are rounded once.
 */
export interface Entry {
  readonly mantissa: number;
  readonly exponent: number;
  readonly dimension: Dimension;
  /** Takes SI prefixes. */
  readonly prefixes: boolean;
  /** Zero of the unit in SI, for a unit that stands alone. */
  readonly offset?: number;
  readonly cycles?: boolean;
  readonly angle?: boolean;
}

const KG: Dimension = [1, 0, 0, 0, 0, 0, 0];
const METRE: Dimension = [0, 1, 0, 0, 0, 0, 0];
const SECOND: Dimension = [0, 0, 1, 0, 0, 0, 0];
const AMPERE: Dimension = [0, 0, 0, 1, 0, 0, 0];
const KELVIN: Dimension = [0, 0, 0, 0, 1, 0, 0];
const MOLE: Dimension = [0, 0, 0, 0, 0, 1, 0];
const CANDELA: Dimension = [0, 0, 0, 0, 0, 0, 1];
const ONE: Dimension = [0, 0, 0, 0, 0, 0, 0];
const PER_SECOND: Dimension = [0, 0, -1, 0, 0, 0, 0];
const NEWTON: Dimension = [1, 1, -2, 0, 0, 0, 0];
const PASCAL: Dimension = [1, -1, -2, 0, 0, 0, 0];
const JOULE: Dimension = [1, 2, -2, 0, 0, 0, 0];
const WATT: Dimension = [1, 2, -3, 0, 0, 0, 0];
const OHM: Dimension = [1, 2, -3, -2, 0, 0, 0];
const SPEED: Dimension = [0, 1, -1, 0, 0, 0, 0];
const VOLUME: Dimension = [0, 3, 0, 0, 0, 0, 0];
const DOSE: Dimension = [0, 2, -2, 0, 0, 0, 0];

const si = (dimension: Dimension): Entry => ({ mantissa: 1, exponent: 0, dimension, prefixes: true });
const is = (mantissa: number, exponent: number, dimension: Dimension): Entry => ({
  mantissa,
  exponent,
  dimension,
  prefixes: false,
});
const prefixed = (entry: Entry): Entry => ({ ...entry, prefixes: true });

export const UNITS: ReadonlyMap<string, Entry> = new Map<string, Entry>([
  ["1", is(1, 0, ONE)],
  // Base units; the gram stands for the kilogram, which is its prefixed form.
  ["g", prefixed(is(1, -3, KG))],
  ["m", si(METRE)],
  ["s", si(SECOND)],
  ["A", si(AMPERE)],
  ["K", si(KELVIN)],
  ["mol", si(MOLE)],
  ["cd", si(CANDELA)],
  // Derived units with names of their own.
  ["rad", { ...si(ONE), angle: true }],
  ["sr", is(1, 0, ONE)],
  ["Hz", { ...si(PER_SECOND), cycles: true }],
  ["N", si(NEWTON)],
  ["Pa", si(PASCAL)],
  ["J", si(JOULE)],
  ["W", si(WATT)],
  ["C", si([0, 0, 1, 1, 0, 0, 0])],
  ["V", si([1, 2, -3, -1, 0, 0, 0])],
  ["F", si([-1, -2, 4, 2, 0, 0, 0])],
  ["Ω", si(OHM)],
  ["ohm", si(OHM)],
  ["S", si([-1, -2, 3, 2, 0, 0, 0])],
  ["Wb", si([1, 2, -2, -1, 0, 0, 0])],
  ["T", si([1, 0, -2, -1, 0, 0, 0])],
  ["H", si([1, 2, -2, -2, 0, 0, 0])],
  ["degC", { ...is(1, 0, KELVIN), offset: 273.15 }],
  ["lm", si(CANDELA)],
  ["lx", si([0, -2, 0, 0, 0, 0, 1])],
  ["Bq", si(PER_SECOND)],
  ["Gy", si(DOSE)],
  ["Sv", si(DOSE)],
  ["kat", si([0, 0, -1, 0, 0, 1, 0])],
  // Accepted for use with the SI.
  ["min", is(60, 0, SECOND)],
  ["h", is(3600, 0, SECOND)],
  ["day", is(86_400, 0, SECOND)],
  ["deg", { ...is(Math.PI / 180, 0, ONE), angle: true }],
  ["L", prefixed(is(1, -3, VOLUME))],
  ["t", prefixed(is(1, 3, KG))],
  ["bar", prefixed(is(1, 5, PASCAL))],
  ["mmHg", is(133.322387415, 0, PASCAL)], // conventional: 13 595.1 kg/m^3 * 9.806 65 m/s^2 * 1 mm
  ["kn", is(1852 / 3600, 0, SPEED)],
  ["Wh", prefixed(is(3600, 0, JOULE))],
  // Of the trade.
  ["rev", { ...is(2 * Math.PI, 0, ONE), angle: true }],
  ["rpm", { ...is(Math.PI / 30, 0, PER_SECOND), angle: true }],
  ["inch", is(254, -4, METRE)],
  ["ft", is(3048, -4, METRE)],
  ["lbf", is(4.4482216152605, 0, NEWTON)], // 0.453 592 37 kg * 9.806 65 m/s^2
  ["psi", is(4.4482216152605 / 0.00064516, 0, PASCAL)], // lbf/inch^2
  ["hp", is(550 * 0.3048 * 4.4482216152605, 0, WATT)], // mechanical horsepower
  ["%", is(1, -2, ONE)],
  ["ppm", is(1, -6, ONE)],
]);

/** Powers of ten (SI Brochure, table 7); `µ` is written in three ways. */
export const PREFIXES: ReadonlyMap<string, number> = new Map([
  ["da", 1],
  ["Q", 30],
  ["R", 27],
  ["Y", 24],
  ["Z", 21],
  ["E", 18],
  ["P", 15],
  ["T", 12],
  ["G", 9],
  ["M", 6],
  ["k", 3],
  ["h", 2],
  ["d", -1],
  ["c", -2],
  ["m", -3],
  ["µ", -6],
  ["μ", -6],
  ["u", -6],
  ["n", -9],
  ["p", -12],
  ["f", -15],
  ["a", -18],
  ["z", -21],
  ["y", -24],
  ["r", -27],
  ["q", -30],
]);
