import { describe, expect, it } from "vitest";
import { type Evaluated, evaluateModel } from "../../grammar/analysis/evaluate-model.ts";
import type { StateModel } from "../../grammar/equations/model.ts";
import { checkFile } from "../../grammar/pipeline.ts";
import { fileSet } from "../../grammar/source/text.ts";

const NETWORK = `
  input u : V
  param R = 1 ohm
  param V_0 = 1 V
  param I_0 = 1 A
  param C_c = 2 F
  Se supply e = u
  1 a : electrical
  0 b : electrical
  1 c : electrical
  R r1 e = R*f + V_0*sinh(f/I_0)
  R r2 f = I_0*sinh(e/V_0) + e/R
  R r3 e = 3*V_0*sinh(f/I_0) + R*f
  C cc e = q/C_c
  supply -> a -> r1
  a -> b -> r2
  b -> c -> r3`;

function check(body: string) {
  const report = checkFile(fileSet([["m.wright", `notation 1\nsystem M {${body}\n}\n`]]), "m.wright");
  const [{ model }] = report.systems;
  if (model === null) throw new Error(report.findings.map(({ message }) => message).join("\n"));
  return { model, findings: report.findings.map(({ name }) => name) };
}

function at(model: StateModel, states: readonly number[], u: number, uRate = 0): Evaluated {
  const point = { states, inputs: [u], inputRates: [uRate], parameters: new Map(), time: 0 };
  const found = evaluateModel(model, point);
  if (found.kind === "none") throw new Error(found.reason);
  return found;
}

describe("rates through loops that are solved numerically", () => {
  it("a store that follows two coupled unknowns moves as they do", () => {
    const { model, findings } = check(`${NETWORK}
  0 d : electrical
  c -> d -> cc
  param k = 2 m/s/A
  param m = 3 kg
  Sf pull f = k*r3.f
  1 rail : translation
  I body f = p/m
  pull -> rail -> body`);
    expect(findings).toContain("input-derivative");
    expect(model.inputs[0].differentiated).toBe(true);
    const [body] = model.dependent;
    const [q, u, uRate, step] = [0.7, 1.9, -0.6, 1e-5];
    const here = at(model, [q], u, uRate);
    const value = (sign: number) =>
      at(model, [q + sign * step * here.rates[0]], u + sign * step * uRate).valueOf(body.value);
    expect(here.valueOf(body.rate)).toBeCloseTo((value(1) - value(-1)) / (2 * step), 6);
  });

  it("a stroke demanded on a store behind such a loop changes no rate", () => {
    const free = check(`${NETWORK}\n  0 d : electrical\n  c -> d -> cc\n  R r4 e = 2*R*f\n  d -> r4`);
    const held = check(`${NETWORK}\n  0 d : electrical\n  c -> d ->| cc\n  R r4 e = 2*R*f\n  d -> r4`);
    expect(free.model.states.map(({ name }) => name)).toEqual(held.model.states.map(({ name }) => name));
    for (const [q, u] of [
      [0.3, 1],
      [-2, 1.5],
      [1, -3],
    ]) {
      expect(at(held.model, [q], u).rates[0]).toBeCloseTo(at(free.model, [q], u).rates[0], 9);
    }
  });

  it("a rate that stands within a law that can't be turned round solves that law", () => {
    const { model, findings } = check(`
  input F : N
  param m = 2 kg
  param F_s = 1 N
  param v_s = 1 m/s
  Se push e = F
  1 rail : translation
  I body f = p/m
  R slide f <- v_s*sinh(e/F_s)
  push -> rail -> body, slide`);
    expect(findings).toContain("implicit-equation");
    expect(model.states).toHaveLength(1);
    // f = v_s*sinh(e/F_s) with e = F - p' and f = p/m: p' = F - F_s*asinh(p/(m*v_s)).
    expect(at(model, [3], 0.4).rates[0]).toBeCloseTo(0.4 - Math.asinh(1.5), 9);
  });
});
