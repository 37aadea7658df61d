import { describe, expect, it } from "vitest";
import { checkFile } from "../../grammar/pipeline.ts";
import { fileSet } from "../../grammar/source/text.ts";

/** Two inertias on one rigid gear (one dependent), a tracked angle that no law reads. */
const GEAR = `notation 1
system Gear {
  param J1 = 1 kg*m^2
  param J2 = 4 kg*m^2
  param n = 1/3
  param wanted = 1
  input T : N*m
  Se motor e = T
  1 fast : rotation
  I J1
  TF gear out.f = n*in.f
  1 slow : rotation
  I J2
  motor -> fast -> J1
  fast -> gear -> slow -> J2
  track θ = slow.f
  EXPECT
}
`;

/** A voltage divider: an algebraic loop that is solved. */
const DIVIDER = `notation 1
system Divider {
  input u : V
  param R1 = 1 ohm
  param R2 = 2 ohm
  Se supply e = u
  1 loop : electrical
  R R1
  R R2
  supply -> loop -> R1, R2
  EXPECT
}
`;

function judged(text: string, condition: string) {
  const source = text.replace("EXPECT", `expect ${condition}`);
  const { systems, findings } = checkFile(fileSet([["m.wright", source]]), "m.wright");
  const [result] = systems[0].expectations;
  const found = findings.filter(({ name }) =>
    ["expectation-failed", "not-computable", "not-yet"].includes(name),
  );
  return { result, found };
}

describe("facts and comparisons", () => {
  it.each([
    // The tracked angle only records: it is no part of the order.
    [GEAR, "order = 1"],
    [GEAR, "order < 2"],
    [GEAR, "order <= 1"],
    [GEAR, "order > 0"],
    [GEAR, "order >= 1"],
    [GEAR, "1 = order"],
    [GEAR, "order = wanted"],
    [GEAR, "order between 0 and 2"],
    [GEAR, "order = 1.02 within 5 %"],
    [GEAR, "order = 2 within 1"],
    [GEAR, "order + dependent = 2*order"],
    [GEAR, "dependent = 1"],
    [GEAR, "loops = 0"],
    // A law reads it, so it is part of what settles the motion.
    [GEAR.replace("out.f = n*in.f", "out.f = n*cos(θ)*in.f"), "order = 2"],
    [DIVIDER, "order = 0"],
    [DIVIDER, "loops = 1"],
    [DIVIDER, "integral"],
  ])("%# expect %s holds", (text, condition) => {
    const { result, found } = judged(text, condition);
    expect(result).toMatchObject({ judged: true, passed: true });
    expect(found).toEqual([]);
  });

  it.each([
    [GEAR, "order = 2", "1", "= 2"],
    [GEAR, "order > 1", "1", "> 1"],
    [GEAR, "order between 2 and 3", "1", "between 2 and 3"],
    [GEAR, "order = 1.1 within 5 %", "1", "= 1.1 within 5 %"],
    [GEAR, "integral", "1 dependent store: J2.p", "integral"],
    [DIVIDER, "loops = 0", "1", "= 0"],
  ])("%# expect %s fails, with what was measured", (text, condition, measured, wanted) => {
    const { result, found } = judged(text, condition);
    expect(result).toMatchObject({ judged: true, passed: false, measured, wanted });
    expect(found.map(({ name, severity }) => [name, severity])).toEqual([["expectation-failed", "error"]]);
  });
});

/** A mass on a spring and a damper: 5 rad/s, ζ = 0.15, 0.02 m/N. */
const OSCILLATOR = `notation 1
system Oscillator {
  param f_least = 0.7 Hz
  param k = 50 N/m
  input F : N = 25 N
  Se push e = F
  1 mass : translation
  I body f = p/(2 kg)
  R drag e = 3 N*s/m * f
  C spring e = k*q
  push -> mass -> body, drag, spring
  track travel = mass.f
  output x = spring.q as mm
  output v = mass.f
  output far = travel
  EXPECT
}
`;

