import { describe, expect, it } from "vitest";
import { derived, expectPublished } from "./derived.ts";

/**
 * J. U. Thoma: Introduction to Bond Graphs and their Applications, Pergamon 1975 (conduction by entropy): the flow of heat G*(T_1 - T_2) is T*S' on both sides, and entropy G*(T_1 - T_2)^2/(T_1*T_2)
 * comes into being. Recalled from memory. A body of constant heat capacity c has T = T_0*exp(S/c).
 */
describe("heat by temperature and flow of entropy", () => {
  const BODIES = `
    param G = 5 W/K
    param c_1 = 400 J/K
    param c_2 = 900 J/K
    param T_0 = 300 K
    0  hot  : thermal
    0  cold : thermal
    C  body_1 e = T_0*exp(q/c_1)
    C  body_2 e = T_0*exp(q/c_2)
    hot  -> body_1
    cold -> body_2
  `;
  const [T_1, T_2] = ["(T_0*exp(body_1.q/c_1))", "(T_0*exp(body_2.q/c_2))"];
  const rates = { "body_1.q": `-G*(${T_1} - ${T_2})/${T_1}`, "body_2.q": `G*(${T_1} - ${T_2})/${T_2}` };

  it("a wall between two bodies, as a resistor with two ports", () => {
    const found = derived(`${BODIES}
      R  wall(warm, gives cool) warm.f = G*(warm.e - cool.e)/warm.e, cool.f = G*(warm.e - cool.e)/cool.e
      hot -> wall.warm
      wall.cool -> cold
      output production = wall.cool.f - wall.warm.f
    `);
    expectPublished(found, {
      rates,
      outputs: { production: `G*(${T_1} - ${T_2})^2/(${T_1}*${T_2})` },
    });
    expect(found.findings).toEqual([]);
  });

  it("the same wall as a resistor that gives its heat to the colder side", () => {
    const found = derived(`${BODIES}
      1  gap : thermal
      RS wall f <- G*e/hot.e
      hot -> gap -> cold
      gap -> wall -> cold
    `);
    expectPublished(found, { rates });
  });

  it("a brake that heats its drum: entropy b*w^2/T goes into it, and the drum loses heat to the air", () => {
    const found = derived(`
      param J = 4 kg*m^2
      param b = 3 N*m*s/rad
      param c = 500 J/K
      param T_0 = 300 K
      param T_a = 290 K
      param G = 2 W/K
      1  shaft : rotation
      I  J
      RS brake e = b*f
      0  drum : thermal
      C  metal e = T_0*exp(q/c)
      R  air(warm, gives cool) warm.f = G*(warm.e - cool.e)/warm.e, cool.f = G*(warm.e - cool.e)/cool.e
      Se room e = T_a
      shaft -> J
      shaft -> brake -> drum -> metal
      drum -> air.warm
      air.cool -> room
    `);
    const T = "(T_0*exp(metal.q/c))";
    expectPublished(found, {
      rates: { "J.p": "-b*J.p/J", "metal.q": `b*(J.p/J)^2/${T} - G*(${T} - T_a)/${T}` },
    });
  });
});

/**
 * Karnopp, Margolis, Rosenberg: System Dynamics, 5th edition, chapter 12 (thermodynamic systems; the store with a port
 * of entropy and one of volume). Recalled from memory.
 */
it("ideal gas under a piston: U(S, V) gives T and p = m*R*T/V", () => {
  // U = m*c_v*T_0*exp(S/(m*c_v))*(V/V_0)^(-R/c_v); S counts from T_0 and V_0.
  const found = derived(`
    param m = 2 g
    param c_v = 718 J/kg/K
    param R = 287 J/kg/K
    param T_0 = 300 K
    param V_0 = 2 L
    param A = 50 cm^2
    param M = 4 kg
    param p_a = 1 bar
    input S_in : W/K
    C  gas(heat, space) energy = m*c_v*T_0*exp(heat.q/(m*c_v))*(space.q/V_0)^(-R/c_v)
    Sf heater f = S_in
    0  inside : thermal
    0  volume : hydraulic
    TF piston out.f = A*in.f
    1  rod : translation
    I  M
    Se air e = A*p_a
    heater -> inside -> gas.heat
    rod -> M
    rod -> piston -> volume -> gas.space
    rod -> air
    start gas.space.q = 2 L
    output T = inside.e
    output pressure = -volume.e
  `);
  const T = "(T_0*exp(gas.heat.q/(m*c_v))*(gas.space.q/V_0)^(-R/c_v))";
  expectPublished(found, {
    rates: {
      "gas.heat.q": "S_in",
      "gas.space.q": "A*M.p/M",
      "M.p": `A*(m*R*${T}/gas.space.q - p_a)`,
    },
    outputs: { T, pressure: `m*R*${T}/gas.space.q` },
    where: { "gas.space.q": [0.3, 2] },
    byValue: true,
  });
});

