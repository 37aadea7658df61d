import { expect } from "vitest";
import { type Evaluated, evaluateModel } from "../../grammar/analysis/evaluate-model.ts";
import { linearise } from "../../grammar/analysis/linearise.ts";
import { type Point, startPoint } from "../../grammar/analysis/point.ts";
import type { StateModel } from "../../grammar/equations/model.ts";
import { checkFile } from "../../grammar/pipeline.ts";
import { fileSet } from "../../grammar/source/text.ts";
import { expressionText } from "../../grammar/writing/text.ts";
import { seeded } from "../published/derived.ts";

/** The last system of a text; an error is a failed test. */
export function modelOf(text: string): StateModel {
  const { systems, findings } = checkFile(fileSet([["random.wright", text]]), "random.wright");
  const errors = findings.filter(({ severity }) => severity === "error");
  const model = systems.at(-1)?.model ?? null;
  if (model === null || errors.length > 0)
    throw new Error(`${errors.map(({ name, message }) => `${name}: ${message}`).join("\n")}\n${text}`);
  return model;
}

/** The equations as they are read. */
export function saidBy(model: StateModel) {
  const { implicit } = model;
  return {
    rates: model.equations.map(({ state, rate }) => `${state}' = ${expressionText(rate)}`),
    dependent: model.dependent.map(
      ({ name, value, rate }) => `${name} = ${expressionText(value)}, ' = ${expressionText(rate)}`,
    ),
    outputs: model.outputs.map(({ name, value }) => `${name} = ${expressionText(value)}`),
    mass: (implicit?.mass ?? []).map((row) => row.map(expressionText)),
    right: (implicit?.right ?? []).map(expressionText),
  };
}

/** States, inputs, their rates and time at random; each name draws its own, whatever the order. */
export function randomPointOf(model: StateModel, seed: string): Point {
  const value = (name: string) => 3 * seeded(`${seed} ${name}`)() - 1.5;
  return {
    ...startPoint(model),
    states: model.states.map(({ name }) => value(name)),
    inputs: model.inputs.map(({ name, nominal }) => (nominal === 0 ? value(name) : nominal)),
    inputRates: model.inputs.map(({ name }) => value(`${name}'`)),
    time: 0.4,
  };
}

export function evaluated(model: StateModel, point: Point): Evaluated {
  const evaluation = evaluateModel(model, point);
  if (evaluation.kind === "none") throw new Error(evaluation.reason);
  return evaluation;
}

/**
 * Two models tell of the same machine, though what is called differently in the second (`nameIn`) may have made
 * another of several stores the dependent one: at the same stored values all stores have the same rates, there are as
 * many states, and the linear models have the same characteristic polynomial.
 */
export function expectSameMachine(
  one: StateModel,
  other: StateModel,
  nameIn: (name: string) => string,
  seed: string,
): void {
  const first = randomPointOf(one, seed);
  const values = storedAt(one, first);
  const inputs = new Map(one.inputs.map(({ name }, i) => [nameIn(name), i]));
  const second: Point = {
    ...first,
    states: other.states.map(
      ({ name }) => values.find((each) => nameIn(each.name) === name)?.value ?? Number.NaN,
    ),
    inputs: other.inputs.map(({ name }) => first.inputs[inputs.get(name) ?? -1]),
    inputRates: other.inputs.map(({ name }) => first.inputRates[inputs.get(name) ?? -1]),
  };
  const again = new Map(storedAt(other, second).map((each) => [each.name, each]));
  expect([...again.keys()].sort()).toEqual(values.map(({ name }) => nameIn(name)).sort());
  expect(other.states.length).toBe(one.states.length);
  for (const { name, value, rate } of values) {
    const there = again.get(nameIn(name));
    expectClose(there?.value, value, `value of ${name}`);
    expectClose(there?.rate, rate, `rate of ${name}`);
  }
  // Of laws that change with time or place, the eigenvalues at a point depend on which stores are the states.
  if (one.causal.graph.nodes.some(({ modulated }) => modulated)) return;
  const traces = [one, other].map((model, i) => powerTraces(model, [first, second][i]));
  for (const [k, trace] of traces[0].entries()) expectClose(traces[1][k], trace, `trace of A^${k + 1}`);
}

export function expectClose(found: number | undefined, wanted: number, what: string): void {
  const close = Math.abs((found ?? Number.NaN) - wanted) <= 1e-7 * Math.max(1, Math.abs(wanted));
  if (!close) throw new Error(`${what} is ${found} and not ${wanted}`);
}

function storedAt(model: StateModel, point: Point) {
  const { valueOf, rates } = evaluated(model, point);
  return [
    ...model.states.map(({ name }, i) => ({ name, value: point.states[i], rate: rates[i] })),
    ...model.dependent.map(({ name, value, rate }) => ({ name, value: valueOf(value), rate: valueOf(rate) })),
  ];
}

/** Traces of A, A², …, Aⁿ: they settle the eigenvalues (Newton's identities) and need no order of them. */
function powerTraces(model: StateModel, point: Point): number[] {
  const linear = linearise(model, point);
  if (linear.kind === "none") throw new Error(linear.reason);
  const A = linear.A.map((row) => [...row]);
  const traces: number[] = [];
  let power = A;
  for (let k = 0; k < A.length; k += 1) {
    if (k > 0)
      power = power.map((row) => A.map((_, j) => row.reduce((sum, cell, i) => sum + cell * A[i][j], 0)));
    traces.push(power.reduce((sum, row, i) => sum + row[i], 0));
  }
  return traces;
}
