import { describe, expect, it } from "vitest";
import { Analysis } from "../../grammar/analysis/analyse.ts";
import type { LinearModel } from "../../grammar/analysis/linearise.ts";
import { modesOf } from "../../grammar/analysis/modes.ts";
import { controllability, observability } from "../../grammar/analysis/reach.ts";
import { bandwidthOf, type Transfer, transferOf } from "../../grammar/analysis/transfer.ts";
import { derive } from "../equations/read.ts";

function linear(statements: string): LinearModel {
  const found = new Analysis(derive(statements)).linear;
  if (found.kind === "none") throw new Error(found.reason);
  return found;
}

function transfer(statements: string, input: string, output: string): Transfer {
  const model = linear(statements);
  const of = (list: readonly { name: string }[], name: string) => list.findIndex((one) => one.name === name);
  return transferOf(model, of(model.inputs, input), of(model.outputs, output));
}

const hertz = (speed: number) => speed / (2 * Math.PI);
const degrees = (angle: number) => (angle * 180) / Math.PI;

/** One mass on a spring and a damper: s² + 2ζω₀s + ω₀² (Ogata, Modern Control Engineering, 5-3; recalled). */
const OSCILLATOR = (m: number, d: number, k: number) => `
  input F : N
  Se push e = F
  1 mass : translation
  I body f = p/(${m} kg)
  R drag e = ${d} N*s/m * f
  C spring e = ${k} N/m * q
  push -> mass -> body, drag, spring
  output x = spring.q
  output v = mass.f`;

describe("second order", () => {
  it.each([
    [2, 3, 50],
    [1, 0.002, 1],
    [4, 40, 100],
  ])("m = %d kg, d = %d N·s/m, k = %d N/m: ω₀ = √(k/m), ζ = d/(2√(k·m))", (m, d, k) => {
    const { modes, stable } = modesOf(linear(OSCILLATOR(m, d, k)));
    expect(stable).toBe(true);
    const zeta = d / (2 * Math.sqrt(k * m));
    if (zeta < 1) {
      expect(modes).toHaveLength(1);
      expect(modes[0].frequency).toBeCloseTo(hertz(Math.sqrt(k / m)), 12);
      expect(modes[0].damping).toBeCloseTo(zeta, 12);
      expect(modes[0].timeConstant).toBeCloseTo((2 * m) / d, 8);
      expect(modes[0].participation?.map((share) => share.toFixed(6))).toEqual(["0.500000", "0.500000"]);
    } else {
      // A double pole has no second vector of its own, and rounding parts it by the square root of eps.
      expect(modes.map(({ frequency }) => frequency)).toEqual([
        expect.closeTo(hertz(5), 6),
        expect.closeTo(hertz(5), 6),
      ]);
    }
  });

  it("has its half-power bandwidth where (1 - r²)² + (2ζr)² = 2", () => {
    const [m, d, k] = [2, 3, 50];
    const zeta = d / (2 * Math.sqrt(k * m));
    const of = transfer(OSCILLATOR(m, d, k), "F", "x");
    const r = Math.sqrt(1 - 2 * zeta ** 2 + Math.sqrt((1 - 2 * zeta ** 2) ** 2 + 1));
    expect(bandwidthOf(of)).toBeCloseTo(hertz(r * Math.sqrt(k / m)), 10);
    expect(of.atRest).toBeCloseTo(1 / k, 14);
    expect(of.zeros).toEqual([]);
    expect(degrees(of.response(hertz(5))?.phase ?? 0)).toBeCloseTo(-90, 9);
    expect(bandwidthOf(transfer(OSCILLATOR(m, d, k), "F", "v"))).toBeNull();
  });

  it("without a damper is not stable, and its eigenvalues have no real part", () => {
    const { modes, stable } = modesOf(linear(OSCILLATOR(2, 0, 50)));
    expect([stable, modes[0].damping, modes[0].timeConstant]).toEqual([false, 0, null]);
  });
});

/** Two masses on one spring, pushed at the first (Ewins, Modal Testing, 2; recalled). */
const TWO_MASSES = `
  input F : N
  Se push e = F
  1 first : translation
  I m1 f = p/(3 kg)
  0 between : translation
  C spring e = 4000 N/m * q
  1 second : translation
  I m2 f = p/(5 kg)
  push -> first -> m1
  first -> between -> second -> m2
  between -> spring
  output v1 = first.f
  output v2 = second.f`;

