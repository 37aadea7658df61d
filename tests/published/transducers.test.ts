import { describe, expect, it } from "vitest";
import { derived, expectPublished } from "./derived.ts";

/**
 * H. H. Woodson, J. R. Melcher: Electromechanical Dynamics, part 1, Wiley 1968, chapters 2 and 3 (lumped systems,
 * forces from the stored energy). Recalled from memory. A store's energy gives current, voltage and force.
 */
describe("stores with several ports", () => {
  it("coupled coils: i1 = (L2*l1 - M*l2)/(L1*L2 - M^2)", () => {
    const found = derived(`
      param L1 = 2 H
      param L2 = 3 H
      param M  = 1 H
      param R1 = 4 ohm
      param R2 = 5 ohm
      input u : V
      Se source e = u
      1 primary : electrical
      1 secondary : electrical
      R R1
      R R2
      I coils(a, b) a.p = L1*a.f + M*b.f, b.p = M*a.f + L2*b.f
      source -> primary -> R1
      primary -> coils.a
      secondary -> R2
      secondary -> coils.b
      output i2 = secondary.f
    `);
    const i1 = "(L2*coils.a.p - M*coils.b.p)/(L1*L2 - M^2)";
    const i2 = "(L1*coils.b.p - M*coils.a.p)/(L1*L2 - M^2)";
    expectPublished(found, {
      rates: { "coils.a.p": `u - R1*${i1}`, "coils.b.p": `-R2*${i2}` },
      outputs: { i2 },
    });
    expect(found.findings).toEqual([]);
  });

  it("condenser microphone: voltage q*x/(eps*A), attraction q^2/(2*eps*A)", () => {
    const found = derived(`
      param eps = 8.854e-12 F/m
      param A = 4 cm^2
      param x_0 = 0.1 mm
      param m = 2 g
      param k = 3 kN/m
      param b = 0.2 N*s/m
      param R = 1e6 ohm
      input u : V
      input F : N
      Se bias  e = u
      1  mesh  : electrical
      R  R
      Se sound e = F
      1  plate : translation
      I  m
      R  air   e = b*f
      C  plates(charge, gap) energy = charge.q^2*gap.q/(2*eps*A) + k*(gap.q - x_0)^2/2
      bias  -> mesh -> R
      mesh  -> plates.charge
      sound -> plate -> m, air
      plate -> plates.gap
    `);
    expectPublished(found, {
      rates: {
        "plates.charge.q": "(u - plates.charge.q*plates.gap.q/(eps*A))/R",
        "plates.gap.q": "m.p/m",
        "m.p": "F - plates.charge.q^2/(2*eps*A) - k*(plates.gap.q - x_0) - b*m.p/m",
      },
    });
    expect(found.findings).toEqual([]);
  });

  it("solenoid with L = L_0/(1 + x/a): i = l*(1 + x/a)/L_0, pull l^2/(2*a*L_0)", () => {
    const found = derived(`
      param L_0 = 80 mH
      param a = 2 mm
      param R = 6 ohm
      param m = 60 g
      param k = 400 N/m
      input u : V
      Se supply e = u
      1  mesh : electrical
      R  R
      1  plunger : translation
      I  m
      C  spring e = k*q
      IC solenoid(coil, plunger) energy = coil.p^2*(1 + plunger.q/a)/(2*L_0)
      supply -> mesh -> R
      mesh -> solenoid.coil
      plunger -> m, spring
      plunger -> solenoid.plunger
    `);
    expectPublished(found, {
      rates: {
        "solenoid.coil.p": "u - R*solenoid.coil.p*(1 + solenoid.plunger.q/a)/L_0",
        "solenoid.plunger.q": "m.p/m",
        "spring.q": "m.p/m",
        "m.p": "-solenoid.coil.p^2/(2*a*L_0) - k*spring.q",
      },
    });
    expect(found.findings).toEqual([]);
  });

  it("solenoid whose inductance is a function of the way: the pull is -l^2*L'/(2*L^2)", () => {
    const found = derived(`
      param L_1 = 80 mH
      param L_2 = 20 mH
      param s = 5 mm
      param m = 60 g
      input u : V
      Se supply e = u
      1  mesh : electrical
      1  plunger : translation
      I  m
      IC solenoid(coil, plunger) energy = coil.p^2/(2*(L_2 + L_1*exp(-plunger.q/s)))
      supply -> mesh -> solenoid.coil
      plunger -> m
      plunger -> solenoid.plunger
      output i = mesh.f
    `);
    const L = "(L_2 + L_1*exp(-solenoid.plunger.q/s))";
    expectPublished(found, {
      rates: {
        "solenoid.coil.p": "u",
        "solenoid.plunger.q": "m.p/m",
        "m.p": `-solenoid.coil.p^2/(2*${L}^2)*L_1*exp(-solenoid.plunger.q/s)/s`,
      },
      outputs: { i: `solenoid.coil.p/${L}` },
    });
  });

  it("piezoelectric stack: F = k*x - d*k*v and Q = C*v + d*F as one store of charge and way", () => {
    // Solved for force and voltage by hand: v = (Q - d*k*x)/(C - d^2*k), F = k*x - d*k*v.
    const found = derived(`
      param C = 7 uF
      param d = 4e-7 C/N
      param k = 50e6 N/m
      param m = 0.1 kg
      param R = 10 ohm
      input u : V
      Se amplifier e = u
      1  mesh : electrical
      R  R
      1  tip : translation
      I  m
      C  stack(el, way) el.e = (el.q - d*k*way.q)/(C - d^2*k), way.e = k*way.q - d*k*(el.q - d*k*way.q)/(C - d^2*k)
      amplifier -> mesh -> R
      mesh -> stack.el
      tip -> m
      tip -> stack.way
    `);
    const v = "(stack.el.q - d*k*stack.way.q)/(C - d^2*k)";
    expectPublished(found, {
      rates: {
        "stack.el.q": `(u - ${v})/R`,
        "stack.way.q": "m.p/m",
        "m.p": `-k*stack.way.q + d*k*${v}`,
      },
    });
    expect(found.findings).toEqual([]);
  });
});