/**
 * F. P. Incropera, D. P. DeWitt: Fundamentals of Heat and Mass Transfer, 5th edition, Wiley 2002, chapters 1, 5 and 11
 * (energy balance of a body and of the streams in an exchanger). Recalled from memory.
 */
describe("heat by temperature and flow of heat", () => {
  it("exchanger in counterflow, two cells on each side", () => {
    const found = derived(`
      param w_h = 200 W/K
      param w_c = 150 W/K
      param K = 80 W/K
      param M_h = 3000 J/K
      param M_c = 2000 J/K
      input T_h : K
      input T_c : K
      Se hot_in  e = T_h
      Se cold_in e = T_c
      0  hot[0]  : heat
      0  cold[3] : heat
      hot_in  -> hot[0]
      cold_in -> cold[3]
      repeat i = 1 .. 2 {
        0 hot[i]  : heat
        0 cold[i] : heat
        C H[i] e = q/M_h
        C K[i] e = q/M_c
        R hot_stream[i](from, gives to)  from.f = w_h*from.e, to.f = w_h*from.e
        R cold_stream[i](from, gives to) from.f = w_c*from.e, to.f = w_c*from.e
        1 wall[i] : heat
        R plate[i] f = K*e
        hot[i]  -> H[i]
        cold[i] -> K[i]
        hot[i-1]  -> hot_stream[i].from
        hot_stream[i].to -> hot[i]
        cold[i+1] -> cold_stream[i].from
        cold_stream[i].to -> cold[i]
        hot[i] -> wall[i] -> cold[i]
        wall[i] -> plate[i]
      }
      R hot_out  f = w_h*e
      R cold_out f = w_c*e
      hot[2]  -> hot_out
      cold[1] -> cold_out
    `);
    const hot = (i: number) => (i === 0 ? "T_h" : `(H[${i}].q/M_h)`);
    const cold = (i: number) => (i === 3 ? "T_c" : `(K[${i}].q/M_c)`);
    expectPublished(found, {
      rates: {
        "H[1].q": `w_h*(${hot(0)} - ${hot(1)}) - K*(${hot(1)} - ${cold(1)})`,
        "H[2].q": `w_h*(${hot(1)} - ${hot(2)}) - K*(${hot(2)} - ${cold(2)})`,
        "K[1].q": `w_c*(${cold(2)} - ${cold(1)}) + K*(${hot(1)} - ${cold(1)})`,
        "K[2].q": `w_c*(${cold(3)} - ${cold(2)}) + K*(${hot(2)} - ${cold(2)})`,
      },
    });
  });

  it("a body that radiates: C*T' = P - eps*sigma*A*(T^4 - T_s^4)", () => {
    const found = derived(`
      param C = 500 J/K
      param k_r = 2e-9 W/K^4
      param T_s = 290 K
      input P : W
      Sf heater f = P
      0  body : heat
      C  C
      MR radiation f = k_r*(body.e^4 - T_s^4)
      heater -> body -> C, radiation
    `);
    expectPublished(found, { rates: { "C.q": "P - k_r*((C.q/C)^4 - T_s^4)" } });
  });

  it("a brake that heats its drum: C*T' = b*w^2 - (T - T_a)/R", () => {
    const found = derived(`
      param J = 4 kg*m^2
      param b = 3 N*m*s/rad
      param C = 500 J/K
      param R = 0.4 K/W
      param T_a = 290 K
      input M : N*m
      Se engine e = M
      1  shaft : rotation
      I  J
      RS brake e = b*f
      0  drum : heat
      C  C
      1  film : heat
      R  R
      Se room e = T_a
      engine -> shaft -> J
      shaft -> brake -> drum -> C
      drum -> film -> R
      film -> room
    `);
    expectPublished(found, {
      rates: { "J.p": "M - b*J.p/J", "C.q": "b*(J.p/J)^2 - (C.q/C - T_a)/R" },
    });
  });
});

