import { type Point, startPoint } from "../grammar/analysis/point.ts";
import { nearest } from "../grammar/diagnostics/nearest.ts";
import type { StateModel } from "../grammar/equations/model.ts";
import { readText } from "./disk-files.ts";
import { inert } from "./output/print.ts";
import { WrongUse } from "./wrong-use.ts";

/**
 * A point from a JSON file with `states`, `inputs`, `inputRates`, `parameters` (each name: SI value) and `time`. What
 * it leaves out is as the text has it: start values, nominal inputs that rest, time 0.
 */
export function pointFrom(file: string, model: StateModel): Point {
  const given = objectIn(file);
  const start = startPoint(model);
  const parts = ["states", "inputs", "inputRates", "parameters", "time"];
  for (const key of Object.keys(given)) if (!parts.includes(key)) throw unknown(file, "part", key, parts);
  const named = (part: string, names: readonly string[], otherwise: readonly number[]) => {
    const values = valuesOf(file, part, given[part], names);
    return names.map((name, i) => values.get(name) ?? otherwise[i]);
  };
  const states = model.states.map(({ name }) => name);
  const inputs = model.inputs.map(({ name }) => name);
  const free = model.causal.graph.parameters.filter(({ constant }) => !constant).map(({ name }) => name);
  return {
    states: named("states", states, start.states),
    inputs: named("inputs", inputs, start.inputs),
    inputRates: named("inputRates", inputs, start.inputRates),
    parameters: valuesOf(file, "parameters", given.parameters, free),
    time: given.time === undefined ? 0 : numberOf(file, "time", given.time),
  };
}

function objectIn(file: string): Record<string, unknown> {
  const text = readText(file);
  if (text === null) throw new WrongUse(`${file}: there is no such file.`);
  let given: unknown;
  try {
    given = JSON.parse(text);
  } catch (error) {
    throw new WrongUse(`${file} is not JSON: ${error instanceof Error ? error.message : error}`);
  }
  if (!isObject(given)) throw new WrongUse(`${file} holds no object with \`states\` and \`inputs\`.`);
  return given;
}

function valuesOf(file: string, part: string, given: unknown, names: readonly string[]): Map<string, number> {
  const values = new Map<string, number>();
  if (given === undefined) return values;
  if (!isObject(given)) throw new WrongUse(`${file}: \`${part}\` is no object of names and SI values.`);
  for (const [name, value] of Object.entries(given)) {
    if (!names.includes(name)) throw unknown(file, part, name, names);
    values.set(name, numberOf(file, `${part}.${name}`, value));
  }
  return values;
}

function numberOf(file: string, what: string, value: unknown): number {
  if (typeof value === "number") return value;
  throw new WrongUse(`${file}: \`${inert(what)}\` is no number; values are in SI.`);
}

function unknown(file: string, part: string, name: string, names: readonly string[]): WrongUse {
  const close = nearest(name, names);
  const offer = close === null ? `it has: ${names.join(", ") || "none"}.` : `is ${close} meant?`;
  return new WrongUse(`${file}: the model has no \`${inert(name)}\` in \`${part}\`; ${offer}`);
}

function isObject(value: unknown): value is Record<string, unknown> {
  return typeof value === "object" && value !== null && !Array.isArray(value);
}
