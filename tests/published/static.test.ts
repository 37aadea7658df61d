import { describe, expect, it } from "vitest";
import { derived, expectPublished } from "./derived.ts";

/** Nilsson, Riedel: Electric Circuits, chapter 3 (voltage divider, Wheatstone bridge); recalled from memory. */
describe("static networks of resistors", () => {
  it("voltage divider: v = u*R2/(R1 + R2)", () => {
    const found = derived(`
      param R1 = 3 ohm
      param R2 = 7 ohm
      input u : V
      Se source e = u
      1  mesh : electrical
      R  upper e = R1*f
      R  lower e = R2*f
      source -> mesh -> upper, lower
      output v = lower.e
      output i = mesh.f
    `);
    expectPublished(found, { outputs: { v: "u*R2/(R1 + R2)", i: "u/(R1 + R2)" } });
    expect(found.findings).toContain("algebraic-loop");
    expect(found.model.states).toEqual([]);
  });

  it("current divider: i1 = i*R2/(R1 + R2)", () => {
    const found = derived(`
      param R1 = 3 ohm
      param R2 = 7 ohm
      input i : A
      Sf source f = i
      0  rail : electrical
      R  a e = R1*f
      R  b e = R2*f
      source -> rail -> a, b
      output i1 = a.f
      output v  = rail.e
    `);
    expectPublished(found, { outputs: { i1: "i*R2/(R1 + R2)", v: "i*R1*R2/(R1 + R2)" } });
  });

  /**
   * Bridge R1 over R2 on the left, R3 over R4 on the right, detector R_g from left to right, by Thévenin's theorem:
   * open voltage u*(R2/(R1 + R2) - R4/(R3 + R4)) behind R1*R2/(R1 + R2) + R3*R4/(R3 + R4).
   */
  it("Wheatstone bridge with the resistance of its detector: an algebraic loop", () => {
    const found = derived(`
      param R1 = 100 ohm
      param R2 = 101 ohm
      param R3 = 99 ohm
      param R4 = 102 ohm
      param R_g = 50 ohm
      input u : V
      Se battery e = u
      0  top : electrical
      1  upper_left : electrical
      1  upper_right : electrical
      0  left : electrical
      0  right : electrical
      1  across : electrical
      R  arm1 e = R1*f
      R  arm2 e = R2*f
      R  arm3 e = R3*f
      R  arm4 e = R4*f
      R  detector e = R_g*f
      battery -> top -> upper_left, upper_right
      upper_left -> arm1
      upper_right -> arm3
      upper_left -> left -> arm2
      upper_right -> right -> arm4
      left -> across -> right
      across -> detector
      output i_g = detector.f
    `);
    expectPublished(found, {
      outputs: { i_g: "u*(R2/(R1 + R2) - R4/(R3 + R4))/(R1*R2/(R1 + R2) + R3*R4/(R3 + R4) + R_g)" },
    });
    expect(found.findings).toContain("algebraic-loop");
    expect(found.model.loops.length).toBeGreaterThan(0);
    for (const { linear, solved } of found.model.loops)
      expect({ linear, solved }).toEqual({ linear: true, solved: true });
  });

  it("ladder of four resistors, by series and parallel connection", () => {
    const found = derived(`
      param R1 = 1 ohm
      param R2 = 2 ohm
      param R3 = 3 ohm
      param R4 = 4 ohm
      input u : V
      Se source e = u
      1  first : electrical
      R  a e = R1*f
      0  middle : electrical
      R  b e = R2*f
      1  second : electrical
      R  c e = R3*f
      R  d e = R4*f
      source -> first -> a
      first -> middle -> b
      middle -> second -> c, d
      output v = d.e
    `);
    // v_middle = u*P/(R1 + P) with P = R2 parallel to R3 + R4, then the divider of R3 and R4.
    expectPublished(found, {
      outputs: { v: "u*(R2*(R3 + R4)/(R2 + R3 + R4))/(R1 + R2*(R3 + R4)/(R2 + R3 + R4))*R4/(R3 + R4)" },
    });
  });
});
