import { describe, expect, it } from "vitest";
import { derived, expectPublished } from "./derived.ts";

/**
 * J. W. Nilsson, S. A. Riedel: Electric Circuits, 10th edition, Pearson 2015, chapters 7 and 8 (natural and step
 * response of RC, RL and RLC circuits); recalled from memory. States are charge q = C*v and flux linkage p = L*i.
 */
describe("circuits with one or two stores", () => {
  it("RC in series with a voltage source: R*C*v' + v = u", () => {
    const found = derived(`
      param R = 4 ohm
      param C = 2 F
      input u : V
      Se source    e = u
      1  mesh : electrical
      R  resistor  e = R*f
      C  capacitor e = q/C
      source -> mesh -> resistor, capacitor
      output current = mesh.f
    `);
    expectPublished(found, {
      rates: { "capacitor.q": "(u - capacitor.q/C)/R" },
      outputs: { current: "(u - capacitor.q/C)/R" },
    });
  });

  it("RL in series with a voltage source: L*i' + R*i = u", () => {
    const found = derived(`
      param R = 4 ohm
      param L = 2 H
      input u : V
      Se source   e = u
      1  mesh : electrical
      R  resistor e = R*f
      I  coil     f = p/L
      source -> mesh -> resistor, coil
    `);
    expectPublished(found, { rates: { "coil.p": "u - R*coil.p/L" } });
  });

  it("RLC in series: L*i' = u - R*i - v, C*v' = i", () => {
    const found = derived(`
      param R = 4 ohm
      param L = 2 H
      param C = 3 F
      input u : V
      Se source    e = u
      1  mesh : electrical
      R  resistor  e = R*f
      I  coil      f = p/L
      C  capacitor e = q/C
      source -> mesh -> resistor, coil, capacitor
      output v = capacitor.e
    `);
    expectPublished(found, {
      rates: { "coil.p": "u - R*coil.p/L - capacitor.q/C", "capacitor.q": "coil.p/L" },
      outputs: { v: "capacitor.q/C" },
    });
  });

  it("RLC in parallel with a current source: C*v' = i - v/R - i_L, L*i_L' = v", () => {
    const found = derived(`
      param R = 4 ohm
      param L = 2 H
      param C = 3 F
      input i : A
      Sf source    f = i
      0  rail : electrical
      R  resistor  e = R*f
      I  coil      f = p/L
      C  capacitor e = q/C
      source -> rail -> resistor, coil, capacitor
    `);
    expectPublished(found, {
      rates: { "capacitor.q": "i - capacitor.q/(R*C) - coil.p/L", "coil.p": "capacitor.q/C" },
    });
  });

  it("laws of nothing but a value's name, ohm or siemens, henry and farad, give the same", () => {
    const found = derived(`
      param G = 0.2 S
      param L = 2 H
      param C = 3 F
      input i : A
      Sf source f = i
      0  rail : electrical
      R  G
      I  L
      C  C
      source -> rail -> G, L, C
    `);
    expectPublished(found, { rates: { "C.q": "i - G*C.q/C - L.p/L", "L.p": "C.q/C" } });
  });
});

/**
 * Ladder low-pass of third order between a source with resistance R_s and a load R_l: A. I. Zverev, Handbook of Filter
 * Synthesis, Wiley 1967 (recalled from memory); the equations are Kirchhoff's laws for its two meshes and one node.
 */
it("third-order ladder filter", () => {
  const found = derived(`
    param R_s = 1 ohm
    param L1 = 1 H
    param C2 = 2 F
    param L3 = 1 H
    param R_l = 1 ohm
    input u : V
    Se source e = u
    1  input_mesh : electrical
    R  inner  e = R_s*f
    I  first  f = p/L1
    0  node : electrical
    C  middle e = q/C2
    1  output_mesh : electrical
    I  last   f = p/L3
    R  load   e = R_l*f
    source -> input_mesh -> inner, first
    input_mesh -> node -> middle
    node -> output_mesh -> last, load
    output v = load.e
  `);
  expectPublished(found, {
    rates: {
      "first.p": "u - R_s*first.p/L1 - middle.q/C2",
      "middle.q": "first.p/L1 - last.p/L3",
      "last.p": "middle.q/C2 - R_l*last.p/L3",
    },
    outputs: { v: "R_l*last.p/L3" },
  });
});

/** Nilsson, Riedel, chapter 6: capacitors in parallel and inductors in series add; recalled from memory. */
describe("stores that add", () => {
  it("capacitors in parallel: v' = i/(C1 + C2)", () => {
    const found = derived(`
      param C1 = 2 F
      param C2 = 3 F
      input i : A
      Sf source f = i
      0  rail : electrical
      C  a e = q/C1
      C  b e = q/C2
      source -> rail -> a, b
    `);
    expectPublished(found, { rates: { "a.q": "C1*i/(C1 + C2)" }, dependent: { "b.q": "C2/C1*a.q" } });
    expect(found.findings).toContain("derivative-causality");
  });

  it("inductors in series with a resistor: (L1 + L2)*i' = u - R*i", () => {
    const found = derived(`
      param L1 = 2 H
      param L2 = 3 H
      param R = 5 ohm
      input u : V
      Se source e = u
      1  mesh : electrical
      I  a f = p/L1
      I  b f = p/L2
      R  r e = R*f
      source -> mesh -> a, b, r
    `);
    expectPublished(found, {
      rates: { "a.p": "L1*(u - R*a.p/L1)/(L1 + L2)" },
      dependent: { "b.p": "L2*a.p/L1" },
    });
  });
});

/** Ideal transformer, turns ratio N1:N2 (Nilsson, Riedel, section 9.11; recalled from memory): the load is seen as (N1/N2)^2*R. */
it("resistance seen through an ideal transformer", () => {
  const found = derived(`
    param L = 2 H
    param R = 8 ohm
    param N1 = 200
    param N2 = 50
    input u : V
    Se source e = u
    1  primary : electrical
    I  leak   f = p/L
    TF windings in.e = N1/N2*out.e
    1  secondary : electrical
    R  load   e = R*f
    source -> primary -> leak
    primary -> windings -> secondary -> load
  `);
  expectPublished(found, { rates: { "leak.p": "u - (N1/N2)^2*R*leak.p/L" } });
});
