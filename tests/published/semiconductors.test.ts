import { describe, expect, it } from "vitest";
import { derived, expectPublished } from "./derived.ts";

/**
 * W. Shockley: The theory of p-n junctions in semiconductors and p-n junction transistors, Bell System Technical Journal
 * 28 (1949): i = I_s*(exp(v/V_T) - 1). Recalled from memory.
 */
describe("diode", () => {
  it("peak rectifier: C*v' = I_s*(exp((u - v)/V_T) - 1) - v/R", () => {
    const found = derived(`
      param I_s = 1e-9 A
      param V_T = 26 mV
      param C = 10 uF
      param R = 10 kohm
      input u : V
      Se source e = u
      1  mesh  : electrical
      R  diode f <- I_s*(exp(e/V_T) - 1)
      0  rail  : electrical
      C  capacitor e = q/C
      R  R
      source -> mesh -> diode
      mesh -> rail -> capacitor, R
    `);
    expectPublished(found, {
      rates: { "capacitor.q": "I_s*(exp((u - capacitor.q/C)/V_T) - 1) - capacitor.q/(C*R)" },
    });
  });

  it("with a resistor before it the current stays implicit: i = I_s*(exp((u - R*i)/V_T) - 1)", () => {
    const { model, findings } = derived(`
      param I_s = 1e-9 A
      param V_T = 26 mV
      param R = 100 ohm
      input u : V
      Se source e = u
      1  mesh  : electrical
      R  diode f <- I_s*(exp(e/V_T) - 1)
      R  R
      source -> mesh -> diode, R
      output i = mesh.f
    `);
    expect(findings).toEqual(["algebraic-loop"]);
    const [loop] = model.loops;
    expect({ linear: loop.linear, solved: loop.solved, residuals: loop.residuals.length }).toEqual({
      linear: false,
      solved: false,
      residuals: 1,
    });
  });
});

/**
 * R. D. Middlebrook, S. Cuk: A general unified approach to modelling switching-converter power stages, IEEE PESC 1976
 * (averaged over a period, the switches are a transformer of the duty ratio). Recalled from memory.
 */
it("boost converter, averaged: L*i' = u - (1 - d)*v - R_L*i, C*v' = (1 - d)*i - v/R", () => {
  const found = derived(`
    param L = 150 uH
    param R_L = 40 mohm
    param C = 470 uF
    param R = 12 ohm
    input u : V
    input d : 1 = 0.5
    Se  source e = u
    1   coil : electrical
    I   L
    R   R_L
    MTF switches out.f = (1 - d)*in.f
    0   rail : electrical
    C   C
    R   R
    source -> coil -> L, R_L
    coil -> switches -> rail -> C, R
  `);
  expectPublished(found, {
    rates: { "L.p": "u - (1 - d)*C.q/C - R_L*L.p/L", "C.q": "(1 - d)*L.p/L - C.q/(C*R)" },
  });
});

/** B. van der Pol: On relaxation-oscillations, Philosophical Magazine 2 (1926). Recalled from memory. */
it("van der Pol's oscillator: C*v' = a*v - b*v^3 - i, L*i' = v", () => {
  const found = derived(`
    param C = 2 F
    param L = 3 H
    param a = 0.5 S
    param b = 0.2 A/V^3
    0  tank : electrical
    C  C
    I  L
    R  triode f = b*e^3 - a*e
    tank -> C, L, triode
  `);
  expectPublished(found, {
    rates: { "C.q": "a*C.q/C - b*(C.q/C)^3 - L.p/L", "L.p": "C.q/C" },
  });
});
