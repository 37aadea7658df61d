import { describe, expect, it } from "vitest";
import { derivative } from "../../grammar/symbolic/derivative.ts";
import { equivalent } from "../../grammar/symbolic/rational-form.ts";
import { derived, expectPublished } from "./derived.ts";

/** E. Torricelli: De motu gravium, 1643: a jet leaves with v = sqrt(2*g*h). Recalled from memory. */
it("Torricelli's outflow: A*h' = -c_d*A_o*sqrt(2*g*h), whatever the density", () => {
  const found = derived(`
    param A = 0.4 m^2
    param A_o = 3 cm^2
    param c_d = 0.62
    param rho = 1000 kg/m^3
    0  bottom : hydraulic
    C  tank   e = rho*g0*q/A
    R  hole   f = c_d*A_o*sign(e)*sqrt(2*abs(e)/rho)
    bottom -> tank, hole
    output h = tank.q/A
    output v = sqrt(2*bottom.e/rho)
  `);
  expectPublished(found, {
    rates: { "tank.q": "-c_d*A_o*sqrt(2*g0*(tank.q/A))" },
    outputs: { h: "tank.q/A", v: "sqrt(2*g0*(tank.q/A))" },
    where: { "tank.q": [0.1, 3] },
    byValue: true,
  });
});

/** H. E. Merritt: Hydraulic Control Systems, Wiley 1967, chapters 3, 4 and 6. Recalled from memory. */
describe("hydraulic drives", () => {
  const CYLINDER = `
    param beta = 1.2e9 Pa
    param A = 20 cm^2
    param V = 1.5 L
    param M = 900 kg
    input Q : m^3/s
    Sf valve_1 f = Q
    Sf valve_2 f = -Q
    0  left  : hydraulic
    0  right : hydraulic
    C  oil_1 e = 2*beta*q/V
    C  oil_2 e = 2*beta*q/V
    TF push  out.e = A*in.e
    TF back  out.e = -A*in.e
    1  rod : translation
    I  mass f = p/M
    valve_1 -> left  -> oil_1
    valve_2 -> right -> oil_2
    left  -> push -> rod
    right -> back -> rod
    rod -> mass
  `;

  it("cylinder at half stroke, both chambers V/2: M*v' = A*(p_1 - p_2), p' = 2*beta/V*(Q - A*v)", () => {
    expectPublished(derived(CYLINDER), {
      rates: {
        "oil_1.q": "Q - A*mass.p/M",
        "oil_2.q": "-Q + A*mass.p/M",
        "mass.p": "A*(2*beta*oil_1.q/V - 2*beta*oil_2.q/V)",
      },
    });
  });

  it("hydraulic natural frequency w^2 = 4*beta*A^2/(V*M), from the equations and as a mode", () => {
    const { model } = derived(`${CYLINDER}
      expect mode(1 Hz*(sqrt(4*beta*A^2/(V*M))*1 s)/(2*pi)) within 0.0001 %
    `);
    const { pool } = model.causal.graph;
    const slope = (rate: string, state: string) => {
      const symbol = model.states.find(({ name }) => name === state)?.symbol;
      const equation = model.equations.find((one) => one.state === rate);
      if (symbol === undefined || equation === undefined) throw new Error(`no ${state} or ${rate}`);
      return derivative(pool, equation.rate, symbol);
    };
    const square = pool.negate(
      pool.sum(
        ...["oil_1.q", "oil_2.q"].map((oil) => pool.product(slope("mass.p", oil), slope(oil, "mass.p"))),
      ),
    );
    const [A, M, V, beta] = ["A", "M", "V", "beta"].map((name) => pool.symbol("parameter", name));
    const published = pool.divide(
      pool.product(pool.number(4), beta, pool.power(A, pool.number(2))),
      pool.product(V, M),
    );
    expect(equivalent(pool, square, published)).toBe(true);
  });

  it("valve-controlled cylinder: load flow c_d*w*x*sqrt((p_s - p)/rho) into one chamber", () => {
    const found = derived(`
      param c_d = 0.61
      param w = 20 mm
      param rho = 870 kg/m^3
      param p_s = 210 bar
      param beta = 1.2e9 Pa
      param V = 0.8 L
      param A = 20 cm^2
      param M = 900 kg
      input x : m
      input F : N
      Se supply e = p_s
      1  port_ : hydraulic
      MR valve  f = c_d*w*x*sign(e)*sqrt(2*abs(e)/rho)
      0  chamber : hydraulic
      C  oil    e = beta*q/V
      TF piston out.e = A*in.e
      1  rod : translation
      I  mass   f = p/M
      Se load   e = F
      supply -> port_ -> valve
      port_ -> chamber -> oil
      chamber -> piston -> rod -> mass
      rod -> load
    `);
    const drop = "(p_s - beta*oil.q/V)";
    expectPublished(found, {
      rates: {
        "oil.q": `c_d*w*x*sign(${drop})*sqrt(2*abs(${drop})/rho) - A*mass.p/M`,
        "mass.p": "A*beta*oil.q/V - F",
      },
    });
  });

  it("pump-controlled motor: V/beta*p' = a*D_p*w_p - C_l*p - D_m*w, J*w' = D_m*p - b*w - T", () => {
    const found = derived(`
      param D_p = 12e-6 m^3/rad
      param D_m = 20e-6 m^3/rad
      param C_l = 2e-12 m^3/s/Pa
      param V = 0.9 L
      param beta = 1.1e9 Pa
      param J = 0.6 kg*m^2
      param b = 0.05 N*m*s/rad
      input w_p : rad/s
      input a : 1
      input T : N*m
      Sf  engine f = w_p
      1   drive  : rotation
      MTF pump   out.f = a*D_p*in.f
      0   line   : hydraulic
      C   oil    e = beta*q/V
      R   leak   f = C_l*e
      TF  motor  in.f = D_m*out.f
      1   shaft  : rotation
      I   J
      R   bearing e = b*f
      Se  load   e = T
      engine -> drive -> pump -> line -> oil, leak
      line -> motor -> shaft -> J, bearing
      shaft -> load
      output engine_torque = pump.in.e
    `);
    expectPublished(found, {
      rates: {
        "oil.q": "a*D_p*w_p - C_l*beta*oil.q/V - D_m*J.p/J",
        "J.p": "D_m*beta*oil.q/V - b*J.p/J - T",
      },
      outputs: { engine_torque: "a*D_p*beta*oil.q/V" },
    });
  });
});

