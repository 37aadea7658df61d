import { describe, expect, it } from "vitest";
import { derived, expectPublished } from "./derived.ts";

/**
 * H. Goldstein: Classical Mechanics, 2nd edition, Addison-Wesley 1980, chapter 5 (Euler's equations; the top); Karnopp,
 * Margolis, Rosenberg: System Dynamics, 5th edition, chapter 9 (the ring of gyrators modulated by the angular momenta).
 * Recalled from memory.
 */
describe("bodies that turn about any axis", () => {
  it("Euler's equations: I1*w1' = (I2 - I3)*w2*w3 + M1, and round", () => {
    const found = derived(`
      param I1 = 2 kg*m^2
      param I2 = 3 kg*m^2
      param I3 = 4 kg*m^2
      input M1 : N*m
      input M2 : N*m
      input M3 : N*m
      1 first : rotation
      1 second : rotation
      1 third : rotation
      I I1
      I I2
      I I3
      Se torque1 e = M1
      Se torque2 e = M2
      Se torque3 e = M3
      MGY first_second out.e = I3.p*in.f
      MGY second_third out.e = I1.p*in.f
      MGY third_first  out.e = I2.p*in.f
      torque1 -> first  -> I1
      torque2 -> second -> I2
      torque3 -> third  -> I3
      first  -> first_second -> second
      second -> second_third -> third
      third  -> third_first  -> first
    `);
    expectPublished(found, {
      rates: {
        "I1.p": "M1 + (I2 - I3)*(I2.p/I2)*(I3.p/I3)",
        "I2.p": "M2 + (I3 - I1)*(I3.p/I3)*(I1.p/I1)",
        "I3.p": "M3 + (I1 - I2)*(I1.p/I1)*(I2.p/I2)",
      },
    });
  });

  it("gyroscope in light gimbals, spin H: J1*w1' = M1 - H*w2, J2*w2' = M2 + H*w1", () => {
    const found = derived(`
      param H = 8 kg*m^2/s
      param J1 = 0.4 kg*m^2
      param J2 = 0.3 kg*m^2
      input M1 : N*m
      input M2 : N*m
      Se outer_torque e = M1
      Se inner_torque e = M2
      1 outer : rotation
      1 inner : rotation
      I J1
      I J2
      GY spin out.e = H*in.f
      outer_torque -> outer -> J1
      inner_torque -> inner -> J2
      outer -> spin -> inner
    `);
    expectPublished(found, { rates: { "J1.p": "M1 - H*J2.p/J2", "J2.p": "M2 + H*J1.p/J1" } });
  });
});

/**
 * The equations of Lagrange with the kinetic energy (J + m*T(theta)^2)*w^2/2 of a crank that moves a mass by T(theta)
 * per angle, worked out by hand; a slider-crank in J. E. Shigley, J. J. Uicker: Theory of Machines and Mechanisms,
 * McGraw-Hill 1980. Recalled from memory.
 */
describe("linkages whose masses hang together", () => {
  it("slider-crank: (J + m*T^2)*w' + m*T*(dT/dtheta)*w^2 = M + F*T, with x = r*cos + sqrt(l^2 - r^2*sin^2)", () => {
    const found = derived(`
      param J = 0.2 kg*m^2
      param m = 3 kg
      param r = 0.1 m
      param l = 0.4 m
      input M : N*m
      input F : N
      let rod = sqrt(l^2 - r^2*sin(theta)^2)
      Se  torque  e = M
      1   crank   : rotation
      I   flywheel f = p/J
      MTF linkage out.f = -r*sin(theta)*(1 + r*cos(theta)/rod)*in.f
      1   slider  : translation
      I   piston  f = p/m
      Se  gas     e = F
      torque -> crank -> flywheel
      crank -> linkage -> slider -> piston
      gas -> slider
      track theta = crank.f
    `);
    const s = "sqrt(l^2 - r^2*sin(theta)^2)";
    const T = `(-r*sin(theta) - r^2*sin(theta)*cos(theta)/${s})`;
    const slope = `(-r*cos(theta) - r^2*((cos(theta)^2 - sin(theta)^2)/${s} + r^2*sin(theta)^2*cos(theta)^2/${s}^3))`;
    const w = "(flywheel.p/J)";
    expectPublished(found, {
      rates: { "flywheel.p": `J*(M + F*${T} - m*${T}*${slope}*${w}^2)/(J + m*${T}^2)`, theta: w },
      dependent: { "piston.p": `m*${T}*${w}` },
      where: { l: [3, 4] },
      byValue: true,
    });
  });

  it("cart with a pendulum, rod and bob: two coupled rates", () => {
    // (M + m)*v' + m*l*cos*w' = F + m*l*sin*w^2, m*l*cos*v' + (J + m*l^2)*w' = -m*g*l*sin, theta from hanging.
    const found = derived(`
      param M = 5 kg
      param m = 2 kg
      param l = 0.7 m
      param J = 0.1 kg*m^2
      input F : N
      Se  push   e = F
      1   rail : translation
      I   cart   f = p/M
      1   turning : rotation
      I   rod    f = p/J
      MTF across out.f = l*cos(theta)*in.f
      MTF up     out.f = l*sin(theta)*in.f
      0   joint
      1   bob_x  : translation
      1   bob_y  : translation
      I   x_bob f = p/m
      I   y_bob f = p/m
      Se  weight e = m*g0
      push -> rail -> cart
      rail -> joint -> bob_x -> x_bob
      turning -> rod
      turning -> across -> joint
      turning -> up -> bob_y -> y_bob, weight
      track theta = turning.f
    `);
    const v = "(cart.p/M)";
    const w = "(rod.p/J)";
    const [s, c] = ["sin(theta)", "cos(theta)"];
    const push = `(F + m*l*${s}*${w}^2)`;
    const determinant = `((M + m)*(J + m*l^2) - (m*l*${c})^2)`;
    expectPublished(found, {
      rates: {
        "cart.p": `M*((J + m*l^2)*${push} + m*l*${c}*m*g0*l*${s})/${determinant}`,
        "rod.p": `-J*((M + m)*m*g0*l*${s} + m*l*${c}*${push})/${determinant}`,
        theta: w,
      },
      dependent: { "x_bob.p": `m*(${v} + l*${c}*${w})`, "y_bob.p": `m*l*${s}*${w}` },
      byValue: true,
    });
  });
});

