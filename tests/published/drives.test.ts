import { describe, expect, it } from "vitest";
import { derived, expectPublished } from "./derived.ts";

/**
 * Karnopp, Margolis, Rosenberg: System Dynamics, 5th edition, chapters 4 and 7 (gyrators, the permanent-magnet motor);
 * Ogata: Modern Control Engineering, 5th edition, section 3-3 (armature-controlled d.c. motor). Recalled from memory.
 */
describe("electromechanical", () => {
  it("d.c. motor: L*i' = u - R*i - k*w, J*w' = k*i - b*w - T", () => {
    const found = derived(`
      param R_a = 0.35 ohm
      param L_a = 2.1 mH
      param k_m = 0.82 N*m/A
      param J = 0.045 kg*m^2
      param b = 12e-3 N*m*s/rad
      input u : V
      input T : N*m
      Se supply  e = u
      R  R_a
      I  winding f = p/L_a
      1  armature : electrical
      GY motor   out.e = k_m*in.f
      1  shaft : rotation
      I  rotor   f = p/J
      R  bearing e = b*f
      Se load    e = T
      supply -> armature -> R_a, winding
      armature -> motor -> shaft -> rotor, bearing
      shaft -> load
      output w = shaft.f
      output i = armature.f
    `);
    expectPublished(found, {
      rates: {
        "winding.p": "u - R_a*winding.p/L_a - k_m*rotor.p/J",
        "rotor.p": "k_m*winding.p/L_a - b*rotor.p/J - T",
      },
      outputs: { w: "rotor.p/J", i: "winding.p/L_a" },
    });
    expect(found.findings).toEqual([]);
  });

  it("the gyrator's law may be written from any of its four sides", () => {
    for (const law of ["out.e = k*in.f", "in.e = k*out.f", "in.f = out.e/k", "out.f = in.e/k"]) {
      const found = derived(`
        param k = 0.82 V*s/rad
        param L = 2 H
        param J = 3 kg*m^2
        input u : V
        Se supply e = u
        1  mesh : electrical
        I  coil f = p/L
        GY motor ${law}
        1  shaft : rotation
        I  rotor f = p/J
        supply -> mesh -> coil
        mesh -> motor -> shaft -> rotor
      `);
      expectPublished(found, { rates: { "coil.p": "u - k*rotor.p/J", "rotor.p": "k*coil.p/L" } });
    }
  });

  it("moving-coil loudspeaker: coil, cone, suspension", () => {
    const found = derived(`
      param R_e = 6 ohm
      param L_e = 0.5 mH
      param Bl = 7 N/A
      param m = 20 g
      param d = 1.5 N*s/m
      param k = 900 N/m
      input u : V
      Se amplifier e = u
      1  coil_loop : electrical
      R  coil_resistance e = R_e*f
      I  coil f = p/L_e
      GY motor out.e = Bl*in.f
      1  cone : translation
      I  mass f = p/m
      R  losses e = d*f
      C  suspension e = k*q
      amplifier -> coil_loop -> coil_resistance, coil
      coil_loop -> motor -> cone -> mass, losses, suspension
    `);
    expectPublished(found, {
      rates: {
        "coil.p": "u - R_e*coil.p/L_e - Bl*mass.p/m",
        "mass.p": "Bl*coil.p/L_e - d*mass.p/m - k*suspension.q",
        "suspension.q": "mass.p/m",
      },
    });
  });
});

/**
 * N. S. Nise: Control Systems Engineering, 7th edition, Wiley 2015, section 2.7 (gears: an inertia is reflected by the
 * square of the ratio of speeds). Recalled from memory.
 */
describe("gear trains", () => {
  const GEARED = `
    param J1 = 0.02 kg*m^2
    param J2 = 1.5 kg*m^2
    param b2 = 0.3 N*m*s/rad
    param n = 1/12
    input T : N*m
    Se torque e = T
    1  motor : rotation
    I  J1
    TF gear   out.f = n*in.f
    1  load : rotation
    I  J2
    R  b2
    torque -> motor -> J1
    motor -> gear -> load -> J2, b2
  `;

  it("reflected inertia J1 + n^2*J2 behind a gear: a dependent store", () => {
    const found = derived(GEARED);
    expectPublished(found, {
      rates: { "J1.p": "J1/(J1 + n^2*J2)*(T - n^2*b2*J1.p/J1)" },
      dependent: { "J2.p": "J2*n*J1.p/J1" },
    });
    expect(found.findings).toContain("derivative-causality");
  });

  it("the order of the lines does not matter", () => {
    const shuffled = GEARED.trim().split("\n").reverse().join("\n");
    const [one, other] = [derived(GEARED), derived(shuffled)];
    expectPublished(other, {
      rates: { "J1.p": "J1/(J1 + n^2*J2)*(T - n^2*b2*J1.p/J1)" },
      dependent: { "J2.p": "J2*n*J1.p/J1" },
    });
    expect(other.model.states.map(({ name }) => name)).toEqual(one.model.states.map(({ name }) => name));
  });

  it("three shafts: J1 + n1^2*J2 + (n1*n2)^2*J3", () => {
    const found = derived(`
      param J1 = 0.02 kg*m^2
      param J2 = 0.1 kg*m^2
      param J3 = 1.5 kg*m^2
      param n1 = 1/3
      param n2 = 1/4
      input T : N*m
      Se torque e = T
      1  fast : rotation
      1  middle : rotation
      1  slow : rotation
      I  J1
      I  J2
      I  J3
      TF first  out.f = n1*in.f
      TF second out.f = n2*in.f
      torque -> fast -> first -> middle -> second -> slow -> J3
      fast -> J1
      middle -> J2
    `);
    expectPublished(found, {
      rates: { "J1.p": "J1*T/(J1 + n1^2*J2 + (n1*n2)^2*J3)" },
      dependent: { "J2.p": "J2*n1*J1.p/J1", "J3.p": "J3*n1*n2*J1.p/J1" },
    });
  });

  it("drum and hoisted mass: (J + m*r^2)*w' = T - m*g*r", () => {
    const found = derived(`
      param J = 4 kg*m^2
      param m = 120 kg
      param r = 0.21 m
      input T : N*m
      Se torque e = T
      1  drum : rotation
      I  drum_inertia f = p/J
      TF rope   out.f = r*in.f
      1  load : translation
      I  load_mass f = p/m
      Se weight e = m*g0
      torque -> drum -> drum_inertia
      drum -> rope -> load -> load_mass, weight
    `);
    expectPublished(found, {
      rates: { "drum_inertia.p": "J*(T - m*g0*r)/(J + m*r^2)" },
      dependent: { "load_mass.p": "m*r*drum_inertia.p/J" },
    });
  });

  it("two rotors on an elastic shaft: J1*w1' = T - k*q - d*(w1 - w2)", () => {
    const found = derived(`
      param J1 = 2 kg*m^2
      param J2 = 3 kg*m^2
      param k = 500 N*m/rad
      param d = 2 N*m*s/rad
      input T : N*m
      Se torque e = T
      1  left : rotation
      I  J1
      0  coupling : rotation
      1  twist : rotation
      C  shaft e = k*q
      R  d
      1  right : rotation
      I  J2
      torque -> left -> J1
      left -> coupling -> right -> J2
      coupling -> twist -> shaft, d
    `);
    expectPublished(found, {
      rates: {
        "J1.p": "T - k*shaft.q - d*(J1.p/J1 - J2.p/J2)",
        "J2.p": "k*shaft.q + d*(J1.p/J1 - J2.p/J2)",
        "shaft.q": "J1.p/J1 - J2.p/J2",
      },
    });
  });
});
