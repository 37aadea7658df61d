import { describe, expect, it } from "vitest";
import { Analysis } from "../../grammar/analysis/analyse.ts";
import { modeSensitivities } from "../../grammar/analysis/sensitivity.ts";
import { staticGains } from "../../grammar/analysis/static-gains.ts";
import { transferOf } from "../../grammar/analysis/transfer.ts";
import type { StateModel } from "../../grammar/equations/model.ts";
import { derive } from "../equations/read.ts";

function linearOf(model: StateModel) {
  const { linear } = new Analysis(model);
  if (linear.kind === "none") throw new Error(linear.reason);
  return linear;
}

describe("inputs whose rate occurs", () => {
  // A capacitor straight at a source: i = C1·u̇ + (u - q/C2)/R.
  const model = derive(`
    param C1 = 2 mF
    param C2 = 3 mF
    param R = 5 ohm
    input u : V
    Se supply e = u
    0 rail : electrical
    C C1
    1 branch : electrical
    R R
    C C2
    supply -> rail -> C1
    rail -> branch -> R, C2
    output i = supply.f`);
  const linear = linearOf(model);

  it("have their own matrices: y = C·x + D·u + G·u̇", () => {
    expect(linear.inputs[0].differentiated).toBe(true);
    expect([linear.A, linear.B, linear.C, linear.D, linear.G]).toEqual([
      [[expect.closeTo(-1 / (5 * 3e-3), 10)]],
      [[0.2]],
      [[expect.closeTo(-1 / (5 * 3e-3), 10)]],
      [[0.2]],
      [[2e-3]],
    ]);
  });

  it("have a response that rises without end, and a zero more than poles", () => {
    const of = transferOf(linear, 0, 0);
    expect([of.poles.length, of.zeros.length, of.gain]).toEqual([1, 2, 2e-3]);
    const frequency = 40;
    const s = 2 * Math.PI * frequency;
    // Y = s·C1 + s·C2/(1 + s·R·C2)
    const t = s * 5 * 3e-3;
    const branch = { re: (s * 3e-3 * t) / (1 + t * t), im: (s * 3e-3) / (1 + t * t) };
    const admittance = { re: branch.re, im: branch.im + s * 2e-3 };
    const answer = of.response(frequency);
    expect(answer?.magnitude).toBeCloseTo(Math.hypot(admittance.re, admittance.im), 12);
    expect(answer?.phase).toBeCloseTo(Math.atan2(admittance.im, admittance.re), 12);
    expect(of.atRest).toBeCloseTo(0, 14);
  });
});

describe("sensitivity of the modes", () => {
  it("of a mass on a spring and a damper follows from ω₀ = √(k/m), ζ = d/(2√(k·m))", () => {
    const model = derive(`
      param m = 2 kg
      param d = 3 N*s/m
      param k = 50 N/m
      param twice = 2*k
      input F : N
      Se push e = F
      1 mass : translation
      I m
      R d
      C k
      push -> mass -> m, d, k`);
    const zeta = 0.15;
    const expected: Record<string, [number, number]> = {
      m: [-1 / 2, -zeta / 2],
      d: [0, zeta],
      k: [1 / 2, -zeta / 2],
    };
    const found = modeSensitivities(model);
    expect(found.map(({ parameter }) => parameter).sort()).toEqual(["d", "k", "m"]);
    for (const { parameter, modes } of found) {
      expect(modes[0]?.frequency).toBeCloseTo(expected[parameter][0], 7);
      expect(modes[0]?.damping).toBeCloseTo(expected[parameter][1], 7);
    }
  });

  it("carries what a parameter does to the operating point", () => {
    // Quadratic drag under a constant push: λ = -2·√(c·F)/m, so λ goes with √c though ∂A/∂c alone would go with c.
    const model = derive(`
      param c = 4 kg/m
      param m = 2 kg
      input F : N = 36 N
      Se push e = F
      1 body : translation
      I m
      R drag e = c*f*abs(f)
      push -> body -> m, drag`);
    const c = modeSensitivities(model).find(({ parameter }) => parameter === "c");
    expect(c?.modes[0]?.frequency).toBeCloseTo(0.5, 7);
  });
});

describe("gains at rest", () => {
  it("are finite across what is conserved, and infinite where an input fills it", () => {
    const model = derive(`
      input i : A
      Sf source f = i
      0 left : electrical
      C c1 e = q/(2 F)
      1 wire : electrical
      R r e = 3 ohm * f
      0 right : electrical
      C c2 e = q/(1 F)
      source -> left -> wire -> right
      left -> c1
      wire -> r
      right -> c2
      output drop = r.e
      output volts = c1.e`);
    expect(staticGains(linearOf(model))).toEqual([[expect.closeTo(1, 12)], [null]]);
  });
});