/**
 * G. F. Oster, A. S. Perelson, A. Katchalsky: Network thermodynamics: dynamic modelling of biophysical systems,
 * Quarterly Reviews of Biophysics 6 (1973). Recalled from memory. With the potential mu + R*T*ln(n/n_0) the forces of a
 * reaction give the law of mass action.
 */
describe("chemistry", () => {
  const POTENTIAL = "R_g*T*ln(q/n_0)";

  it("A = B: n_A' = -k_f*n_A + k_r*n_B with k_f = k*exp(mu_A/(R*T))/n_0", () => {
    const found = derived(`
      param R_g = 8.314 J/mol/K
      param T = 300 K
      param n_0 = 1 mol
      param k = 0.2 mol/s
      param mu_A = 500 J/mol
      param mu_B = 100 J/mol
      0  a : chemical
      0  b : chemical
      C  A e = mu_A + ${POTENTIAL}
      C  B e = mu_B + ${POTENTIAL}
      R  reaction(from, gives to) from.f = k*(exp(from.e/(R_g*T)) - exp(to.e/(R_g*T))), to.f = k*(exp(from.e/(R_g*T)) - exp(to.e/(R_g*T)))
      a -> A
      b -> B
      a -> reaction.from
      reaction.to -> b
    `);
    const rate = "(k/n_0*(exp(mu_A/(R_g*T))*A.q - exp(mu_B/(R_g*T))*B.q))";
    expectPublished(found, {
      rates: { "A.q": `-${rate}`, "B.q": rate },
      where: { "A.q": [0.2, 2], "B.q": [0.2, 2] },
      byValue: true,
    });
  });

  it("2 A = B: the stoichiometry is a transformer, and the rate goes with the square of n_A", () => {
    const found = derived(`
      param R_g = 8.314 J/mol/K
      param T = 300 K
      param n_0 = 1 mol
      param k = 0.2 mol/s
      0  a : chemical
      0  b : chemical
      C  A e = ${POTENTIAL}
      C  B e = ${POTENTIAL}
      TF twice in.f = 2*out.f
      R  reaction(from, gives to) from.f = k*(exp(from.e/(R_g*T)) - exp(to.e/(R_g*T))), to.f = k*(exp(from.e/(R_g*T)) - exp(to.e/(R_g*T)))
      a -> A
      b -> B
      a -> twice -> reaction.from
      reaction.to -> b
    `);
    const rate = "(k*((A.q/n_0)^2 - B.q/n_0))";
    expectPublished(found, {
      rates: { "A.q": `-2*${rate}`, "B.q": rate },
      where: { "A.q": [0.2, 2], "B.q": [0.2, 2] },
      byValue: true,
    });
  });

  it("diffusion through a membrane (Fick): n_1' = -P*(n_1/V_1 - n_2/V_2)", () => {
    const found = derived(`
      param R_g = 8.314 J/mol/K
      param T = 300 K
      param c_0 = 1000 mol/m^3
      param V_1 = 2 L
      param V_2 = 3 L
      param P = 1e-6 m^3/s
      0  one : chemical
      0  two : chemical
      C  left  e = R_g*T*ln(q/(V_1*c_0))
      C  right e = R_g*T*ln(q/(V_2*c_0))
      1  through : chemical
      MR membrane f <- P*c_0*exp(two.e/(R_g*T))*(exp(e/(R_g*T)) - 1)
      one -> left
      two -> right
      one -> through -> two
      through -> membrane
    `);
    const flow = "(P*(left.q/V_1 - right.q/V_2))";
    expectPublished(found, {
      rates: { "left.q": `-${flow}`, "right.q": flow },
      where: { "left.q": [0.2, 2], "right.q": [0.2, 2] },
      byValue: true,
    });
  });
});
