import { describe, expect, test } from "vitest";
import { check, coEnergyRates, derive, outputs, rates, troubles } from "./read.ts";

/**
 * Closed forms as the textbooks of the field have them (D. C. Karnopp, D. L. Margolis, R. C. Rosenberg, System
 * Dynamics, Wiley; chapters on state equations; from memory), in the notation's own text.
 */
const OSCILLATOR = `
  param m = 2 kg
  param k = 300 N/m
  param b = 4 N*s/m
  input F : N = 1 N
  Se force e = F
  1 body : translation
  I m
  C k
  R b
  force -> body -> m, k, b`;

describe("independent stores", () => {
  test("mass, spring and damper", () => {
    expect(rates(derive(OSCILLATOR))).toEqual({ "k.q": "m.p/m", "m.p": "F - k*k.q - b*m.p/m" });
  });

  test("mass, spring and damper in co-energy variables", () => {
    expect(coEnergyRates(derive(OSCILLATOR))).toEqual({ "k.e": "k*m.f", "m.f": "(F - k.e - b*m.f)/m" });
  });

  test("series resonant circuit", () => {
    const model = derive(`
      param R = 3 ohm
      param L = 2 mH
      param C = 5 uF
      input u : V
      Se supply e = u
      1 loop : electrical
      R R
      I L
      C C
      supply -> loop -> R, L, C
      output v = C.e`);
    expect(rates(model)).toEqual({ "C.q": "L.p/L", "L.p": "u - C.q/C - R*L.p/L" });
    expect(outputs(model)).toEqual({ v: "C.q/C" });
  });

  test("two masses coupled by a spring", () => {
    const model = derive(`
      param m1 = 1 kg
      param m2 = 2 kg
      param k = 3 N/m
      1 left : translation
      1 right : translation
      I m1
      I m2
      0 joint
      C k
      left -> m1
      left -> joint -> k, right
      right -> m2`);
    expect(rates(model)).toEqual({ "k.q": "m1.p/m1 - m2.p/m2", "m1.p": "-k*k.q", "m2.p": "k*k.q" });
  });

  test("direct-current motor", () => {
    const model = derive(`
      param R_a = 0.35 ohm
      param L_a = 2.1 mH
      param k_m = 0.82 N*m/A
      param J = 0.045 kg*m^2
      param b = 12e-3 N*m*s/rad
      input u : V
      Se supply e = u
      1 armature : electrical
      R R_a
      I winding f = p/L_a
      GY motor out.e = k_m*in.f
      1 shaft : rotation
      I rotor f = p/J
      R bearing e = b*f
      supply -> armature -> R_a, winding
      armature -> motor -> shaft -> rotor, bearing`);
    expect(rates(model)).toEqual({
      "rotor.p": "k_m*winding.p/L_a - b*rotor.p/J",
      "winding.p": "u - k_m*rotor.p/J - R_a*winding.p/L_a",
    });
  });
});

const GEARS = `
  param J1 = 0.1 kg*m^2
  param J2 = 4 kg*m^2
  param n = 1/8
  param b = 3 N*m*s
  input T : N*m
  Se drive e = T
  1 fast : rotation
  I pinion f = p/J1
  TF gear out.f = n*in.f
  1 slow : rotation
  I wheel f = p/J2
  R bearing e = b*f
  drive -> fast -> pinion
  fast -> gear -> slow -> wheel, bearing
  output tooth = gear.out.e`;