describe("two masses on a spring", () => {
  it("resonates at √(k·(1/m1 + 1/m2)), with an antiresonance of the pushed mass at √(k/m2)", () => {
    const of = transfer(TWO_MASSES, "F", "v1");
    const resonance = Math.sqrt(4000 * (1 / 3 + 1 / 5));
    const antiresonance = Math.sqrt(4000 / 5);
    const speeds = (values: readonly { re: number; im: number }[]) =>
      values.map(({ im }) => im).sort((a, b) => a - b);
    expect(speeds(of.poles)).toEqual([expect.closeTo(-resonance, 10), 0, expect.closeTo(resonance, 10)]);
    expect(speeds(of.zeros)).toEqual([expect.closeTo(-antiresonance, 10), expect.closeTo(antiresonance, 10)]);
    expect(of.response(hertz(antiresonance))?.magnitude).toBeLessThan(1e-15);
    expect(transfer(TWO_MASSES, "F", "v2").zeros).toEqual([]);
    // A free body runs away under a constant push.
    expect(of.atRest).toBeNull();
  });

  it("has a phase without jumps: -90° of a mass, +90° between zero and pole, -90° again", () => {
    const { response } = transfer(TWO_MASSES, "F", "v1");
    expect([1, 5.5, 20].map((frequency) => Math.round(degrees(response(frequency)?.phase ?? 0)))).toEqual([
      -90, 90, -90,
    ]);
    const far = transfer(TWO_MASSES, "F", "v2");
    expect([1, 20].map((frequency) => Math.round(degrees(far.response(frequency)?.phase ?? 0)))).toEqual([
      -90, -270,
    ]);
  });
});

/** Gillespie, Fundamentals of Vehicle Dynamics, 5: 1/4 of a car; the closed form of the undamped modes. */
const QUARTER_CAR = (d: number) => `
  param m_s = 250 kg
  param m_u = 35 kg
  param k_s = 16 kN/m
  param k_t = 160 kN/m
  input road : m/s
  Sf ground f = road
  0 tyre : translation
  C k_t
  1 wheel : translation
  I m_u
  0 strut : translation
  1 stretch : translation
  C k_s
  R damper e = ${d} N*s/m * f
  1 body : translation
  I m_s
  ground -> tyre -> wheel -> m_u
  tyre -> k_t
  wheel -> strut -> body -> m_s
  strut -> stretch -> k_s, damper
  output v_s = body.f`;

describe("quarter car", () => {
  it("without a damper has the frequencies that its characteristic polynomial has", () => {
    const [ms, mu, ks, kt] = [250, 35, 16e3, 160e3];
    const a = ms * mu;
    const b = -(ms * (ks + kt) + mu * ks);
    const c = ks * kt;
    const squares = [
      (-b - Math.sqrt(b * b - 4 * a * c)) / (2 * a),
      (-b + Math.sqrt(b * b - 4 * a * c)) / (2 * a),
    ];
    const { modes } = modesOf(linear(QUARTER_CAR(0)));
    expect(modes.map(({ frequency }) => frequency)).toEqual(
      squares.map((w) => expect.closeTo(hertz(Math.sqrt(w)), 10)),
    );
    // Body bounce near 1.2 Hz, wheel hop near 11 Hz.
    expect(modes.map(({ frequency }) => Math.round(frequency * 10) / 10)).toEqual([1.2, 11.3]);
  });

  it("passes slow road speeds on as they are, and is stable with a damper", () => {
    const text = QUARTER_CAR(1200);
    expect(modesOf(linear(text)).stable).toBe(true);
    expect(transfer(text, "road", "v_s").atRest).toBeCloseTo(1, 12);
    const { modes } = modesOf(linear(text));
    const shares = modes[0].participation ?? [];
    expect(shares.reduce((sum, share) => sum + share, 0)).toBeCloseTo(1, 12);
  });
});

/** Armature and rotor: poles of (L·s + R)(J·s + b) + k² (Franklin, Powell, Emami-Naeini, 2.3; recalled). */
const MOTOR = `
  param R_a = 0.5 ohm
  param L_a = 1.5 mH
  param k = 0.05 N*m/A
  param J = 2.5e-4 kg*m^2
  param b = 1e-4 N*m*s/rad
  input u : V
  input M : N*m
  Se supply e = u
  1 armature : electrical
  R R_a
  I L_a
  GY machine out.e = k*in.f
  1 shaft : rotation
  I J
  R b
  Se load e = M
  supply -> armature -> R_a, L_a
  armature -> machine -> shaft -> J, b
  shaft -> load
  output speed = shaft.f
  output current = armature.f`;

