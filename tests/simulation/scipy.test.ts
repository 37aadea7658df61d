import { spawnSync } from "node:child_process";
import { describe, expect, it } from "vitest";
import { parameterValues } from "../../grammar/equations/assignments.ts";
import type { StateModel } from "../../grammar/equations/model.ts";
import type { Expr } from "../../grammar/symbolic/expression.ts";
import type { Pool } from "../../grammar/symbolic/pool.ts";
import { postorder } from "../../grammar/symbolic/postorder.ts";
import { substitution } from "../../grammar/symbolic/substitute.ts";
import { modelOf, runModel } from "./run-model.ts";

/**
 * The same equations by SciPy: LSODA or Radau at a tight tolerance tells how far each of us is off at the same ordinary one,
 * and ours may be no farther than ten times SciPy's own LSODA. Every smooth stretch is a run of its own.
 */
const REFERENCE = `
import json, math, sys
import numpy as np
from scipy.integrate import solve_ivp
answers = []
for case in json.load(sys.stdin):
    space = {"math": math}
    exec(case["code"], space)
    def run(method, rtol, scale):
        x = np.array(case["start"], float)
        for a, b in zip(case["stretches"], case["stretches"][1:]):
            middle = (a + b)/2
            f = lambda t, x: space["f"](t, x, middle)
            done = solve_ivp(f, (a, b), x, method=method, rtol=rtol, atol=rtol*scale)
            if not done.success: raise Exception(case["name"] + ": " + done.message)
            x = done.y[:, -1]
        return x
    x = run("LSODA", 1e-6, np.full(len(case["start"]), 1e-6))
    scale = np.maximum(np.abs(x), np.array(case["scale"]))
    tight = run(case["tight"], 1e-12, 1e-3*scale)
    usual = run("LSODA", 1e-6, 1e-2*scale)
    answers.append({"tight": tight.tolist(), "error": float(np.max(np.abs(usual - tight)/scale))})
json.dump(answers, sys.stdout)
`;

interface Case {
  readonly name: string;
  readonly text: string;
  readonly duration: number;
  readonly corners?: readonly number[];
  readonly tight?: "Radau";
  drive?(pool: Pool, time: Expr): Record<string, Expr>;
}

const step = (input: string, at: number, value: number): Pick<Case, "corners" | "drive"> => ({
  corners: [at],
  drive: (pool, time) => ({
    [input]: pool.where(pool.compare("<", time, pool.number(at)), pool.zero, pool.number(value)),
  }),
});

const sine = (input: string, value: number, speed: number): Pick<Case, "drive"> => ({
  drive: (pool, time) => ({
    [input]: pool.product(pool.number(value), pool.call("sin", pool.product(pool.number(speed), time))),
  }),
});

/** A mass that is pushed, with the laws of what else hangs on it. */
const pushed = (laws: string, names: string, params = "") => `system S {
  param m = 2 kg
  ${params}
  input F : N
  Se push e = F
  1 mass : translation
  I m
  ${laws}
  push -> mass -> m, ${names}
}`;