describe("dependent stores", () => {
  test("a gear train carries the reflected inertia J1 + n^2*J2", () => {
    const model = derive(GEARS);
    expect(rates(model)).toEqual({ "pinion.p": "(J1*T - b*n^2*pinion.p)/(J1 + J2*n^2)" });
    expect(coEnergyRates(model)).toEqual({ "pinion.f": "(T - b*n^2*pinion.f)/(J1 + J2*n^2)" });
    expect(outputs(model)).toEqual({ tooth: "n*(J2*T + b*pinion.p)/(J1 + J2*n^2)" });
    expect(model.dependent.map(({ name, of }) => [name, of])).toEqual([["wheel.p", ["pinion.p"]]]);
  });

  test("names the dependence and the path between", () => {
    const found = check(GEARS).findings.find(({ name }) => name === "derivative-causality");
    expect(found?.message).toContain("`wheel.p`");
    expect(found?.message).toContain("`pinion.p`");
    expect(found?.facts[0].message).toContain("`fast->gear`");
  });

  test("a modulated path keeps the term of the moving ratio", () => {
    const model = derive(`
      param l = 1 m
      param m = 2 kg
      param J = 1 kg*m^2
      I arm f = p/J
      1 w : rotation
      track th = w.f from 0.2 rad
      MTF x out.f = l*cos(th)*in.f
      MTF y out.f = l*sin(th)*in.f
      1 vx : translation
      1 vy : translation
      I mx f = p/m
      I my f = p/m
      Se weight e = m*g0
      w -> arm
      w -> x -> vx -> mx
      w -> y -> vy -> my
      weight -> vy
      output centripetal = mx.e`);
    expect(rates(model)).toEqual({ "arm.p": "g0*J*l*m*sin(th)/(J + l^2*m)", th: "arm.p/J" });
    expect(outputs(model).centripetal).toContain("arm.p^2*sin(th)/J^2");
  });

  test("a mass on an imposed speed needs the rate of the input", () => {
    const report = check(`
      input v : m/s
      param m = 3 kg
      param k = 3 N/m
      Sf drive f = v
      1 a : translation
      I m
      0 z : translation
      C k
      drive -> a -> m
      a -> z -> k
      output F = drive.e`);
    expect(troubles(report)).toEqual(["derivative-causality", "input-derivative"]);
    expect(report.model?.inputs[0].differentiated).toBe(true);
    expect(report.model && outputs(report.model)).toEqual({ F: "k*k.q + m*v'" });
  });

  test("a store that a demanded stroke alone forced stays a state", () => {
    const model = derive(`
      input u : V
      param R_1 = 1 kohm
      param C_1 = 10 nF
      Se supply e = u
      1 loop : electrical
      R R_1
      C C_1
      supply -> loop -> R_1
      loop ->| C_1
      output v = C_1.e`);
    expect(rates(model)).toEqual({ "C_1.q": "(u - C_1.q/C_1)/R_1" });
    expect(outputs(model)).toEqual({ v: "C_1.q/C_1" });
    expect(model.dependent).toEqual([]);
  });

  test("a dependent store whose law can't be turned round is followed through its residual", () => {
    const report = check(`
      param J1 = 2 kg*m^2
      param w0 = 1 rad/s
      param h0 = 3 kg*m^2/s
      param c = 1 N*m
      input T : N*m
      Se drive e = T
      1 w : rotation
      I first f = p/J1
      I second f = w0*(p/h0 + (p/h0)^5 + sinh(p/h0))
      drive -> w -> first, second`);
    const [loop] = report.model?.loops ?? [];
    expect(loop).toMatchObject({ solved: false, circular: false });
    expect(report.model?.dependent.map(({ name, of }) => [name, of])).toEqual([["second.p", ["first.p"]]]);
    // d first/dt + d second/dt = T, with d second/dt = (d first/dt / J1)/(∂f/∂p).
    expect(report.model && rates(report.model)["first.p"]).toContain("cosh(second.p/h0)");
  });

  test("a store that would need the second derivative of an input is refused", () => {
    const report = check(`
      input u : V
      param C_1 = 1 mF
      param C_2 = 2 mF
      param r = 3 ohm
      Se supply e = u
      0 first : electrical
      C C_1
      supply -> first -> C_1
      Se sensed e = r*C_1.f
      0 second : electrical
      C C_2
      sensed -> second -> C_2`);
    expect(report.model).toBeNull();
    const refused = report.findings.find(({ name }) => name === "not-computable");
    expect(refused?.message).toContain("`C_2.q`");
    expect(refused?.facts[0].message).toContain("`second->C_2`");
  });
});

describe("algebraic loops", () => {
  test("a divider is a static model", () => {
    const report = check(`
      input u : V
      param R_1 = 1 kohm
      param R_2 = 2 kohm
      Se supply e = u
      1 loop : electrical
      R R_1
      R R_2
      supply -> loop -> R_1, R_2
      output v = R_2.e`);
    expect(troubles(report)).toEqual(["algebraic-loop"]);
    expect(report.model?.states).toEqual([]);
    expect(report.model && outputs(report.model)).toEqual({ v: "R_2*u/(R_1 + R_2)" });
  });

  test("Wheatstone's bridge", () => {
    const model = derive(`
      input u : V
      param R_1 = 1 ohm
      param R_2 = 2 ohm
      param R_3 = 3 ohm
      param R_4 = 4 ohm
      param R_5 = 5 ohm
      Se supply e = u
      0 top : electrical
      0 left : electrical
      0 right : electrical
      1 a
      1 b
      1 c
      R R_1
      R R_2
      R R_3
      R R_4
      R R_5
      supply -> top -> a -> left -> R_3
      a -> R_1
      top -> b -> right -> R_4
      b -> R_2
      left -> c -> right
      c -> R_5
      output i = R_5.f`);
    expect(outputs(model)).toEqual({
      i:
        "(R_2*R_3 - R_1*R_4)*u/(R_1*R_2*R_3 + R_1*R_2*R_4 + R_1*R_3*R_4 + R_2*R_3*R_4 + R_1*R_2*R_5 + " +
        "R_2*R_3*R_5 + R_1*R_4*R_5 + R_3*R_4*R_5)",
    });
  });

  test("an orifice in series with a pipe has a closed form; with an exponential law it hasn't", () => {
    const line = (law: string) => `
      param K = 1 Pa*s^2/m^6
      param K2 = 2 Pa*s/m^3
      param Q0 = 1 m^3/s
      input dp : Pa = 3 Pa
      Se pump e = dp
      1 line : hydraulic
      R orifice ${law}
      R pipe e = K2*f
      pump -> line -> orifice, pipe
      output Q = line.f`;
    const closed = derive(line("e = K*f*abs(f)"));
    expect(outputs(closed)).toEqual({ Q: "2*dp/(K2 + sqrt(K2^2 + 4*K*abs(dp)))" });
    const open = check(line("e = K*Q0^2*(exp(f/Q0) - 1)"));
    expect(open.model?.loops[0]).toMatchObject({ linear: false, solved: false, circular: true });
    expect(open.findings.map(({ name }) => name)).toContain("implicit-equation");
  });

  test("a ring of junctions without resistance is named as singular", () => {
    const report = check(`
      0 a : electrical
      1 b : electrical
      0 c : electrical
      1 d : electrical
      a -> b -> c -> d -> a`);
    expect(report.model).toBeNull();
    expect(troubles(report)).toEqual(["singular-junctions"]);
  });
});