/**
 * P. C. Krause, O. Wasynczuk, S. D. Sudhoff: Analysis of Electric Machinery and Drive Systems, 2nd edition, Wiley 2002
 * (d.c. machines; synchronous machines in rotor coordinates). Recalled from memory. Here with the transformation that
 * keeps power, so that the torque has the factor P of pole pairs and no 3/2.
 */
describe("electric machines", () => {
  it("permanent-magnet synchronous machine in d and q", () => {
    // v_d = R*i_d + l_d' - P*w*l_q, v_q = R*i_q + l_q' + P*w*l_d, T = P*(psi*i_q + (L_d - L_q)*i_d*i_q), l_d = L_d*i_d + psi.
    const found = derived(`
      param R_s = 0.4 ohm
      param L_d = 3 mH
      param L_q = 5 mH
      param psi = 0.12 Wb
      param P = 4
      param J = 2e-3 kg*m^2
      param b = 1e-4 N*m*s/rad
      input v_d : V
      input v_q : V
      input T_load : N*m
      Se  source_d e = v_d
      Se  source_q e = v_q
      1   d : electrical
      1   q_axis : electrical
      R   loss_d e = R_s*f
      R   loss_q e = R_s*f
      I   L_d
      I   L_q
      MGY turn_d out.e = -P*L_q.p*in.f
      MGY turn_q out.e = P*(L_d.p + psi)*in.f
      1   shaft : rotation
      I   rotor f = p/J
      R   bearing e = b*f
      Se  load e = T_load
      source_d -> d -> loss_d, L_d
      source_q -> q_axis -> loss_q, L_q
      d -> turn_d -> shaft
      q_axis -> turn_q -> shaft
      shaft -> rotor, bearing
      shaft -> load
    `);
    const [i_d, i_q, w] = ["(L_d.p/L_d)", "(L_q.p/L_q)", "(rotor.p/J)"];
    expectPublished(found, {
      rates: {
        "L_d.p": `v_d - R_s*${i_d} + P*${w}*L_q*${i_q}`,
        "L_q.p": `v_q - R_s*${i_q} - P*${w}*(L_d*${i_d} + psi)`,
        "rotor.p": `P*(psi*${i_q} + (L_d - L_q)*${i_d}*${i_q}) - b*${w} - T_load`,
      },
    });
    expect(found.findings).toEqual([]);
  });

  it("squirrel-cage induction machine in coordinates that stand still", () => {
    // l_s = L_s*i_s + M*i_r and l_r = M*i_s + L_r*i_r on both axes; l_dr' = -R_r*i_dr - P*w*l_qr,
    // l_qr' = -R_r*i_qr + P*w*l_dr, T = P*(l_qr*i_dr - l_dr*i_qr).
    const axis = (name: string) => `
      Se source_${name} e = v_${name}
      1  stator_${name} : electrical
      1  rotor_${name} : electrical
      R  loss_s${name} e = R_s*f
      R  loss_r${name} e = R_r*f
      I  ${name}(s, r) s.p = L_s*s.f + M*r.f, r.p = M*s.f + L_r*r.f
      source_${name} -> stator_${name} -> loss_s${name}
      stator_${name} -> ${name}.s
      rotor_${name} -> loss_r${name}
      rotor_${name} -> ${name}.r
    `;
    const found = derived(`
      param R_s = 1.2 ohm
      param R_r = 0.9 ohm
      param L_s = 160 mH
      param L_r = 160 mH
      param M = 150 mH
      param P = 2
      param J = 0.03 kg*m^2
      input v_d : V
      input v_b : V
      input T_load : N*m
      ${axis("d")}
      ${axis("b")}
      1   shaft : rotation
      I   J
      Se  load e = T_load
      MGY turn_d out.e = P*b.r.p*in.f
      MGY turn_b out.e = -P*d.r.p*in.f
      rotor_d -> turn_d -> shaft
      rotor_b -> turn_b -> shaft
      shaft -> J
      shaft -> load
    `);
    const stator = (x: string) => `((L_r*${x}.s.p - M*${x}.r.p)/(L_s*L_r - M^2))`;
    const rotor = (x: string) => `((L_s*${x}.r.p - M*${x}.s.p)/(L_s*L_r - M^2))`;
    expectPublished(found, {
      rates: {
        "d.s.p": `v_d - R_s*${stator("d")}`,
        "b.s.p": `v_b - R_s*${stator("b")}`,
        "d.r.p": `-R_r*${rotor("d")} - P*(J.p/J)*b.r.p`,
        "b.r.p": `-R_r*${rotor("b")} + P*(J.p/J)*d.r.p`,
        "J.p": `P*(b.r.p*${rotor("d")} - d.r.p*${rotor("b")}) - T_load`,
      },
      where: { L_s: [2, 3], L_r: [2, 3], M: [0.3, 1.5] },
    });
    expect(found.findings).toEqual([]);
  });

  it("d.c. generator, excited by a winding of its own: e = K*i_f*w", () => {
    const found = derived(`
      param R_f = 60 ohm
      param L_f = 20 H
      param R_a = 0.3 ohm
      param L_a = 8 mH
      param R_L = 5 ohm
      param K = 0.9 H
      param J = 1.5 kg*m^2
      input u_f : V
      input T : N*m
      Se  exciter e = u_f
      1   field : electrical
      R   R_f
      I   L_f
      Se  engine e = T
      1   shaft : rotation
      I   J
      MGY generator out.e = K*field.f*in.f
      1   armature : electrical
      R   R_a
      I   L_a
      R   R_L
      exciter -> field -> R_f, L_f
      engine -> shaft -> J
      shaft -> generator -> armature -> R_a, L_a, R_L
      output u_t = R_L.e
    `);
    expectPublished(found, {
      rates: {
        "L_f.p": "u_f - R_f*L_f.p/L_f",
        "J.p": "T - K*(L_f.p/L_f)*(L_a.p/L_a)",
        "L_a.p": "K*(L_f.p/L_f)*(J.p/J) - (R_a + R_L)*L_a.p/L_a",
      },
      outputs: { u_t: "R_L*L_a.p/L_a" },
    });
  });
});