const CASES: readonly Case[] = [
  {
    name: "oscillator",
    text: pushed("C k\n R d", "k, d", "param k = 50 N/m\n param d = 4 N*s/m"),
    duration: 5,
    ...step("F", 1, 10),
  },
  {
    name: "hardening spring",
    text: pushed(
      "C s e = k*q + k3*q^3\n R d",
      "s, d",
      "param k = 50 N/m\n param k3 = 4000 N/m^3\n param d = 1 N*s/m",
    ),
    duration: 10,
    ...sine("F", 20, 6),
  },
  {
    name: "drag of a flow",
    text: pushed("R air e = c*f*abs(f)", "air", "param c = 6 N*s^2/m^2"),
    duration: 10,
    ...step("F", 1, 100),
  },
  {
    name: "smoothed friction",
    text: pushed(
      "C k\n R fr e = Fc*tanh(f/v0)",
      "k, fr",
      "param k = 50 N/m\n param Fc = 5 N\n param v0 = 1 mm/s",
    ),
    duration: 10,
    ...sine("F", 12, 2),
  },
  {
    name: "stiff damper",
    text: pushed("C k\n R d", "k, d", "param k = 50 N/m\n param d = 1e5 N*s/m"),
    duration: 5,
    ...step("F", 1, 10),
  },
  {
    name: "pendulum",
    text: `system P {
      param m = 1 kg
      param l = 1 m
      1 rot : rotation
      I J f = p/(m*l^2)
      C weight e = m*g0*l*sin(q)
      rot -> J, weight
      start weight.q = 2 rad
    }`,
    duration: 10,
  },
  {
    name: "motor with gear and tied inertia",
    text: `system D {
      param R = 0.5 ohm
      param L = 2 mH
      param k = 0.1 N*m/A
      param J1 = 1e-3 kg*m^2
      param J2 = 0.4 kg*m^2
      param n = 1/20
      param b = 0.2 N*m*s
      input u : V
      Se supply e = u
      1 loop : electrical
      R R
      I L
      GY motor out.e = k*in.f
      1 fast : rotation
      I rotor f = p/J1
      TF gear out.f = n*in.f
      1 slow : rotation
      I load f = p/J2
      R bearing e = b*f
      supply -> loop -> R, L
      loop -> motor -> fast -> rotor
      fast -> gear -> slow -> load, bearing
    }`,
    duration: 3,
    ...step("u", 0.2, 24),
  },
  {
    name: "ladder with time constants from microseconds to seconds",
    text: `system L {
      param R = 100 ohm
      input u : V
      Se supply e = u
      ${[1, 2, 3, 4].map((i) => `1 s${i} : electrical\n R r${i} e = R*f\n 0 n${i}\n C c${i} e = q/C${i}\n param C${i} = ${["10 nF", "1 uF", "100 uF", "10 mF"][i - 1]}`).join("\n")}
      supply -> s1
      ${[1, 2, 3, 4].map((i) => `s${i} -> r${i}\n s${i} -> n${i} -> c${i}`).join("\n")}
      n1 -> s2
      n2 -> s3
      n3 -> s4
    }`,
    duration: 5,
    ...step("u", 0.5, 10),
  },
  {
    name: "diode that charges a capacitor",
    text: `system D {
      param Is = 1e-9 A
      param vt = 26 mV
      param R = 100 ohm
      param C = 10 uF
      input u : V
      Se supply e = u
      0 node : electrical
      1 line
      1 side
      R r e = R*f
      C tank e = q/C
      R diode f <- Is*(exp(e/vt) - 1)
      C junction e = q/(1e-6 F)
      0 far
      supply -> line -> r
      line -> node -> junction
      node -> side -> diode
      side -> far -> tank
    }`,
    duration: 0.05,
    ...sine("u", 2, 300),
  },
  {
    name: "cylinder behind an orifice",
    text: `system H {
      param K = 2e-7 m^3/s
      param p0 = 1 Pa
      param Ch = 5e-13 m^3/Pa
      param A = 2e-3 m^2
      param m = 500 kg
      param d = 8 kN*s/m
      input ps : Pa
      Se pump e = ps
      1 valve : hydraulic
      R orifice f = K*sign(e)*sqrt(abs(e)/p0)
      0 room
      C oil e = q/Ch
      TF piston out.e = A*in.e
      1 rod : translation
      I load f = p/m
      R guide e = d*f
      pump -> valve -> orifice
      valve -> room -> oil
      room -> piston -> rod -> load, guide
    }`,
    duration: 0.5,
    ...step("ps", 0.01, 1e7),
  },
  {
    name: "van der Pol, mu = 20",
    text: `system V {
      param L = 1 H
      param C = 1 F
      1 loop : electrical
      I coil f = p/L
      C tank e = q/C
      R lamp e = mu*(f^2/(3*i0^2) - 1)*f
      param mu = 20 ohm
      param i0 = 1 A
      loop -> coil, tank, lamp
      start coil.p = 2 V*s
    }`,
    duration: 60,
  },
  {
    name: "heat through a wall",
    text: `system W {
      ${[1, 2, 3, 4, 5, 6].map((i) => `0 t${i} : heat\n C c${i} e = q/(2 J/K)\n t${i} -> c${i}`).join("\n")}
      ${[1, 2, 3, 4, 5].map((i) => `1 w${i} : heat\n R r${i} e = f*(0.05 K/W)\n t${i} -> w${i} -> t${i + 1}\n w${i} -> r${i}`).join("\n")}
      input Q : W
      Sf oven f = Q
      oven -> t1
      R loss f = 3 W/K * e
      t6 -> loss
    }`,
    duration: 20,
    ...sine("Q", 100, 1),
  },
];

