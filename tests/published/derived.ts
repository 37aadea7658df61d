import { expect } from "vitest";
import { inCoEnergy } from "../../grammar/equations/coenergy.ts";
import type { StateModel } from "../../grammar/equations/model.ts";
import { checkFile } from "../../grammar/pipeline.ts";
import { fileSet } from "../../grammar/source/text.ts";
import { evaluate } from "../../grammar/symbolic/evaluate.ts";
import type { Expr, Symbol } from "../../grammar/symbolic/expression.ts";
import { equivalent } from "../../grammar/symbolic/rational-form.ts";
import { closedForm, expressionOf, valueAt } from "./closed-form.ts";

export interface Derived {
  readonly model: StateModel;
  /** Names of the findings that are no notes, in the order of the text. */
  readonly findings: readonly string[];
}

/** The body of a system, through the whole core to its state model; an error is a failed test. */
export function derived(body: string): Derived {
  const text = `notation 1\nsystem Published {\n${body}\n}\n`;
  const { systems, findings } = checkFile(fileSet([["published.wright", text]]), "published.wright");
  const errors = findings.filter(({ severity }) => severity === "error");
  expect(errors.map(({ name, message }) => `${name}: ${message}`)).toEqual([]);
  const model = systems[0].model;
  if (model === null) throw new Error("no state model was derived");
  return { model, findings: findings.filter(({ severity }) => severity !== "note").map(({ name }) => name) };
}

/** The same with velocities, currents, voltages, forces and pressures as the states: the form that books print. */
export function inCoEnergyVariables({ model, findings }: Derived): Derived {
  return { model: inCoEnergy(model), findings };
}

/** What a source says of a model: rates by state, values by dependent store and by output, in its own formulas. */
export interface Published {
  readonly rates?: Readonly<Record<string, string>>;
  readonly dependent?: Readonly<Record<string, string>>;
  readonly outputs?: Readonly<Record<string, string>>;
  /** Where the formulas hold: the span that a parameter, state or input is drawn from. */
  readonly where?: Readonly<Record<string, readonly [number, number]>>;
  /** Equal only by an identity that algebra does not know, or only within `where`: values alone are compared. */
  readonly byValue?: boolean;
}

/**
 * The derived equations equal the published ones: the same states, and for each the same expression, by algebra and
 * in its values at twenty seeded points.
 */
export function expectPublished({ model }: Derived, published: Published): void {
  expect(model.implicit).toBeNull();
  expect(model.states.map(({ name }) => name).sort()).toEqual(Object.keys(published.rates ?? {}).sort());
  expect(model.dependent.map(({ name }) => name).sort()).toEqual(
    Object.keys(published.dependent ?? {}).sort(),
  );
  const compare = (what: string, found: Expr | undefined, text: string) => {
    if (found === undefined) throw new Error(`${what} was not derived`);
    compareWith(model, what, found, text, published);
  };
  for (const [name, text] of Object.entries(published.rates ?? {})) {
    compare(`rate of ${name}`, model.equations.find(({ state }) => state === name)?.rate, text);
  }
  for (const [name, text] of Object.entries(published.dependent ?? {})) {
    compare(name, model.dependent.find((store) => store.name === name)?.value, text);
  }
  for (const [name, text] of Object.entries(published.outputs ?? {})) {
    compare(`output ${name}`, model.outputs.find((output) => output.name === name)?.value, text);
  }
}

function compareWith(model: StateModel, what: string, found: Expr, text: string, published: Published): void {
  const { pool } = model.causal.graph;
  const formula = closedForm(text);
  const symbols = symbolsByName(model);
  const symbol = (name: string): Expr => {
    const known = symbols.get(name);
    if (known === undefined) throw new Error(`the model knows no ${name}`);
    return known;
  };
  if (published.byValue !== true)
    expect(`${what}: ${equivalent(pool, found, expressionOf(formula, pool, symbol))}`).toBe(`${what}: true`);
  const draw = seeded(what);
  for (let i = 0; i < 20; i += 1) {
    const point = randomPoint(model, draw, published.where ?? {});
    const value = evaluate(found, (one) => point(one.role === "inputRate" ? `rate(${one.name})` : one.name));
    const wanted = valueAt(formula, point);
    expect(Math.abs(value - wanted)).toBeLessThanOrEqual(1e-10 * Math.max(1, Math.abs(wanted)));
  }
}

function symbolsByName(model: StateModel): Map<string, Symbol> {
  const { graph } = model.causal;
  const symbols = [...graph.parameters, ...model.states, ...model.inputs].map(
    ({ name, symbol }) => [name, symbol] as const,
  );
  return new Map([
    ...symbols,
    ["g0", graph.pool.symbol("constant", "g0")],
    ["time", graph.pool.symbol("time", "time")],
  ]);
}

/** Positive parameters, states and inputs of either sign, where nothing else is asked; each name keeps its value at one point. */
function randomPoint(
  model: StateModel,
  draw: () => number,
  where: Readonly<Record<string, readonly [number, number]>>,
): (name: string) => number {
  const { parameters } = model.causal.graph;
  const values = new Map<string, number>(parameters.map(({ name }) => [name, 0.3 + 2 * draw()]));
  for (const [name, [low, high]] of Object.entries(where)) values.set(name, low + (high - low) * draw());
  values.set("g0", 9.80665);
  return (name) => {
    const value = values.get(name) ?? 4 * draw() - 2;
    values.set(name, value);
    return value;
  };
}

/** A small linear congruential generator (constants of Numerical Recipes, 2nd edition, 7.1; recalled from memory). */
export function seeded(seed: string | number): () => number {
  let state = [...String(seed)].reduce((sum, letter) => (sum * 31 + letter.charCodeAt(0)) >>> 0, 7);
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2 ** 32;
  };
}
