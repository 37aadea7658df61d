import { readdirSync, readFileSync } from "node:fs";
import { join, relative } from "node:path";
import { describe, expect, test } from "vitest";
import { parameterValues } from "../../grammar/equations/assignments.ts";
import { inCoEnergy } from "../../grammar/equations/coenergy.ts";
import type { StateModel } from "../../grammar/equations/model.ts";
import { checkFile } from "../../grammar/pipeline.ts";
import { fileSet } from "../../grammar/source/text.ts";
import { derivative } from "../../grammar/symbolic/derivative.ts";
import { evaluator } from "../../grammar/symbolic/evaluate.ts";
import type { Expr, Symbol } from "../../grammar/symbolic/expression.ts";

/**
 * What was derived, put back into where it came from: at a random point every junction balances, every two-port
 * passes its power on, every law holds and every store's rate is what its bond carries. No derivation is trusted.
 */
function residuals(model: StateModel, seed: number): number[] {
  const { graph, stores } = model.causal;
  const { pool, nodes, bonds } = graph;
  const point = pointOf(model, seed);
  const at = evaluator(point);
  const e = (bond: number) => at(model.efforts[bond] as Expr);
  const f = (bond: number) => at(model.flows[bond] as Expr);
  const everything = new Map<Symbol, number>();
  for (const { index, effort, flow } of bonds) everything.set(effort, e(index)).set(flow, f(index));
  for (const { symbol, value } of model.dependent) everything.set(symbol, at(value));
  const law = evaluator((symbol) => everything.get(symbol) ?? point(symbol));
  const rateOf = new Map<string, number>();
  for (const { state, rate } of model.equations) rateOf.set(state, at(rate));
  for (const { name, rate } of model.dependent) rateOf.set(name, at(rate));

  const found: number[] = [];
  const agree = (a: number, b: number) => found.push(Math.abs(a - b) / (1 + Math.abs(a) + Math.abs(b)));
  const sign = (end: "from" | "to") => (end === "to" ? 1 : -1);
  for (const node of nodes) {
    const { kind, ports } = node;
    if (kind === "0" || kind === "1") {
      const [common, summed] = kind === "1" ? [f, e] : [e, f];
      for (const port of ports) agree(common(port.bond), common(ports[0].bond));
      const powers = ports.map((port) => sign(port.end) * summed(port.bond));
      const size = powers.reduce((total, power) => total + Math.abs(power), 0);
      found.push(Math.abs(powers.reduce((total, power) => total + power, 0)) / (1 + size));
    } else if (kind === "TF" || kind === "GY") {
      agree(e(ports[0].bond) * f(ports[0].bond), e(ports[1].bond) * f(ports[1].bond));
    }
    for (const each of node.laws) {
      if (each.kind === "ratio") {
        const [input, output] = ports.map(({ bond }) => bond);
        agree(kind === "TF" ? f(output) : e(output), law(each.ratio) * f(input));
      } else if (each.kind === "relation") {
        const { bond } = ports[each.port];
        const store = stores.find((one) => one.node === node.index && one.port === each.port);
        const left =
          each.variable === "e"
            ? e(bond)
            : each.variable === "f"
              ? f(bond)
              : law(pool.symbol("state", store?.name ?? ""));
        agree(left, law(each.right));
      } else {
        for (const store of stores.filter((one) => one.node === node.index)) {
          const { bond } = ports[store.port];
          const slope = derivative(pool, each.energy, pool.symbol("state", store.name));
          agree(store.variable === "q" ? e(bond) : f(bond), law(slope));
        }
      }
    }
  }
  for (const { name, node, port, variable } of stores) {
    const { bond, end } = nodes[node].ports[port];
    agree(rateOf.get(name) as number, sign(end) * (variable === "q" ? f(bond) : e(bond)));
  }
  return found;
}

function pointOf(model: StateModel, seed: number): (symbol: Symbol) => number {
  const parameters = parameterValues(model.causal.graph);
  const scale = new Map(model.inputs.map(({ symbol, nominal }) => [symbol, nominal]));
  const values = new Map<Symbol, number>();
  let state = seed;
  const random = () => {
    state = (state * 48271) % 2147483647;
    return state / 2147483647;
  };
  return (symbol) => {
    let value = values.get(symbol) ?? parameters(symbol);
    if (value === undefined) {
      value = (scale.get(symbol) || 0.1) * (0.5 + random());
      values.set(symbol, value);
    }
    return value;
  };
}

/** Every set of the demo with its files; the models beside these tests use no others. */
function wrightFiles(folder: string): string[] {
  return readdirSync(folder, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && entry.name.endsWith(".wright"))
    .map((entry) => join(entry.parentPath, entry.name));
}

const sets = [
  ...readdirSync("models-demo").map((name) => join("models-demo", name)),
  "tests/equations/models",
];

describe.each(sets.flatMap((set) => wrightFiles(set).map((path) => [path, set] as const)))(
  "%s",
  (path, set) => {
    const files = fileSet(wrightFiles(set).map((each) => [relative(set, each), readFileSync(each, "utf8")]));
    const systems = checkFile(files, relative(set, path)).systems;

    test.each(systems.map(({ system, model }) => [system, model] as const))("%s", (_, model) => {
      expect(model).not.toBeNull();
      if (model === null || model.loops.some(({ solved }) => !solved)) return;
      for (const seed of [7, 77, 777]) {
        const worst = Math.max(0, ...residuals(model, seed));
        expect(worst).toBeLessThan(1e-9);
      }
    });

    test.each(systems.map(({ system, model }) => [system, model] as const))(
      "%s in co-energy variables",
      (_, model) => {
        if (model === null) return;
        const view = inCoEnergy(model);
        const at = pointOf(model, 5);
        const energy = evaluator(at);
        const shared = new Map(
          model.states.map(({ symbol, coEnergy }, i) => [
            view.states[i].symbol,
            coEnergy === null ? at(symbol) : energy(coEnergy.value),
          ]),
        );
        const coEnergy = evaluator((symbol) => shared.get(symbol) ?? at(symbol));
        for (const [i, { value }] of model.outputs.entries()) {
          const [was, is] = [energy(value), coEnergy(view.outputs[i].value)];
          expect(Math.abs(was - is)).toBeLessThan(1e-9 * (1 + Math.abs(was)));
        }
      },
    );
  },
);
