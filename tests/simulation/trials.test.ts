import { expect, test } from "vitest";
import { checkFile } from "../../grammar/pipeline.ts";
import { fileSet } from "../../grammar/source/text.ts";

const OSCILLATOR = `notation 1
## A mass on a spring with a damper.
system Oscillator {
  param m = 2 kg range 1 kg .. 4 kg  -- mass
  param k = 50 N/m                   -- stiffness
  param d = 4 N*s/m                  -- damping

  input F : N      -- push

  Se push e = F
  1  mass : translation
  I  m
  C  k
  R  d
  push -> mass -> m, k, d

  output x = k.q     -- way
  output v = mass.f  -- speed
}
`;

function runTrials(trial: string, more: readonly (readonly [string, string])[] = []) {
  const files = fileSet([["m.wright", `${OSCILLATOR}\n${trial}`], ...more]);
  return checkFile(files, "m.wright", { trials: true });
}

const results = (report: ReturnType<typeof runTrials>) =>
  report.trials.flatMap(({ expectations }) => expectations);
const failures = (report: ReturnType<typeof runTrials>) =>
  results(report)
    .filter(({ passed }) => !passed)
    .map(({ text, measured, message }) => `${text}: ${measured} ${message}`);
const problems = (report: ReturnType<typeof runTrials>) =>
  report.findings
    .filter(({ severity }) => severity !== "note")
    .map(({ name, message }) => `${name}: ${message}`);

test("the answer of a second-order system to a step has the figures of the textbook", () => {
  // wn = 5, zeta = 0.2: overshoot exp(-pi*z/sqrt(1-z^2)), peak time pi/wd (Ogata, Modern Control Engineering, 5.3).
  const [wn, zeta] = [5, 0.2];
  const wd = wn * Math.sqrt(1 - zeta ** 2);
  const overshoot = Math.exp((-Math.PI * zeta) / Math.sqrt(1 - zeta ** 2));
  const report = runTrials(`trial push of Oscillator {
    drive F = step(1 s, 10 N)
    run for 21 s tolerance 1e-9
    expect overshoot(x) = ${overshoot} within 1e-6
    expect max(x) = ${0.2 * (1 + overshoot)} m within 1e-7 m
    expect time_when(v < 0 m/s and x > 0.1 m) = ${1 + Math.PI / wd} s within 1e-6 s
    expect final(x) = 0.2 m within 0.001 %
    expect min(x) = 0 m within 1e-12 m
    expect at(x, 1 s) = 0 m within 1e-12 m
    expect energy_in = 2 J within 1e-6 J
    expect energy_lost = 1 J within 1e-6 J
    expect settling(x, 2 %) between 3.4 s and 4 s
    expect rise(x) between 0.2 s and 0.3 s
    expect peak(v) > mean(v)
  }`);
  expect(problems(report)).toEqual([]);
  expect(failures(report)).toEqual([]);
  expect(results(report)).toHaveLength(11);
});

test("rms and mean of a sine over whole periods", () => {
  const report = runTrials(`trial swing of Oscillator {
    drive F = sine(10 N, 0.5 Hz)
    run for 60 s tolerance 1e-9
    record F, 2*x
    expect rms(F) = ${10 / Math.sqrt(2)} N within 1e-6 N
    expect mean(F + 3 N) = 3 N within 1e-6 N
    expect peak(F) = 10 N within 1e-6 N
  }`);
  expect(problems(report)).toEqual([]);
  expect(failures(report)).toEqual([]);
  expect(report.trials[0].signals.map(({ name }) => name)).toEqual(["F", "2*x"]);
});

test("samples stand exactly at multiples, and a jump belongs to what follows", () => {
  const report = runTrials(`trial push of Oscillator {
    drive F = pulse(0.1 s, 0.3 s, 10 N)
    run for 1 s every 0.1 s
    record F
  }`);
  const { result } = report.trials[0];
  expect(result?.times).toEqual([0, 1, 2, 3, 4, 5, 6, 7, 8, 9].map((i) => i * 0.1).concat(1));
  expect(result?.samples[0]).toEqual([0, 10, 10, 0, 0, 0, 0, 0, 0, 0, 0]);
});

