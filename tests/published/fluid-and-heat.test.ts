import { describe, it } from "vitest";
import { derived, expectPublished } from "./derived.ts";

/**
 * Ogata: Modern Control Engineering, 5th edition, section 4-2 (liquid-level systems) and 4-5 (thermal systems); H. E.
 * Merritt: Hydraulic Control Systems, Wiley 1967, chapter 3 (orifice flow). Recalled from memory. A tank of area A holds
 * the volume q at the pressure rho*g*q/A.
 */
describe("hydraulics", () => {
  it("tank that drains through an orifice: A*h' = Q - K*sqrt(dp)", () => {
    const found = derived(`
      param A = 0.4 m^2
      param rho = 1000 kg/m^3
      param K = 2e-5 m^3/s
      param p_0 = 1 Pa
      input Q : m^3/s
      Sf inflow f = Q
      0  bottom : hydraulic
      C  tank   e = rho*g0*q/A
      R  outlet f = K*sign(e)*sqrt(abs(e)/p_0)
      inflow -> bottom -> tank, outlet
      output h = tank.q/A
    `);
    expectPublished(found, {
      rates: { "tank.q": "Q - K*sign(rho*g0*tank.q/A)*sqrt(abs(rho*g0*tank.q/A)/p_0)" },
      outputs: { h: "tank.q/A" },
    });
  });

  it("two tanks with a pipe of laminar flow between: C1*h1' = Q - (h1 - h2)/R1, C2*h2' = (h1 - h2)/R1 - h2/R2", () => {
    const found = derived(`
      param C1 = 2e-5 m^3/Pa
      param C2 = 3e-5 m^3/Pa
      param R1 = 4e6 Pa*s/m^3
      param R2 = 5e6 Pa*s/m^3
      input Q : m^3/s
      Sf inflow f = Q
      0  first : hydraulic
      C  C1
      1  pipe : hydraulic
      R  R1
      0  second : hydraulic
      C  C2
      R  R2
      inflow -> first -> C1
      first -> pipe -> R1
      pipe -> second -> C2, R2
    `);
    expectPublished(found, {
      rates: {
        "C1.q": "Q - (C1.q/C1 - C2.q/C2)/R1",
        "C2.q": "(C1.q/C1 - C2.q/C2)/R1 - C2.q/C2/R2",
      },
    });
  });

  it("cylinder: the chamber's compliance drives a mass through its piston", () => {
    const found = derived(`
      param A = 12e-4 m^2
      param C_h = 1e-11 m^3/Pa
      param m = 250 kg
      param b = 900 N*s/m
      input Q : m^3/s
      input F : N
      Sf valve  f = Q
      0  chamber : hydraulic
      C  oil    e = q/C_h
      TF piston out.e = A*in.e
      1  rod : translation
      I  mass   f = p/m
      R  seals  e = b*f
      Se load   e = F
      valve -> chamber -> oil
      chamber -> piston -> rod -> mass, seals
      rod -> load
    `);
    expectPublished(found, {
      rates: { "oil.q": "Q - A*mass.p/m", "mass.p": "A*oil.q/C_h - b*mass.p/m - F" },
    });
  });

  it("accumulator and line: fluid inertia between two volumes", () => {
    const found = derived(`
      param C1 = 2e-11 m^3/Pa
      param C2 = 3e-11 m^3/Pa
      param I_f = 4e6 Pa*s^2/m^3
      param R_f = 5e7 Pa*s/m^3
      input Q : m^3/s
      Sf pump f = Q
      0  inlet : hydraulic
      C  C1
      1  line : hydraulic
      I  I_f
      R  R_f
      0  outlet : hydraulic
      C  C2
      pump -> inlet -> C1
      inlet -> line -> I_f, R_f
      line -> outlet -> C2
    `);
    expectPublished(found, {
      rates: {
        "C1.q": "Q - I_f.p/I_f",
        "I_f.p": "C1.q/C1 - R_f*I_f.p/I_f - C2.q/C2",
        "C2.q": "I_f.p/I_f",
      },
    });
  });
});

describe("heat, with heat flow as the flow", () => {
  it("two bodies in a room: C1*T1' = P - (T1 - T2)/R12, C2*T2' = (T1 - T2)/R12 - (T2 - T_0)/R20", () => {
    const found = derived(`
      param C1 = 800 J/K
      param C2 = 3000 J/K
      param R12 = 0.5 K/W
      param R20 = 0.2 K/W
      input P : W
      input T_0 : K
      Sf heater f = P
      0  brake : heat
      C  disc   e = q/C1
      1  inner : heat
      R  R12
      0  housing : heat
      C  shell  e = q/C2
      1  outer : heat
      R  R20
      Se room   e = T_0
      heater -> brake -> disc
      brake -> inner -> R12
      inner -> housing -> shell
      housing -> outer -> R20
      outer -> room
    `);
    expectPublished(found, {
      rates: {
        "disc.q": "P - (disc.q/C1 - shell.q/C2)/R12",
        "shell.q": "(disc.q/C1 - shell.q/C2)/R12 - (shell.q/C2 - T_0)/R20",
      },
    });
  });
});