describe("DC motor", () => {
  it("has the time constants, gains and zero of its closed form", () => {
    const [R, L, k, J, b] = [0.5, 1.5e-3, 0.05, 2.5e-4, 1e-4];
    const half = (L * b + R * J) / (2 * L * J);
    const root = Math.sqrt(half ** 2 - (R * b + k * k) / (L * J));
    const { modes } = modesOf(linear(MOTOR));
    expect(modes.map(({ timeConstant }) => timeConstant)).toEqual([
      expect.closeTo(1 / (half - root), 12),
      expect.closeTo(1 / (half + root), 12),
    ]);
    expect(transfer(MOTOR, "u", "speed").atRest).toBeCloseTo(k / (R * b + k * k), 10);
    expect(transfer(MOTOR, "M", "speed").atRest).toBeCloseTo(-R / (R * b + k * k), 9);
    expect(transfer(MOTOR, "u", "current").zeros).toEqual([{ re: expect.closeTo(-b / J, 12), im: 0 }]);
  });

  it("starts at half a turn of phase where more of the input means less of the output", () => {
    const { response } = transfer(MOTOR, "M", "speed");
    expect(degrees(response(1e-4)?.phase ?? 0)).toBeCloseTo(180, 1);
  });
});

/** R1 beside C, over R2: (1 + R1·C·s)/(1 + R1·R2/(R1 + R2)·C·s)·R2/(R1 + R2) (Ogata, 7-11; recalled). */
const LEAD = `
  input u : V
  Se supply e = u
  1 path : electrical
  0 upper : electrical
  R R1 e = 90 kohm * f
  C C1 e = q/(1 uF)
  R R2 f = e/(10 kohm)
  supply -> path -> upper -> R1, C1
  path -> R2
  output y = R2.e`;

describe("lead network", () => {
  it("has its greatest lead, asin((1 - α)/(1 + α)), at the mean of its corners", () => {
    const of = transfer(LEAD, "u", "y");
    expect(of.atRest).toBeCloseTo(0.1, 12);
    expect(of.zeros[0].re).toBeCloseTo(-1 / 0.09, 9);
    expect(of.poles[0].re).toBeCloseTo(-1 / 0.009, 8);
    const mean = hertz(1 / (0.09 * Math.sqrt(0.1)));
    const answer = of.response(mean);
    expect(degrees(answer?.phase ?? 0)).toBeCloseTo(degrees(Math.asin(0.9 / 1.1)), 9);
    expect(answer?.magnitude).toBeCloseTo(Math.sqrt(0.1), 10);
  });
});

/** Two equal RC branches at one source, or a bridge in balance (Kailath, Linear Systems, 2.3; recalled). */
const BRANCHES = (c2: number) => `
  input u : V
  Se supply e = u
  0 rail : electrical
  1 a : electrical
  R ra e = 1000 ohm * f
  C ca e = q/(1 uF)
  1 b : electrical
  R rb e = 2000 ohm * f
  C cb e = q/(${c2} uF)
  supply -> rail -> a, b
  a -> ra, ca
  b -> rb, cb
  output y = ca.e
  output sum = ca.e + cb.e`;

describe("controllability and observability", () => {
  it("are lost where a pole and a zero cancel: two branches with one time constant", () => {
    const equal = linear(BRANCHES(0.5));
    const { rank, missing } = controllability(equal);
    expect(rank).toBe(1);
    // What the source does to q_a and q_b has one direction: q_a/R_b... moves twice q_b.
    expect(missing[0].map(({ state }) => state)).toEqual(["ca.q", "cb.q"]);
    expect(controllability(linear(BRANCHES(0.4))).full).toBe(true);
    const of = transferOf(equal, 0, 1);
    expect([of.poles.length, of.zeros.length]).toEqual([1, 0]);
  });

  it("name the state that an output does not see", () => {
    const model = linear(BRANCHES(0.4));
    const only = { ...model, C: [model.C[0]], D: [model.D[0]], G: [model.G[0]], outputs: [model.outputs[0]] };
    const one = observability(model.outputs[0].name === "y" ? only : model);
    expect(one.rank).toBe(1);
    expect(one.missing).toEqual([[{ state: "cb.q", weight: 1 }]]);
    expect(observability(model).full).toBe(true);
  });
});