/** J. P. Den Hartog: Mechanical Vibrations, 4th edition, McGraw-Hill 1956 (rotating unbalance). Recalled from memory. */
it("machine on a spring with an unbalance m at e, driven: (M + m)*x'' = m*e*(w^2*cos + w'*sin) - k*x - b*x'", () => {
  const found = derived(`
    param M = 80 kg
    param m = 2 kg
    param ecc = 5 mm
    param k = 90 kN/m
    param b = 400 N*s/m
    input w : rad/s
    Sf  drive   f = w
    1   spin    : rotation
    MTF crank   out.f = -ecc*sin(theta)*in.f
    1   frame   : translation
    I   body    f = p/M
    C   mounts  e = k*q
    R   damping e = b*f
    0   hub     : translation
    1   offset   : translation
    I   heavy   f = p/m
    drive -> spin -> crank -> hub
    frame -> body, mounts, damping
    frame -> hub -> offset -> heavy
    track theta = spin.f
  `);
  const v = "(body.p/M)";
  expectPublished(found, {
    rates: {
      "body.p": `M*(m*ecc*(cos(theta)*w^2 + sin(theta)*rate(w)) - k*mounts.q - b*${v})/(M + m)`,
      "mounts.q": v,
      theta: "w",
    },
    dependent: { "heavy.p": `m*(${v} - ecc*sin(theta)*w)` },
  });
  expect(found.findings).toContain("input-derivative");
});

/** R. Willis: Principles of Mechanism, 1841 (speeds of a planetary gear). Recalled from memory. */
it("planetary gear with ring/sun = k: w_s + k*w_r = (1 + k)*w_c, an inertia on every shaft", () => {
  const found = derived(`
    param k = 2.5
    param J_s = 0.02 kg*m^2
    param J_r = 0.2 kg*m^2
    param J_c = 0.1 kg*m^2
    input T_s : N*m
    input T_r : N*m
    input T_c : N*m
    Se torque_s e = T_s
    Se torque_r e = T_r
    Se torque_c e = T_c
    1  sun     : rotation
    1  ring    : rotation
    1  arm : rotation
    I  J_s
    I  J_r
    I  carrier f = p/J_c
    TF by_ring out.f = k*in.f
    TF by_carrier in.f = (1 + k)*out.f
    0  teeth   : rotation
    torque_s -> sun -> J_s
    torque_r -> ring -> J_r
    torque_c -> arm -> carrier
    sun -> teeth
    ring -> by_ring -> teeth
    teeth -> by_carrier
    by_carrier -> arm
  `);
  const [a, b] = ["(1/(1 + k))", "(k/(1 + k))"];
  const [ss, sr, rr] = [`(J_s + J_c*${a}^2)`, `(J_c*${a}*${b})`, `(J_r + J_c*${b}^2)`];
  const [ts, tr] = [`(T_s + ${a}*T_c)`, `(T_r + ${b}*T_c)`];
  expectPublished(found, {
    rates: {
      "J_s.p": `J_s*(${rr}*${ts} - ${sr}*${tr})/(${ss}*${rr} - ${sr}^2)`,
      "J_r.p": `J_r*(${ss}*${tr} - ${sr}*${ts})/(${ss}*${rr} - ${sr}^2)`,
    },
    dependent: { "carrier.p": `J_c*(J_s.p/J_s + k*J_r.p/J_r)/(1 + k)` },
  });
});
