import { describe, expect, it } from "vitest";
import { derived, expectPublished } from "./derived.ts";

/**
 * D. C. Karnopp, D. L. Margolis, R. C. Rosenberg: System Dynamics. Modeling, Simulation, and Control of Mechatronic
 * Systems, 5th edition, Wiley 2012, chapters 4 and 5 (mechanical translation, state-space equations); K. Ogata: Modern
 * Control Engineering, 5th edition, Prentice Hall 2010, section 3-2 (mechanical systems). Recalled from memory; the
 * formulas are Newton's second law written out for each mass, with the momentum p = m*v and the stretch q as states.
 */
describe("mechanical translation", () => {
  it("mass, damper and force: m*v' = F - b*v", () => {
    const found = derived(`
      param m = 3 kg
      param b = 0.7 N*s/m
      input F : N
      Se push   e = F
      1  body : translation
      I  mass   f = p/m
      R  damper e = b*f
      push -> body -> mass, damper
      output v = body.f
    `);
    expectPublished(found, { rates: { "mass.p": "F - b*mass.p/m" }, outputs: { v: "mass.p/m" } });
    expect(found.findings).toEqual([]);
  });

  it("mass, spring and damper: m*x'' + b*x' + k*x = F", () => {
    const found = derived(`
      param m = 3 kg
      param b = 0.7 N*s/m
      param k = 40 N/m
      input F : N
      Se push   e = F
      1  body : translation
      I  mass   f = p/m
      R  damper e = b*f
      C  spring e = k*q
      push -> body -> mass, damper, spring
    `);
    expectPublished(found, { rates: { "mass.p": "F - b*mass.p/m - k*spring.q", "spring.q": "mass.p/m" } });
  });

  it("chain of two masses, spring and damper between, force on the first", () => {
    const found = derived(`
      param m1 = 2 kg
      param m2 = 5 kg
      param k = 300 N/m
      param d = 4 N*s/m
      input F : N
      Se push   e = F
      1  first : translation
      I  mass1  f = p/m1
      0  between
      1  stretch
      C  spring e = k*q
      R  damper e = d*f
      1  second : translation
      I  mass2  f = p/m2
      push -> first -> mass1
      first -> between -> second -> mass2
      between -> stretch -> spring, damper
    `);
    expectPublished(found, {
      rates: {
        "mass1.p": "F - k*spring.q - d*(mass1.p/m1 - mass2.p/m2)",
        "mass2.p": "k*spring.q + d*(mass1.p/m1 - mass2.p/m2)",
        "spring.q": "mass1.p/m1 - mass2.p/m2",
      },
    });
  });

  it("quarter car over a road: tyre, wheel, suspension, body", () => {
    const found = derived(`
      param m_w = 40 kg
      param m_b = 320 kg
      param k_t = 180 kN/m
      param k_s = 18 kN/m
      param d_s = 1.2 kN*s/m
      input v_r : m/s
      Sf road    f = v_r
      0  contact : translation
      C  tyre    e = k_t*q
      1  wheel   : translation
      I  hub     f = p/m_w
      Se hub_weight  e = m_w*g0
      0  strut
      1  stroke
      C  spring  e = k_s*q
      R  damper  e = d_s*f
      1  body    : translation
      I  chassis f = p/m_b
      Se body_weight e = m_b*g0
      road -> contact -> tyre
      contact -> wheel -> hub
      wheel -> hub_weight
      wheel -> strut -> body -> chassis
      body -> body_weight
      strut -> stroke -> spring, damper
    `);
    expectPublished(found, {
      rates: {
        "tyre.q": "v_r - hub.p/m_w",
        "hub.p": "k_t*tyre.q - m_w*g0 - k_s*spring.q - d_s*(hub.p/m_w - chassis.p/m_b)",
        "spring.q": "hub.p/m_w - chassis.p/m_b",
        "chassis.p": "k_s*spring.q + d_s*(hub.p/m_w - chassis.p/m_b) - m_b*g0",
      },
    });
  });

  it("hardening spring: m*x'' + k*x + k3*x^3 = F (Duffing's equation without damping)", () => {
    const found = derived(`
      param m = 3 kg
      param k = 40 N/m
      param k3 = 9 N/m^3
      input F : N
      Se push   e = F
      1  body : translation
      I  mass   f = p/m
      C  spring e = k*q + k3*q^3
      push -> body -> mass, spring
    `);
    expectPublished(found, { rates: { "mass.p": "F - k*spring.q - k3*spring.q^3", "spring.q": "mass.p/m" } });
  });
});

/** Karnopp, Margolis, Rosenberg, chapter 5: two inertias on one rigid rod make one; recalled from memory. */
describe("rigidly coupled masses", () => {
  it("two masses on one rod accelerate as one of m1 + m2", () => {
    const found = derived(`
      param m1 = 2 kg
      param m2 = 5 kg
      input F : N
      Se push  e = F
      1  rod : translation
      I  mass1 f = p/m1
      I  mass2 f = p/m2
      push -> rod -> mass1, mass2
    `);
    expectPublished(found, {
      rates: { "mass1.p": "m1*F/(m1 + m2)" },
      dependent: { "mass2.p": "m2*mass1.p/m1" },
    });
    expect(found.findings).toEqual(["derivative-causality"]);
  });

  it("a lever couples two masses: m1 + (b/a)^2*m2", () => {
    const found = derived(`
      param m1 = 2 kg
      param m2 = 5 kg
      param a = 0.4 m
      param b = 0.9 m
      input F : N
      Se push  e = F
      1  near : translation
      I  mass1 f = p/m1
      TF lever out.f = b/a*in.f
      1  far : translation
      I  mass2 f = p/m2
      push -> near -> mass1
      near -> lever -> far -> mass2
    `);
    expectPublished(found, {
      rates: { "mass1.p": "F/(1 + (b/a)^2*m2/m1)" },
      dependent: { "mass2.p": "m2*(b/a)*(mass1.p/m1)" },
    });
  });
});
