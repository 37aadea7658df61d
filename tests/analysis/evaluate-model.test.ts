import { describe, expect, it } from "vitest";
import { Analysis } from "../../grammar/analysis/analyse.ts";
import { equilibrium } from "../../grammar/analysis/equilibrium.ts";
import { evaluateModel } from "../../grammar/analysis/evaluate-model.ts";
import { linearise } from "../../grammar/analysis/linearise.ts";
import { type Point, startPoint } from "../../grammar/analysis/point.ts";
import type { StateModel } from "../../grammar/equations/model.ts";
import { derive } from "../equations/read.ts";

/** A diode behind a resistor charges a capacitor: the exponential law is turned round numerically. */
const DIODE = `
  param R = 100 ohm
  param I_0 = 1e-9 A
  param V_T = 26 mV
  input u : V = 2 V
  Se supply e = u
  1 path : electrical
  R R
  R diode f = I_0*(exp(e/V_T) - 1)
  0 node : electrical
  C store e = q/(1 uF)
  R load e = 1 kohm * f
  supply -> path -> R, diode
  path -> node -> store, load
  output current = path.f
  output drop = diode.e`;

/** More inertias on one rigid shaft with sliding ratios than are solved for on paper: M(θ)·ẋ = h stays as it is. */
function cranks(count: number): string {
  const lines = [
    "input T : N*m = 3 N*m",
    "Se motor e = T",
    "1 shaft : rotation",
    "motor -> shaft",
    "track θ = shaft.f from 0.4 rad",
  ];
  for (let i = 1; i <= count; i += 1) {
    lines.push(
      `MTF crank${i} out.f = ${(0.1 + 0.01 * i).toFixed(2)} m * sin(θ + ${i} rad)*in.f`,
      `1 slide${i} : translation`,
      `I mass${i} f = p/(${i} kg)`,
      `R drag${i} e = 2 N*s/m * f`,
      `shaft -> crank${i} -> slide${i} -> mass${i}, drag${i}`,
    );
  }
  return lines.join("\n");
}

function at(model: StateModel, changes: Partial<Point>) {
  const evaluation = evaluateModel(model, { ...startPoint(model), ...changes });
  if (evaluation.kind === "none") throw new Error(evaluation.reason);
  return evaluation;
}

/** Rates by central differences of the evaluated rates: an independent way to A. */
function differences(model: StateModel, point: Point): number[][] {
  const step = 1e-6;
  const columns = point.states.map((value, j) => {
    const size = step * Math.max(1e-3, Math.abs(value));
    const [low, high] = [-size, size].map(
      (by) => at(model, { ...point, states: point.states.map((x, i) => (i === j ? x + by : x)) }).rates,
    );
    return high.map((rate, i) => (rate - low[i]) / (2 * size));
  });
  return point.states.map((_, i) => columns.map((column) => column[i]));
}

describe("laws that are solved numerically", () => {
  const model = derive(DIODE);
  const valueOf = (point: Partial<Point>) => {
    const { valueOf: of } = at(model, point);
    return model.outputs.map(({ value }) => of(value));
  };

  it("hold at the point: u = R·i + e + q/C with i = I_0·(exp(e/V_T) - 1)", () => {
    for (const [q, u] of [
      [0, 2],
      [1e-6, 2],
      [1e-6, -3],
      [0, 0.3],
    ]) {
      const [current, drop] = valueOf({ states: [q], inputs: [u] });
      expect(100 * current + drop + q / 1e-6).toBeCloseTo(u, 10);
      expect(current).toBeCloseTo(1e-9 * Math.expm1(drop / 0.026), 12);
    }
  });

  it("have slopes: A is that of differences, and small-signal conductances add up", () => {
    const found = equilibrium(model);
    if (found.kind === "none") throw new Error(found.reason);
    const linear = linearise(model, found.point);
    if (linear.kind === "none") throw new Error(linear.reason);
    const [current] = model.outputs.map(({ value }) => found.evaluated.valueOf(value));
    const series = 100 + 0.026 / (current + 1e-9);
    expect(linear.A[0][0] * 1e-6).toBeCloseTo(-(1 / series + 1 / 1000), 9);
    expect(linear.B[0][0]).toBeCloseTo(1 / series, 9);
    const [[slope]] = differences(model, found.point);
    expect(slope / linear.A[0][0]).toBeCloseTo(1, 5);
  });
});

describe("parameters other than the text has", () => {
  it("carry those that are defined by them along", () => {
    const model = derive(`
      param m = 2 kg
      param k = 8*m/(1 s^2)
      input F : N = 16 N
      Se push e = F
      1 mass : translation
      I m
      C k
      R d e = 1 N*s/m * f
      push -> mass -> m, k, d
      output x = k.q`);
    const found = equilibrium(model, { parameters: new Map([["m", 4]]) });
    if (found.kind === "none") throw new Error(found.reason);
    expect(found.point.states[model.states.findIndex(({ name }) => name === "k.q")]).toBeCloseTo(0.5, 12);
  });
});

