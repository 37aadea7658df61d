import { readFileSync } from "node:fs";
import { describe, expect, it, test } from "vitest";
import { valueAt } from "../../grammar/simulation/trace.ts";
import { modelOf, runModel } from "./run-model.ts";

/** Complete elliptic integral K(k) by the arithmetic-geometric mean (Abramowitz, Stegun, 17.6; from memory). */
function ellipticK(k: number): number {
  let [a, b] = [1, Math.sqrt(1 - k * k)];
  for (let i = 0; i < 40; i += 1) [a, b] = [(a + b) / 2, Math.sqrt(a * b)];
  return Math.PI / (2 * a);
}

const PENDULUM = (angle: string) => `system P {
  param m = 0.7 kg
  param l = 1.3 m
  1 pivot : rotation
  I bob f = p/(m*l^2)
  C weight e = m*g0*l*sin(q)
  pivot -> bob, weight
  start weight.q = ${angle}
  output angle = weight.q
}`;

test.each([10, 90, 150, 175])(
  "a pendulum let go at %d degrees swings with the period of the elliptic integral",
  (degrees) => {
    const period = 4 * Math.sqrt(1.3 / 9.80665) * ellipticK(Math.sin((degrees * Math.PI) / 360));
    const model = modelOf(PENDULUM(`${degrees} deg`));
    const run = runModel(model, { duration: period, tolerance: 1e-10 });
    expect(run.samples[0].at(-1)).toBeCloseTo((degrees * Math.PI) / 180, 6);
    const half = runModel(model, { duration: period / 2, tolerance: 1e-10 });
    expect(half.samples[0].at(-1)).toBeCloseTo((-degrees * Math.PI) / 180, 6);
  },
);

test("a motor answers with its electrical and its mechanical time constant", () => {
  // J*R/k² with the inductance small (any text on drives, such as Leonhard, Control of Electrical Drives).
  const model = modelOf(`system M {
    param R = 0.5 ohm
    param L = 0.02 mH
    param k = 0.1 N*m/A
    param J = 0.002 kg*m^2
    input u : V = 12 V
    Se supply e = u
    1 loop : electrical
    R R
    I L
    GY machine out.e = k*in.f
    1 shaft : rotation
    I rotor f = p/J
    supply -> loop -> R, L
    loop -> machine -> shaft -> rotor
    output speed = shaft.f
    output current = loop.f
  }`);
  const [tm, te] = [(0.002 * 0.5) / 0.1 ** 2, 0.02e-3 / 0.5];
  const run = runModel(model, { duration: 6 * tm, tolerance: 1e-9 });
  // Exact, from both poles of the second-order system.
  const root = Math.sqrt(1 - (4 * te) / tm);
  const [s1, s2] = [(-1 + root) / (2 * te), (-1 - root) / (2 * te)];
  for (const time of [te, tm / 10, tm, 3 * tm]) {
    const share = 1 + (s2 * Math.exp(s1 * time) - s1 * Math.exp(s2 * time)) / (s1 - s2);
    expect(valueAt(run.traces[0], time) / 120).toBeCloseTo(share, 6);
  }
  expect(valueAt(run.traces[0], tm) / 120).toBeCloseTo(1 - Math.exp(-1), 2);
  expect(run.counters.by.rodas).toBeGreaterThan(0);
});

const BLOCK = `system B {
  param m = 1 kg
  param k = 20 N/m
  param Fc = 3 N
  input F : N
  Se push e = F
  1 block : translation
  I m
  C spring e = k*q
  R slide e = Fc*sign(f)
  push -> block -> m, spring, slide
  start spring.q = 1 m
  output x = spring.q
  output v = block.f
  output friction = slide.e
}`;

test("dry friction takes 2*Fc/k off each half swing and then holds", () => {
  // Den Hartog, Mechanical Vibrations, Coulomb damping: half swings of pi/w, each shorter by 2*Fc/k.
  const run = runModel(modelOf(BLOCK), { duration: 10, tolerance: 1e-8 });
  const half = Math.PI / Math.sqrt(20);
  expect(run.reason).toBeNull();
  for (const [n, x] of [
    [1, -0.7],
    [2, 0.4],
    [3, -0.1],
  ])
    expect(valueAt(run.traces[0], n * half)).toBeCloseTo(x, 5);
  expect(run.samples[0].at(-1)).toBeCloseTo(-0.1, 5);
  // It hangs on with what the spring pulls, which is less than it could hold.
  expect(run.samples[2].at(-1)).toBeCloseTo(2, 4);
  expect(run.energy?.dissipated).toBeCloseTo(0.5 * 20 * (1 - 0.01), 4);
  expect(run.energy?.closure).toBeLessThan(1e-6);
  expect(run.counters.steps).toBeLessThan(500);
});

