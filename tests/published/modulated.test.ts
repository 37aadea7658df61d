import { describe, expect, it } from "vitest";
import { derived, expectPublished } from "./derived.ts";

/**
 * Karnopp, Margolis, Rosenberg: System Dynamics, 5th edition, chapter 9 (mechanical systems with modulated
 * transformers); the pendulum's equation is in every text on mechanics. Recalled from memory.
 */
describe("mechanics with a lever that turns", () => {
  it("pendulum: J*w' = -m*g*l*sin(theta) - b*w", () => {
    const found = derived(`
      param J = 2 kg*m^2
      param m = 3 kg
      param l = 0.6 m
      param b = 0.1 N*m*s/rad
      1  pivot : rotation
      I  rod    f = p/J
      R  bearing e = b*f
      MTF lever out.f = l*sin(theta)*in.f
      1  lift : translation
      Se weight e = m*g0
      pivot -> rod, bearing
      pivot -> lever -> lift -> weight
      track theta = pivot.f from 0.2 rad
    `);
    expectPublished(found, {
      rates: { "rod.p": "-m*g0*l*sin(theta) - b*rod.p/J", theta: "rod.p/J" },
    });
  });

  it("a mass lifted by a crank: the term with the rate of the ratio is not lost", () => {
    // Crank r, vertical speed v = r*cos(theta)*w: (J + m*r^2*cos^2)*w' = T - m*g*r*cos + m*r^2*sin*cos*w^2.
    const found = derived(`
      param J = 2 kg*m^2
      param m = 3 kg
      param r = 0.6 m
      input T : N*m
      Se torque e = T
      1  crank : rotation
      I  flywheel f = p/J
      MTF arm   out.f = r*cos(theta)*in.f
      1  lift : translation
      I  mass   f = p/m
      Se weight e = m*g0
      torque -> crank -> flywheel
      crank -> arm -> lift -> mass, weight
      track theta = crank.f
    `);
    expectPublished(found, {
      rates: {
        "flywheel.p":
          "J*(T - m*g0*r*cos(theta) + m*r^2*sin(theta)*cos(theta)*(flywheel.p/J)^2)/(J + m*r^2*cos(theta)^2)",
        theta: "flywheel.p/J",
      },
      dependent: { "mass.p": "m*r*cos(theta)*flywheel.p/J" },
    });
  });

  it("the transformer may be written MTF or TF", () => {
    const lever = (kind: string) =>
      derived(`
        param k = 3 N/m
        input F : N
        input ratio : 1 = 1
        param m = 2 kg
        Se push e = F
        1  near : translation
        I  mass f = p/m
        ${kind} lever out.f = ratio*in.f
        1  far : translation
        C  spring e = k*q
        push -> near -> mass
        near -> lever -> far -> spring
      `);
    for (const kind of ["TF", "MTF"]) {
      const found = lever(kind);
      expectPublished(found, {
        rates: { "mass.p": "F - ratio*k*spring.q", "spring.q": "ratio*mass.p/m" },
      });
      expect(found.model.causal.graph.nodes.find(({ name }) => name === "lever")?.modulated).toBe(true);
    }
  });
});

/** Kirchhoff's current law at a node held by a source: the capacitor's current is C*du/dt. Recalled from memory. */
it("a capacitor straight across a voltage source asks for the rate of its input", () => {
  const found = derived(`
    param C = 2 F
    param R = 5 ohm
    input u : V
    Se source e = u
    0  rail : electrical
    C  capacitor e = q/C
    R  load e = R*f
    source -> rail -> capacitor, load
    output i = source.f
  `);
  expectPublished(found, {
    dependent: { "capacitor.q": "C*u" },
    outputs: { i: "C*rate(u) + u/R" },
  });
  expect(found.findings).toContain("input-derivative");
});
