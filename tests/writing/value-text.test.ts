import { expect, it } from "vitest";
import { toSI } from "../../grammar/units/convert.ts";
import { engineeringText } from "../../grammar/units/engineering-text.ts";
import { parseUnit } from "../../grammar/units/parse-unit.ts";
import type { Unit } from "../../grammar/units/unit.ts";
import { parameterText, pointText } from "../../grammar/writing/value-text.ts";

const unit = (text: string) => parseUnit(text) as Unit;

it.each([
  [2.6e9, "2.6e9"],
  [22e-6, "22e-6"],
  [-0.000012, "-12e-6"],
  [2e7, "20e6"],
  [101325, "101325"],
  [99999, "99999"],
  [0.002, "0.002"],
  [4.2e-10, "420e-12"],
  [1.5e300, "1.5e300"],
  [0, "0"],
])("%d is written %s", (value, text) => {
  expect(engineeringText(value)).toBe(text);
  expect(Number(text)).toBe(value);
});

it("a parameter is shown as its text gives it, a ratio as a fraction", () => {
  expect(parameterText(1 / 28, unit("1"))).toBe("1/28");
  expect(parameterText(-5 / 7, unit("1"))).toBe("-5/7");
  expect(parameterText(0.62, unit("1"))).toBe("0.62");
  expect(parameterText(toSI(2.1, unit("mH")), unit("mH"))).toBe("2.1 mH");
});

it("a start or nominal value far from one takes a prefix where its unit has room for one", () => {
  expect(pointText(62_000, unit("N"))).toBe("62 kN");
  expect(pointText(0.004, unit("m"))).toBe("4 mm");
  expect(pointText(81.6, unit("V"))).toBe("81.6 V");
  expect(pointText(4e-6, unit("m^3"))).toBe("4e-6 m^3");
  expect(pointText(0, unit("N"))).toBe("0 N");
});
