import { unit as mathUnit } from "mathjs";
import { describe, expect, test } from "vitest";
import { convert, fromSI, toSI } from "../../grammar/units/convert.ts";
import { DIMENSIONLESS, equal, power } from "../../grammar/units/dimension.ts";
import { parseUnit } from "../../grammar/units/parse-unit.ts";
import { PREFIXES, UNITS } from "../../grammar/units/table.ts";
import type { Unit } from "../../grammar/units/unit.ts";
import { quantityText, readableQuantity, unitText } from "../../grammar/units/unit-text.ts";

function read(text: string): Unit {
  const unit = parseUnit(text);
  if (unit === null) throw new Error(`${text} is not a unit`);
  return unit;
}

/** Where mathjs writes a unit otherwise; null where it has none, with the value from its definition instead. */
const MATHJS: Record<string, string | null> = {
  "1": null,
  "%": null,
  ppm: null,
  Ω: "ohm",
  rpm: null,
  rev: "cycle",
  kn: null,
  Bq: null,
  Gy: null,
  Sv: null,
  kat: null,
  lm: null,
  lx: null,
  sr: null,
  degC: "degC",
  t: "tonne",
  ft: "foot",
  h: "hour",
};

const DEFINED: Record<string, [number, string]> = {
  "1": [1, "1"],
  "%": [0.01, "1"],
  ppm: [1e-6, "1"],
  rpm: [(2 * Math.PI) / 60, "1/s"],
  kn: [1852 / 3600, "m/s"],
  Bq: [1, "1/s"],
  Gy: [1, "J/kg"],
  Sv: [1, "J/kg"],
  kat: [1, "mol/s"],
  lm: [1, "cd"],
  lx: [1, "cd/m^2"],
  sr: [1, "1"],
};

/** mathjs counts mass, length, time, current, temperature, luminous intensity, amount; angle and bits follow. */
function mathjsDimension(text: string): number[] {
  const [mass, length, time, current, temperature, luminous, amount] = (
    mathUnit(1, text) as unknown as { dimensions: number[] }
  ).dimensions;
  return [mass, length, time, current, temperature, amount, luminous].map((x) => x + 0);
}

function mathjsFactor(text: string): number {
  return (mathUnit(1, text) as unknown as { toSI(): { value: number } }).toSI().value;
}

describe("every unit of the table", () => {
  test.each([...UNITS.keys()])("%s", (name) => {
    const unit = read(name);
    const other = name in MATHJS ? MATHJS[name] : name;
    if (other === null) {
      const [factor, base] = DEFINED[name];
      expect(Math.abs(unit.factor / factor - 1)).toBeLessThan(1e-15);
      expect(equal(unit.dimension, read(base).dimension)).toBe(true);
    } else {
      expect([...unit.dimension]).toEqual(mathjsDimension(other));
      expect(Math.abs((unit.factor + unit.offset) / mathjsFactor(other) - 1)).toBeLessThan(
        name === "mmHg" ? 1e-5 : 1e-10,
      ); // mathjs rounds the mercury column
    }
  });

  test.each([...PREFIXES])("prefix %s", (prefix, tens) => {
    expect(read(`${prefix}V`).factor).toBe(Number(`1e${tens}`));
  });
});

describe("how a unit is read", () => {
  test.each([
    ["kN/m", 1000, "N/m"],
    ["N*m*s/rad", 1, "N*m*s"],
    ["J/mol/K", 1, "J/K/mol"],
    ["km/h", 1 / 3.6, "m/s"],
    ["mm^3", 1e-9, "m^3"],
    ["1/min", 1 / 60, "1/s"],
    ["s^-1", 1, "1/s"],
    ["L/min", 1 / 60000, "m^3/s"],
    ["µF", 1e-6, "F"],
    ["uF", 1e-6, "F"],
    ["mmHg", 133.322387415, "Pa"],
    ["cd", 1, "cd"],
  ])("%s", (text, factor, base) => {
    expect(read(text).factor).toBeCloseTo(factor, 12);
    expect(equal(read(text).dimension, read(base).dimension)).toBe(true);
  });

  test.each([
    "",
    "m*",
    "/s",
    "m**2",
    "m^2.5",
    "m^x",
    "m^0",
    "xx",
    "N(m)",
    "kmin",
    "m*1",
    "m^999",
    "__proto__",
    "constructor",
    "1/1",
  ])("%s is none", (text) => expect(parseUnit(text)).toBeNull());

  test("degC alone is absolute, in a compound a difference", () => {
    expect(toSI(20, read("degC"))).toBeCloseTo(293.15, 12);
    expect(read("W/degC").offset).toBe(0);
  });

  test("Hz counts cycles, rad/s and rpm turn", () => {
    expect([read("kHz").cycles, read("kHz").angular]).toEqual([true, false]);
    expect([read("rad/s").cycles, read("rad/s").angular]).toEqual([false, true]);
    expect(read("rpm").angular).toBe(true);
    expect(read("N*m*s/rad").angular).toBe(false);
  });

  test("decimal prefixes keep the digits that were written", () => {
    expect(toSI(2.1, read("mH"))).toBe(0.0021);
    expect(toSI(210, read("mm"))).toBe(0.21);
    expect(toSI(18, read("L/min"))).toBe(0.0003);
    expect(fromSI(0.0021, read("mH"))).toBe(2.1);
    expect(convert(10, read("kn"), read("km/h"))).toBeCloseTo(18.52, 12);
  });
});

describe("how a unit is written", () => {
  test.each([
    ["kg*m/s", "N*s"],
    ["kg/s", "N*s/m"],
    ["V*s", "Wb"],
    ["N*m*s", "N*m*s"],
    ["kg*m^2", "kg*m^2"],
    ["V/A", "ohm"],
    ["Pa*s/m^3", "Pa*s/m^3"],
    ["N*s^2/m^2", "kg/m"],
    ["m^4/s^4", "m^4/s^4"],
    ["A^2*ohm*K^3", "W*K^3"],
    ["rad", "1"],
  ])("%s is %s", (text, habit) => expect(unitText(read(text).dimension)).toBe(habit));

  test("what is written reads back as the same dimension", () => {
    for (const text of ["Pa/m^7", "A/V^2", "kg^3*K/mol", "W^2*s/m^5", "cd*A^4/kg^3"]) {
      expect(equal(read(unitText(read(text).dimension)).dimension, read(text).dimension)).toBe(true);
    }
  });

  test("a preferred unit comes first", () => {
    expect(unitText(read("J").dimension, [read("N*m")])).toBe("N*m");
  });

  test("quantities", () => {
    expect(quantityText(52300, read("kN"))).toBe("52.3 kN");
    expect(quantityText(0.25, read("1"))).toBe("0.25");
    expect(readableQuantity(52300, read("N").dimension)).toBe("52.3 kN");
    expect(readableQuantity(0.0021, read("H").dimension)).toBe("2.1 mH");
    expect(readableQuantity(Number.NaN, read("H").dimension)).toBe("nan H");
  });

  test("roots of dimensions stay readable", () => {
    expect(equal(power(power(read("V").dimension, 0.5), 2), read("V").dimension)).toBe(true);
    expect(power(DIMENSIONLESS, -1)).toEqual([0, 0, 0, 0, 0, 0, 0]);
  });
});
