import { describe, expect, test } from "vitest";
import { inCoEnergy } from "../../grammar/equations/coenergy.ts";
import { derivationOf } from "../../grammar/equations/derivation.ts";
import type { StateModel } from "../../grammar/equations/model.ts";
import { traceTerms } from "../../grammar/equations/trace.ts";
import { expressionText } from "../../grammar/writing/text.ts";
import { derive } from "./read.ts";

const motor = derive(`
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
  armature -> motor -> shaft -> rotor, bearing
  output torque = motor.out.e`);

const gears = derive(`
  param J1 = 0.1 kg*m^2
  param J2 = 4 kg*m^2
  param n = 1/8
  input T : N*m
  Se drive e = T
  1 fast : rotation
  I pinion f = p/J1
  TF gear out.f = n*in.f
  1 slow : rotation
  I wheel f = p/J2
  drive -> fast -> pinion
  fast -> gear -> slow -> wheel`);

function steps(model: StateModel, state: string): string[] {
  return derivationOf(model, state).map(
    ({ rule, left, right }) => `${rule}: ${expressionText(left)} = ${expressionText(right)}`,
  );
}

function lights(model: StateModel, what: string): Record<string, { bonds: string[]; nodes: string[] }> {
  const { bonds, nodes } = model.causal.graph;
  return Object.fromEntries(
    traceTerms(model, what).map((traced) => [
      expressionText(traced.term),
      {
        bonds: traced.bonds.map((i) => bonds[i].id).sort(),
        nodes: traced.nodes.map((i) => nodes[i].name).sort(),
      },
    ]),
  );
}

describe("derivation", () => {
  test("goes from the rate over the junction's sum and the laws to the collected form", () => {
    expect(steps(motor, "winding.p")).toEqual([
      "rate: winding.p' = armature->winding.e",
      "junction-sum: armature->winding.e = supply->armature.e - armature->R_a.e - armature->motor.e",
      "law: armature->R_a.e = R_a*armature->R_a.f",
      "gyrator: armature->motor.e = k_m*motor->shaft.f",
      "law: supply->armature.e = u",
      "junction-equal: armature->R_a.f = armature->winding.f",
      "junction-equal: motor->shaft.f = shaft->rotor.f",
      "law: armature->winding.f = winding.p/L_a",
      "law: shaft->rotor.f = rotor.p/J",
      "collected: winding.p' = u - k_m*rotor.p/J - R_a*winding.p/L_a",
    ]);
  });

  test("shows where the rate of a dependent store enters", () => {
    expect(steps(gears, "pinion.p")).toEqual(
      expect.arrayContaining([
        "rate: slow->wheel.e = wheel.p'",
        "law: wheel.p = J2*n*pinion.p/J1",
        "collected: pinion.p' = J1*T/(J1 + J2*n^2)",
      ]),
    );
  });

  test("puts in what a loop was solved to, instead of leading round in it", () => {
    const divider = derive(`
      input u : V
      param R_1 = 1 kohm
      param R_2 = 2 kohm
      param L = 1 H
      Se supply e = u
      1 loop : electrical
      0 tap : electrical
      R R_1
      R R_2
      I L
      supply -> loop -> tap -> R_2, L
      loop -> R_1`);
    const taken = steps(divider, "L.p");
    expect(taken).toContain("substitution: loop->R_1.f = (u + R_2*L.p/L)/(R_1 + R_2)");
    expect(taken.at(-1)).toBe("collected: L.p' = R_2*(u - R_1*L.p/L)/(R_1 + R_2)");
  });

  test("every step has its bonds and its place in the text", () => {
    for (const { bonds, span } of derivationOf(motor, "rotor.p")) {
      expect(bonds.length).toBeGreaterThan(0);
      expect(span.end).toBeGreaterThan(span.start);
    }
  });
});

describe("trace", () => {
  test("each summand lights the way it came, and no other", () => {
    expect(lights(motor, "winding.p")).toEqual({
      u: { bonds: ["armature->winding", "supply->armature"], nodes: ["armature", "supply", "winding"] },
      "-k_m*rotor.p/J": {
        bonds: ["armature->motor", "armature->winding", "motor->shaft", "shaft->rotor"],
        nodes: ["armature", "motor", "rotor", "shaft", "winding"],
      },
      "-R_a*winding.p/L_a": {
        bonds: ["armature->R_a", "armature->winding"],
        nodes: ["R_a", "armature", "winding"],
      },
    });
  });

  test("does so in co-energy variables too", () => {
    const view = inCoEnergy(motor);
    expect(lights(view, "rotor.f")).toEqual({
      [expressionText(view.equations[0].rate)]: {
        bonds: expect.arrayContaining(["motor->shaft", "shaft->bearing", "shaft->rotor"]),
        nodes: expect.arrayContaining(["bearing", "motor", "rotor"]),
      },
    });
  });

  test("of an output starts at what it reads", () => {
    expect(Object.values(lights(motor, "torque"))[0].bonds).toEqual([
      "armature->motor",
      "armature->winding",
      "motor->shaft",
    ]);
  });

  test("of an unknown name is empty", () => expect(traceTerms(motor, "nobody")).toEqual([]));
});