/** H. E. Merritt: Hydraulic Control Systems (as above): a polytropic gas, p*V^n = p_0*V_0^n. Recalled from memory. */
it("accumulator with a gas cushion behind a throttle", () => {
  const found = derived(`
    param p_0 = 90 bar
    param V_0 = 4 L
    param n = 1.2
    param R_t = 2e9 Pa*s/m^3
    input Q : m^3/s
    Sf pump f = Q
    1  neck : hydraulic
    R  R_t
    C  gas e = p_0*(V_0/(V_0 - q))^n
    pump -> neck -> R_t, gas
    output pressure = pump.e
  `);
  expectPublished(found, {
    rates: { "gas.q": "Q" },
    outputs: { pressure: "R_t*Q + p_0*(V_0/(V_0 - gas.q))^n" },
    where: { "gas.q": [0, 0.25] },
  });
});

/**
 * E. B. Wylie, V. L. Streeter: Fluid Transients, McGraw-Hill 1978 (lumped elements of a pipe: inertance rho*l/S,
 * compliance V/beta, laminar resistance). Recalled from memory.
 */
it("pipe as a ladder of four equal elements, closed at its end", () => {
  const found = derived(`
    param L = 3e6 Pa*s^2/m^3
    param C = 5e-13 m^3/Pa
    param R = 2e7 Pa*s/m^3
    input p_in : Pa
    Se source e = p_in
    0  node[0] : hydraulic
    source -> node[0]
    repeat i = 1 .. 4 {
      1 pipe[i] : hydraulic
      I inertia[i] f = p/L
      R wall[i] e = R*f
      0 node[i] : hydraulic
      C oil[i] e = q/C
      node[i-1] -> pipe[i] -> inertia[i], wall[i]
      pipe[i] -> node[i] -> oil[i]
    }
  `);
  const rates: Record<string, string> = {};
  for (let i = 1; i <= 4; i += 1) {
    const before = i === 1 ? "p_in" : `oil[${i - 1}].q/C`;
    rates[`inertia[${i}].p`] = `${before} - R*inertia[${i}].p/L - oil[${i}].q/C`;
    rates[`oil[${i}].q`] = `inertia[${i}].p/L${i < 4 ? ` - inertia[${i + 1}].p/L` : ""}`;
  }
  expectPublished(found, { rates });
});