describe("dependent stores", () => {
  it("give power that closes: what the source supplies is stored and lost", () => {
    const model = derive(cranks(4));
    const point: Partial<Point> = { inputs: [3] };
    const states = model.states.map(({ name }, i) => (name === "θ" ? 0.7 : 0.2 + 0.1 * i));
    const { valueOf } = at(model, { ...point, states });
    const { bonds, nodes } = model.causal.graph;
    const ends = bonds.map(({ from, to }, i) => ({
      from: nodes[from].kind,
      to: nodes[to].kind,
      power:
        valueOf(model.efforts[i] ?? (model.efforts[0] as never)) *
        valueOf(model.flows[i] ?? (model.flows[0] as never)),
    }));
    const supplied = ends.filter(({ from }) => from === "Se").reduce((sum, { power }) => sum + power, 0);
    const taken = ends
      .filter(({ to }) => to === "I" || to === "R")
      .reduce((sum, { power }) => sum + power, 0);
    expect(taken).toBeCloseTo(supplied, 10);
  });
});

describe("equilibrium", () => {
  it("of a nonlinear model from its start: a tank with an orifice", () => {
    const model = derive(
      `
      input Q : L/min = 12 L/min
      Sf pump f = Q
      0 tank : hydraulic
      C level e = q/(1e-7 m^3/Pa)
      R orifice f = 2e-6 m^3/s * sign(e/(1 Pa))*sqrt(abs(e/(1 Pa)))
      pump -> tank -> level, orifice
      output pressure = tank.e`,
    );
    const found = equilibrium(model);
    if (found.kind === "none") throw new Error(found.reason);
    expect(found.evaluated.valueOf(model.outputs[0].value)).toBeCloseTo((2e-4 / 2e-6) ** 2, 5);
  });

  it("keeps the charge that a circuit conserves: two capacitors through a resistor", () => {
    const model = derive(`
      0 left : electrical
      C c1 e = q/(2 F)
      1 wire : electrical
      R r e = 3 ohm * f
      0 right : electrical
      C c2 e = q/(1 F)
      left -> wire -> right
      left -> c1
      wire -> r
      right -> c2
      start c1.q = 6 A*s`);
    const found = equilibrium(model);
    if (found.kind === "none") throw new Error(found.reason);
    expect(found.point.states).toEqual([expect.closeTo(4, 12), expect.closeTo(2, 12)]);
  });

  it("is refused where a constant drives something on; what coasts rests in its state", () => {
    const mass = (start: string, push: string) =>
      derive(`
      input F : N = ${push}
      Se push e = F
      1 mass : translation
      I body f = p/(2 kg)
      push -> mass -> body
      ${start}`);
    expect(equilibrium(mass("", "0 N")).kind).toBe("found");
    const driven = equilibrium(mass("", "5 N"));
    expect(driven.kind === "none" && driven.reason).toBe(
      "Nothing brings the rate of `body.p` to zero: it stays 5 N.",
    );
    const coasting = equilibrium(mass("start body.p = 4 N*s", "0 N"));
    expect(coasting.kind === "found" && coasting.point.states).toEqual([4]);
  });

  it("is found from a start at which slopes vanish, or across a gap: a mass falls onto a stop", () => {
    const model = derive(
      `
      param k = 1 MN/m
      1 mass : translation
      I body f = p/(2 kg)
      Se weight e = -(2 kg)*g0
      R air e = 1 N*s^2/m^2*f*abs(f)
      C stop e = -k*max(-q - 0.1 m, 0 m)
      mass -> body, air, stop
      weight -> mass`.replace("1 N*s^2/m^2*f", "1 N*s^2/m^2 * f"),
    );
    const found = equilibrium(model);
    if (found.kind === "none") throw new Error(found.reason);
    const q = found.point.states[model.states.findIndex(({ name }) => name === "stop.q")];
    expect(q).toBeCloseTo(-0.1 - (2 * 9.80665) / 1e6, 10);
  });

  it("leaves a track that only records where it is", () => {
    const model = derive(`
      input T : N*m = 2 N*m
      Se motor e = T
      1 shaft : rotation
      I J f = p/(0.1 kg*m^2)
      R b e = 0.5 N*m*s/rad * f
      motor -> shaft -> J, b
      track θ = shaft.f from 0.3 rad
      output angle = θ`);
    const analysis = new Analysis(model);
    expect(analysis.operatingPoint.equilibrium).toBe(true);
    expect(analysis.operatingPoint.point.states[model.states.findIndex(({ name }) => name === "θ")]).toBe(
      0.3,
    );
    expect(analysis.modes?.eigenvalues).toEqual([{ re: -5, im: 0 }]);
  });

  it("says that there is none where time itself drives the rates", () => {
    const model = derive(`
      Se motor e = 1 N*m * sin(3 rad/s * time)
      1 shaft : rotation
      I J f = p/(0.1 kg*m^2)
      R b e = 0.5 N*m*s/rad * f
      motor -> shaft -> J, b`);
    const found = equilibrium(model);
    expect(found.kind === "none" && found.reason).toMatch(/changes with time itself/);
    expect(new Analysis(model).sameSlopesEverywhere([])).toBe(true);
  });
});
