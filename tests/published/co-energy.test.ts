import { describe, it } from "vitest";
import { derived, expectPublished, inCoEnergyVariables } from "./derived.ts";

/**
 * The equations as books print them, with velocity, current, voltage and force as the states: Ogata, Modern Control
 * Engineering, 5th edition, sections 3-2 and 3-3; Nise, Control Systems Engineering, 7th edition, section 2.7. Recalled
 * from memory.
 */
describe("states as a book prints them", () => {
  it("m*v' = F - b*v - k*x with the spring's force k*x as a state", () => {
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
    expectPublished(inCoEnergyVariables(found), {
      rates: { "mass.f": "(F - b*mass.f - spring.e)/m", "spring.e": "k*mass.f" },
    });
  });

  it("RLC in series: i' = (u - R*i - v)/L, v' = i/C", () => {
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
    `);
    expectPublished(inCoEnergyVariables(found), {
      rates: { "coil.f": "(u - R*coil.f - capacitor.e)/L", "capacitor.e": "coil.f/C" },
    });
  });

  it("d.c. motor with a geared load: reflected inertia and friction", () => {
    const found = derived(`
      param R_a = 0.35 ohm
      param L_a = 2.1 mH
      param k_m = 0.82 N*m/A
      param J_m = 0.045 kg*m^2
      param J_l = 30 kg*m^2
      param b_l = 4 N*m*s/rad
      param n = 1/28
      input u : V
      input T : N*m
      Se supply  e = u
      R  R_a
      I  winding f = p/L_a
      1  armature : electrical
      GY motor   out.e = k_m*in.f
      1  shaft : rotation
      I  rotor   f = p/J_m
      TF gearbox out.f = n*in.f
      1  drum : rotation
      I  load    f = p/J_l
      R  brake   e = b_l*f
      Se torque  e = T
      supply -> armature -> R_a, winding
      armature -> motor -> shaft -> rotor
      shaft -> gearbox -> drum -> load, brake
      drum -> torque
    `);
    // Of the two rigidly geared inertias the first by name is the independent one: the load, at drum speed.
    expectPublished(inCoEnergyVariables(found), {
      rates: {
        "winding.f": "(u - R_a*winding.f - k_m*load.f/n)/L_a",
        "load.f": "(k_m*winding.f/n - b_l*load.f - T)/(J_l + J_m/n^2)",
      },
      dependent: { "rotor.p": "J_m*load.f/n" },
    });
  });

  it("tank of area A, with its pressure as the state: the level h = p/(rho*g)", () => {
    const found = derived(`
      param A = 0.4 m^2
      param rho = 1000 kg/m^3
      param R = 3e6 Pa*s/m^3
      input Q : m^3/s
      Sf inflow f = Q
      0  bottom : hydraulic
      C  tank   e = rho*g0*q/A
      R  outlet e = R*f
      inflow -> bottom -> tank, outlet
    `);
    expectPublished(inCoEnergyVariables(found), { rates: { "tank.e": "rho*g0/A*(Q - tank.e/R)" } });
  });
});