/** The rates as a Python function, one line a shared part. */
function pythonOf(model: StateModel, drives: Record<string, Expr>): string {
  const { pool } = model.causal.graph;
  const valueOf = parameterValues(model.causal.graph);
  const inputs = model.inputs.map(({ symbol, name, nominal }): [Expr, Expr] => [
    symbol,
    drives[name] ?? pool.number(nominal),
  ]);
  const rates = model.equations.map(({ rate }) => substitution(pool, new Map(inputs))(rate));
  const names = new Map<Expr, string>();
  const lines: string[] = [];
  const states = new Map<Expr, string>(model.states.map(({ symbol }, i) => [symbol, `x[${i}]`]));
  const functions: Record<string, string> = { ln: "math.log", abs: "abs", min: "min", max: "max" };
  postorder(
    rates,
    (expr) => names.has(expr),
    (expr) => {
      const args = expr.args.map((arg) => names.get(arg) as string);
      const text = {
        number: () => String(expr.value),
        symbol: () =>
          expr.role === "time"
            ? "t"
            : (states.get(expr) ?? String(valueOf(expr as Parameters<typeof valueOf>[0]))),
        sum: () => args.join(" + "),
        product: () => args.join("*"),
        power: () => `(${args[0]})**(${args[1]})`,
        call: () =>
          expr.name === "sign"
            ? `math.copysign(1, ${args[0]})`
            : `${functions[expr.name] ?? `math.${expr.name}`}(${args.join(", ")})`,
        curve: () => "None",
        where: () => `(${args[1]} if ${args[0]} else ${args[2]})`,
        // Only steps of drives: within a stretch they stand as at its middle.
        compare: () => `(${args.map((arg) => arg.replace(/^t$/, "middle")).join(expr.name)})`,
        and: () => args.join(" and "),
        or: () => args.join(" or "),
        not: () => `not ${args[0]}`,
      }[expr.op]();
      if (expr.args.length === 0) names.set(expr, expr.op === "number" ? `(${text})` : text);
      else {
        lines.push(`  v${lines.length} = ${text}`);
        names.set(expr, `v${lines.length - 1}`);
      }
    },
  );
  return `def f(t, x, middle):\n${lines.join("\n")}\n  return [${rates.map((rate) => names.get(rate)).join(", ")}]`;
}

describe("runs against SciPy", () => {
  const runs = CASES.map((one) => {
    const model = modelOf(one.text);
    const { pool } = model.causal.graph;
    const drives = one.drive?.(pool, pool.symbol("time", "time")) ?? {};
    const signals = model.states.map(({ symbol }) => symbol);
    const run = runModel(model, { duration: one.duration, tolerance: 1e-6, signals }, () => drives);
    const scale = run.traces.map(({ values }) => 0.1 * Math.max(...values.map(Math.abs)));
    const stretches = [0, ...(one.corners ?? []), one.duration];
    const start = model.states.map((state) => state.start);
    return {
      run,
      scale,
      request: {
        name: one.name,
        code: pythonOf(model, drives),
        tight: one.tight ?? "LSODA",
        start,
        scale,
        stretches,
      },
    };
  });
  const asked = spawnSync("/usr/bin/python3", ["-c", REFERENCE], {
    input: JSON.stringify(runs.map(({ request }) => request)),
    encoding: "utf8",
    env: { ...process.env, OPENBLAS_NUM_THREADS: "1" },
  });
  const answers = asked.status === 0 ? JSON.parse(asked.stdout) : [];
  it("SciPy runs them all", () => expect(asked.stderr).toBe(""));

  it.each(CASES.map(({ name }, i) => ({ name, i })))("$name", ({ i }) => {
    const { run, scale } = runs[i];
    const { tight, error } = answers[i] as { tight: number[]; error: number };
    expect(run.reason).toBeNull();
    const ours = Math.max(
      ...run.state.map((value, k) => Math.abs(value - tight[k]) / Math.max(scale[k], Math.abs(tight[k]))),
    );
    expect(ours).toBeLessThanOrEqual(Math.max(10 * error, 1e-7));
    expect(run.energy?.closure).toBeLessThan(1e-4);
  });
});