test("a held block lets go when it is pushed harder than it holds", () => {
  const model = modelOf(BLOCK.replace("start spring.q = 1 m", "start spring.q = 0 m"));
  const run = runModel(model, { duration: 4, tolerance: 1e-8 }, (_pool, time) => ({ F: time }));
  // The push of t newtons passes 3 N at 3 s.
  expect(Math.abs(valueAt(run.traces[0], 2.99))).toBeLessThan(1e-6);
  expect(valueAt(run.traces[2], 1.5)).toBeCloseTo(1.5, 6);
  // From then on m*x'' = (t - 3) - k*x: x = (τ - sin(wτ)/w)/k.
  const w = Math.sqrt(20);
  expect(valueAt(run.traces[0], 4)).toBeCloseTo((1 - Math.sin(w) / w) / 20, 4);
});

test("a ball on a stiff floor: each bounce is located", () => {
  const model = modelOf(`system Ball {
    param m = 1 kg
    param k = 100 kN/m
    1 ball : translation
    I m
    Se weight e = -m*g0
    C floor e = k*q where q < 0 m else 0 N
    weight -> ball -> m, floor
    start floor.q = 1 m
    output height = floor.q
  }`);
  const run = runModel(model, { duration: 3, tolerance: 1e-9 });
  const [g, w] = [9.80665, Math.sqrt(1e5)];
  const fall = Math.sqrt(2 / g);
  // In contact x = -g/w² + A cos(wt + phi) about the rest position, from speed g*fall downwards.
  const contact = (2 * (Math.PI - Math.atan((g * fall * w) / g))) / w;
  const period = 2 * fall + contact;
  expect(valueAt(run.traces[0], period)).toBeCloseTo(1, 5);
  expect(valueAt(run.traces[0], 2 * period)).toBeCloseTo(1, 5);
  expect(run.counters.events).toBeGreaterThanOrEqual(5);
});

describe("models with implicit equations", () => {
  it("a law that can't be turned round is followed along", () => {
    // f = a*e + b*e^3, told the flow: at steady flow e is the root, and i*t charges nothing here.
    const model = modelOf(
      `system D {
      param a = 2 A/V
      param b = 1 A/V^3
      input i : A
      Sf source f = i
      0 node : electrical
      R law f = a*e + b*e^3 + a*tanh(e/(1 V))*(1 V)
      1 line
      R small e = r*f
      C tank e = q/c
      param r = 1 ohm
      param c = 1 F
      source -> node -> law
      node -> line -> small, tank
      output e = node.e
      output f = law.f
    }`
        .replaceAll("output e =", "output voltage =")
        .replaceAll("output f =", "output current ="),
    );
    const run = runModel(model, { duration: 5, tolerance: 1e-8 }, (pool, time) => ({
      i: pool.product(pool.number(5), pool.call("sin", time)),
    }));
    expect(run.reason).toBeNull();
    const [e, f] = run.samples;
    e.forEach((value, k) => {
      expect(f[k]).toBeCloseTo(2 * value + value ** 3 + 2 * Math.tanh(value), 8);
    });
    expect(run.energy?.closure).toBeLessThan(1e-6);
  });

  it("rates that stay coupled: a mass on a lever that turns far", () => {
    const model = modelOf(`system L {
      param J = 0.5 kg*m^2
      param m = 2 kg
      param r = 0.4 m
      1 arm : rotation
      I J
      MTF lever out.f = r*cos(angle)*in.f
      1 lift : translation
      I load f = p/m
      track angle = arm.f from 0 rad
      arm -> J
      arm -> lever -> lift -> load
      start J.p = 1 N*m*s
      output speed = arm.f
      output angle_out = angle
    }`);
    const run = runModel(model, { duration: 5, tolerance: 1e-9 });
    expect(run.reason).toBeNull();
    // Energy is kept: (J + m r² cos²)·w² stays as it was.
    const [speed, angle] = run.samples;
    const energy = speed.map((w, k) => (0.5 + 2 * 0.16 * Math.cos(angle[k]) ** 2) * w * w);
    for (const value of energy) expect(value / energy[0]).toBeCloseTo(1, 6);
    expect(run.energy?.closure).toBeLessThan(1e-6);
  });
});

test("conservative models keep their energy", () => {
  const names = ["pendulum", "oscillator"];
  const texts = [
    PENDULUM("120 deg"),
    BLOCK.replace("R slide e = Fc*sign(f)", "")
      .replace("spring, slide", "spring")
      .replace("output friction = slide.e", ""),
  ];
  texts.forEach((text, i) => {
    const run = runModel(modelOf(text), { duration: 20, tolerance: 1e-8 });
    expect(run.energy?.closure, names[i]).toBeLessThan(1e-6);
  });
});

test("the demo's hoist closes its energy in every trial", async () => {
  const { checkFile } = await import("../../grammar/pipeline.ts");
  const { fileSet } = await import("../../grammar/source/text.ts");
  const paths = ["hoist.wright", "parts/motor.wright", "parts/rope.wright"];
  const read = (path: string) =>
    readFileSync(new URL(`../../models-demo/boat-hoist/${path}`, import.meta.url), "utf8");
  const report = checkFile(fileSet(paths.map((path) => [path, read(path)])), "hoist.wright", {
    trials: true,
  });
  expect(report.findings).toEqual([]);
  for (const { result, expectations } of report.trials) {
    expect(result?.energy?.closure).toBeLessThan(1e-6);
    for (const { passed, text } of expectations) expect(passed, text).toBe(true);
  }
});
