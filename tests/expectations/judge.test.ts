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

describe("what cannot be judged", () => {
  it.each(["stable", "gain(T, θ) < 3", "mode(3.3 Hz) within 5 %", "2*damping(1) > 0.1"])(
    "expect %s is listed as not judged, never as met",
    (condition) => {
      const { result, found } = judged(GEAR, condition);
      expect(result).toMatchObject({ judged: false, passed: false, measured: null });
      expect(found.map(({ name, severity }) => [name, severity])).toEqual([["not-yet", "note"]]);
    },
  );

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
      [false, false],
    ]);
    expect(findings.filter(({ name }) => name === "not-computable")).toHaveLength(1);
  });
});