test("what fails says by how much; what cannot be measured has failed", () => {
  const report = runTrials(`trial push of Oscillator {
    drive F = step(1 s, 10 N)
    run for 10 s
    expect max(x) < 0.25 m
    expect time_when(x > 3 m) < 5 s
    expect at(x, 20 s) < 1 m
  }`);
  const [first, second, third] = results(report);
  expect(first).toMatchObject({
    passed: false,
    measured: "0.305324 m",
    wanted: "< 0.25 m",
    margin: "-0.05532 m",
  });
  expect(second).toMatchObject({ passed: false, measured: null });
  expect(second.message).toContain("never holds");
  expect(third.message).toContain("not within the run");
  expect(problems(report).map((text) => text.split(":")[0])).toEqual([
    "expectation-failed",
    "not-computable",
    "not-computable",
  ]);
});

test("every value of vary and scatter must meet the requirement; the worst is told", () => {
  const report = runTrials(`trial push of Oscillator {
    set d = 10 N*s/m
    vary k over 40 N/m .. 100 N/m steps 3
    scatter 5
    drive F = step(0 s, 10 N)
    run for 8 s
    expect max(x) < 0.27 m
    expect final(x) < 1 m
  }`);
  expect(report.trials[0].runs).toBe(20);
  const [first, second] = results(report);
  expect(first.passed).toBe(false);
  expect(first.message).toMatch(/Worst of 20 runs, at m = [\d.]+ kg, k = 40 N\/m, d = 10 N\*s\/m\./);
  expect(second.passed).toBe(true);
});

test("starts: given, solved back through the law for the run's own parameters, and steady", () => {
  const report = runTrials(
    `trial free of Oscillator {
    set m = 3 kg
    start mass.f = 0.5 m/s
    run for 1 s
    expect at(v, 0 s) = 0.5 m/s within 1e-12 m/s
    expect at(m.p, 0 s) = 1.5 kg*m/s within 1e-12 kg*m/s
  }
  trial held of Oscillator {
    start steady
    drive F = step(1 s, 10 N, 20 N)
    run for 2 s
    expect at(x, 0.9 s) = 0.2 m within 1e-9 m
  }`.replace("start mass.f", "start m.f"),
  );
  expect(problems(report)).toEqual([]);
  expect(failures(report)).toEqual([]);
});

test("measured data: driven by it, and compared with it", () => {
  const rows = Array.from({ length: 101 }, (_, i) => `${i / 10},${i / 20},0`);
  const report = runTrials(
    `trial run7 of Oscillator {
    drive F = recorded("data/run7.csv", "t", "u")
    run for 10 s
    compare F with "data/run7.csv" columns "t", "u" rms < 1e-6 N
    compare x with "data/run7.csv" columns "t", "x" max < 0.01 m
  }`,
    [["data/run7.csv", `t,u,x\n${rows.join("\n")}\n`]],
  );
  const [first, second] = results(report);
  expect(first.passed).toBe(true);
  expect(second).toMatchObject({ passed: false, wanted: "< 0.01 m" });
});

test.each([
  ["drive F = step(1 s, 2 m)\n run for 1 s", "unit-mismatch"],
  ["drive G = 1 N\n run for 1 s", "unknown-name"],
  ["set q = 1 N\n run for 1 s", "unknown-name"],
  ["drive F = 2*x*k\n run for 1 s", "law-form"],
  ["expect max(x) < 2 N\n run for 1 s", "unit-mismatch"],
  ["run for -1 s", "not-computable"],
  ["expect final(x) < 1 m", "syntax"],
  ["run for 1e6 s every 1e-6 s", "not-computable"],
  ["vary k over 1 N/m .. 2 N/m steps 1000000000000\n run for 1 s", "too-large"],
  ["vary d over 1 N*s/m .. 2 N*s/m steps 2\n scatter 1000000000000\n run for 1 s", "too-large"],
  ["drive F = sine(1 N, 1e9 Hz)\n run for 1e9 s\n", "run-stopped"],
])(
  "%s is told as %s, never a hang",
  (body, name) => {
    const report = runTrials(`trial odd of Oscillator {\n ${body}\n}`);
    expect(report.findings.map((found) => found.name)).toContain(name);
  },
  60_000,
);