describe("modes, gains and the equilibrium", () => {
  it.each([
    "stable",
    "frequency(1) = 0.795775 Hz within 0.01 %",
    "frequency(1) = 5 rad/s within 0.001 %",
    "frequency(1) = 5 rad/s within 0.001 Hz",
    "frequency(1) > f_least",
    "frequency(1) between 4.9 rad/s and 5.1 rad/s",
    "2*frequency(1) > 1.5 Hz",
    "damping(1) = 0.15 within 0.0001 %",
    "mode(0.8 Hz) within 1 %",
    "mode(5.1 rad/s) within 0.02 Hz",
    "gain(F, x) = 20 mm/N within 0.001 %",
    "gain(F, x)*k = 1 within 0.001 %",
    "gain(F, spring.q, 0.795775 Hz) = 66.6667 mm/N within 0.01 %",
    "gain(F, mass.f, 5 rad/s) = 1/3 m/s/N within 0.01 %",
    "phase(F, x, 5 rad/s) = -90 deg within 0.01 deg",
    "phase(F, v, 5 rad/s) = 0 within 0.01 deg",
    "bandwidth(F, x) between 1.2 Hz and 1.3 Hz",
    "steady(x) = 0.5 m within 1 %",
    "steady(spring.e) = 25 N within 0.001 %",
    "steady(v) = 0 within 1 mm/s",
  ])("expect %s holds", (condition) => {
    const { result, found } = judged(OSCILLATOR, condition.replace("1/3 m/s/N", "0.333333 m/s/N"));
    expect(found.map(({ message }) => message)).toEqual([]);
    expect(result).toMatchObject({ judged: true, passed: true });
  });

  it.each([
    ["frequency(1) > 1 Hz", "0.795775 Hz", "> 1 Hz"],
    ["frequency(1) > 7 rad/s", "5 rad/s", "> 7 rad/s"],
    ["gain(F, x) < 10 mm/N", "20 mm/N", "< 10 mm/N"],
    ["steady(x) < 40 cm", "50 cm", "< 40 cm"],
    ["phase(F, x, 5 rad/s) > -80 deg", "-90 deg", "> -80 deg"],
    ["mode(2 Hz) within 5 %", "nearest 0.795775 Hz", "mode(2 Hz) within 5 %"],
  ])("expect %s fails, measured in the wanted unit", (condition, measured, wanted) => {
    expect(judged(OSCILLATOR, condition).result).toMatchObject({
      judged: true,
      passed: false,
      measured,
      wanted,
    });
  });

  it("says what speaks against stability", () => {
    const { result } = judged(OSCILLATOR.replace("3 N*s/m * f", "0 N*s/m * f"), "stable");
    expect(result).toMatchObject({ passed: false, measured: "eigenvalue 0 ± 5j 1/s" });
  });

  it.each([
    ["frequency(1) > 3 1/s", /^The condition compares a value in Hz with one in 1\/s\.$/],
    ["frequency(3) > 3 Hz", /^There is no mode 3/],
    ["frequency > 3 Hz", /arguments in brackets/],
    ["gain(push, x) > 1", /^`push` is no input of the system; it has `F`\.$/],
    [
      "gain(F, y) > 1",
      /^`y` is no output, state, effort or flow of the system; its outputs are `x`, `v`, `far`\.$/,
    ],
    ["gain(F, x) > 1 kg", /^The condition compares a value in mm per N with one in kg\.$/],
    ["gain(F, x, 3 s) > 1", /^The frequency is wanted in Hz or in rad\/s\.$/],
    // What it travels is the same as the spring's way: the track adds no pole that would not cancel.
    ["gain(F, far) > 1 kg", /^The condition compares a value in m per N/],
    ["bandwidth(F, v) > 1 Hz", /^The gain at zero frequency is 0/],
    ["steady(far) = 0", /^`far` hangs on `travel`, which only records/],
    ["mode(3.3 Hz)", /^Say how near/],
  ])("expect %s fails, and says why", (condition, message) => {
    const { result, found } = judged(OSCILLATOR, condition);
    expect(result).toMatchObject({ judged: true, passed: false, measured: null });
    expect(result.message).toMatch(message);
    expect(found.map(({ name }) => name)).toEqual(["not-computable"]);
  });

  it("warns once where nothing comes to rest, and measures what does not hang on it", () => {
    const { systems, findings } = checkFile(
      fileSet([
        [
          "m.wright",
          OSCILLATOR.replace("  C spring e = k*q\n", "")
            .replace(", spring", "")
            .replace("spring.q as mm", "travel")
            .replace("3 N*s/m * f", "0 N*s/m * f")
            .replace(
              "EXPECT",
              "expect steady(v) = 0\n  expect stable\n  expect gain(F, v, 1 rad/s) = 0.5 m/s/N within 0.01 %",
            ),
        ],
      ]),
      "m.wright",
    );
    expect(systems[0].expectations.map(({ passed, message }) => [passed, message])).toEqual([
      [false, "There is no equilibrium. Nothing brings the rate of `body.p` to zero: it stays 25 N."],
      [false, null],
      [true, null],
    ]);
    expect(findings.filter(({ name }) => name === "no-equilibrium")).toHaveLength(1);
  });
});

describe("what cannot be judged", () => {
  it.each(["order", "order = 1 kg", "integral = 1", "order = 0/0"])(
    "expect %s fails, and says why",
    (condition) => {
      const { result, found } = judged(GEAR, condition);
      expect(result).toMatchObject({ judged: true, passed: false, measured: null });
      expect(result.message).toBe(found[0].message);
      expect(found[0].name).toBe("not-computable");
    },
  );

  it("says once for all requirements that a refused model has no equations", () => {
    const refused = DIVIDER.replace("R R1\n", "Sf R1 f = 1 A\n  Sf again f = 2 A\n").replace(
      "-> R1",
      "-> again, R1",
    );
    const text = refused.replace("EXPECT", "expect order = 0\n  expect loops = 1\n  expect stable");
    const { systems, findings } = checkFile(fileSet([["m.wright", text]]), "m.wright");
    expect(findings.map(({ name }) => name)).toContain("causal-conflict");
    expect(systems[0].expectations.map(({ judged: yes, passed }) => [yes, passed])).toEqual([
      [true, false],
      [true, false],
      [true, false],
    ]);
    expect(findings.filter(({ name }) => name === "not-computable")).toHaveLength(1);
  });
});