describe("laws", () => {
  test("a law that can't be turned round is kept as a residual", () => {
    const report = check(`
      param I_s = 2 nA
      param U_t = 26 mV
      param L = 3 mH
      I coil f = p/L
      R diode f = I_s*(exp(e/U_t) - 1)
      1 loop : electrical
      loop -> coil, diode`);
    expect(report.model?.loops[0]).toMatchObject({ solved: false, circular: false });
    expect(report.findings.map(({ name }) => name)).toEqual(expect.arrayContaining(["implicit-equation"]));
    expect(troubles(report)).toEqual([]);
  });

  test("coupled coils", () => {
    const model = derive(`
      param L1 = 1 mH
      param L2 = 2 mH
      param M = 0.5 mH
      param R_1 = 3 ohm
      input u : V
      Se supply e = u
      1 first : electrical
      1 second : electrical
      R R_1
      R R_2 = R_1
      I coils(a, b)  a.p = L1*a.f + M*b.f, b.p = M*a.f + L2*b.f
      supply -> first -> coils.a, R_1
      second -> coils.b, R_2`);
    expect(rates(model)).toEqual({
      "coils.a.p": "u - R_1*(L2*coils.a.p - M*coils.b.p)/(L1*L2 - M^2)",
      "coils.b.p": "R_1*(M*coils.a.p - L1*coils.b.p)/(L1*L2 - M^2)",
    });
  });

  test("a solenoid from its energy", () => {
    const model = derive(`
      param L0 = 1 mH
      param x0 = 1 mm
      param m = 0.1 kg
      param R_c = 3 ohm
      input u : V
      Se supply e = u
      1 circuit : electrical
      R R_c
      IC solenoid(coil, plunger)  energy = coil.p^2/(2*L0)*(1 + plunger.q/x0)
      1 body : translation
      I m
      supply -> circuit -> solenoid.coil, R_c
      body -> solenoid.plunger, m`);
    expect(rates(model)["m.p"]).toBe("-solenoid.coil.p^2/(2*L0*x0)");
  });

  test("what a resistor dissipates heats the wall", () => {
    const model = derive(`
      param R_h = 3 ohm
      param C_t = 100 J/K
      input u : V
      Se supply e = u
      1 circuit : electrical
      RS R_h e = R_h*f
      0 wall : heat
      C block e = q/C_t
      supply -> circuit -> R_h -> wall -> block`);
    expect(rates(model)).toEqual({ "block.q": "u^2/R_h" });
  });

  test("a start given as a speed is solved back through the law", () => {
    expect(
      derive(`${OSCILLATOR}\n  start m.f = 0.5 m/s`).states.find(({ name }) => name === "m.p")?.start,
    ).toBe(1);
    const stiffening = derive(`
      param k = 3 N/m
      param x = 1 m
      C spring e = k*x*sinh(q/x)
      1 a : translation
      R d = c
      param c = 1 N*s/m
      a -> spring, d
      start spring.e = 2 N`);
    expect(stiffening.states[0].start).toBeCloseTo(Math.asinh(2 / 3), 12);
  });
});

describe("equal models", () => {
  test("give equal text whatever the order of their lines", () => {
    const lines = GEARS.trim().split("\n");
    const forward = derive(lines.join("\n"));
    const backward = derive([...lines].reverse().join("\n"));
    expect(rates(backward)).toEqual(rates(forward));
    expect(outputs(backward)).toEqual(outputs(forward));
    expect(backward.dependent.map(({ name }) => name)).toEqual(forward.dependent.map(({ name }) => name));
  });
});
