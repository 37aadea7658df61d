import { type Finding, finding } from "../diagnostics/finding.ts";
import { unitOfVariable } from "../resolve/domains.ts";
import type { Domain, FlatGraph, FlatLaw, FlatNode } from "../resolve/graph.ts";
import { evaluate } from "../symbolic/evaluate.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import { linearForms } from "../symbolic/linear.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import { divide } from "../units/dimension.ts";
import { parseUnit } from "../units/parse-unit.ts";
import type { Unit } from "../units/unit.ts";
import { quantityText, unitOf } from "../units/unit-text.ts";
import { parameterValues } from "./assignments.ts";
import { powerGained } from "./power-matrix.ts";

type Relation = Extract<FlatLaw, { kind: "relation" }>;

/**
 * Resistors whose law creates power at the given values: a linear one with a negative value, a characteristic that
 * leaves the first and third quadrants within what machines reach, a linear field that gives power in some direction
 * (its matrix has an indefinite symmetric part). What is modulated is left alone: nobody knows what its signals will
 * be. So are thermal and chemical domains, where the sign of e·f only says which way the heat or the matter goes, and
 * pseudo ones, where e·f is no power.
 */
export function passivityFindings(graph: FlatGraph): Finding[] {
  const valueOf = parameterValues(graph);
  const findings: Finding[] = [];
  for (const node of graph.nodes) {
    if (node.kind !== "R" && node.kind !== "RS") continue;
    const ports = node.kind === "RS" ? node.ports.slice(0, 1) : node.ports;
    if (ports.some(({ domain }) => domain.pseudo || OPEN.has(domain.name))) continue;
    const found = ports.length === 1 ? onePort(graph, node, valueOf) : field(graph, node, valueOf);
    if (found !== null) findings.push(found);
  }
  return findings;
}

const OPEN: ReadonlySet<string> = new Set(["thermal", "chemical"]);

type ValueOf = (symbol: Symbol) => number | undefined;

function onePort(graph: FlatGraph, node: FlatNode, valueOf: ValueOf): Finding | null {
  const law = node.laws.find((each): each is Relation => each.kind === "relation");
  if (law === undefined) return null;
  const [port] = node.ports;
  const { effort, flow } = graph.bonds[port.bond];
  const own = law.variable === "e" ? flow : effort;
  if (signOfSlope(law.right, own, valueOf) === 1) return null;
  for (const symbol of symbolsOf(law.right)) {
    if (symbol !== own && valueOf(symbol) === undefined) return null;
  }
  const at = (x: number) =>
    evaluate(law.right, (symbol) => (symbol === own ? x : (valueOf(symbol) ?? Number.NaN)));
  const sign = port.end === "to" ? 1 : -1;
  const units = {
    own: unit(port.domain, law.variable === "e" ? "f" : "e"),
    left: unit(port.domain, law.variable),
  };
  const gaining = (x: number) => sign * x * at(x) < -1e-12 * Math.abs(x) * Math.abs(at(x));
  const x = samples(reach(port.domain, law.variable === "e" ? 1 : 0)).find(gaining);
  if (x === undefined) return null;
  const ownName = law.variable === "e" ? "f" : "e";
  const power = quantityText(x * at(x), WATT, 4);
  const shown = `at ${ownName} = ${quantityText(x, units.own, 4)} it gives ${law.variable} = ${quantityText(at(x), units.left, 4)}, so that e*f = ${power}`;
  const linear = linearSlope(graph, law, own, at);
  const message =
    linear === null
      ? `The law of \`${node.name}\` creates power: ${shown}.`
      : `The law of \`${node.name}\` creates power: its value is ${quantityText(linear, unitOf(divide(units.left.dimension, units.own.dimension)), 4)}, and a resistor's is not negative.`;
  return finding("not-passive", law.span, message, {
    facts: linear === null ? [] : [{ message: shown, span: law.span }],
  });
}

/** A product of the own variable and parameters, as nearly all laws are: 1 or -1; 0 for anything else. */
function signOfSlope(right: Expr, own: Symbol, valueOf: ValueOf): number {
  let sign = 1;
  let owns = 0;
  for (const factor of right.op === "product" ? right.args : [right]) {
    if (factor === own) {
      owns += 1;
      continue;
    }
    const base = factor.op === "power" && factor.args[1].value === -1 ? factor.args[0] : factor;
    const value =
      base.op === "number" ? base.value : base.op === "symbol" ? valueOf(base as Symbol) : undefined;
    if (value === undefined) return 0;
    sign *= Math.sign(value);
  }
  return owns === 1 ? sign : 0;
}

/** The value of e = R*f or f = G*e; null for a law with an offset or a curve to it. */
function linearSlope(graph: FlatGraph, law: Relation, own: Symbol, at: (x: number) => number): number | null {
  const form = linearForms(graph.pool, new Set([own]))(law.right);
  return form === null || at(0) !== 0 ? null : at(1);
}

/** Ports of a linear field: y_i = Σ a_ij·x_j, with x_i and y_i the effort and flow of one port. */
function field(graph: FlatGraph, node: FlatNode, valueOf: ValueOf): Finding | null {
  const laws = node.laws.filter((each): each is Relation => each.kind === "relation");
  if (laws.length !== node.ports.length) return null;
  const owns = node.ports.map((port, index) => {
    const { effort, flow } = graph.bonds[port.bond];
    return laws.find((law) => law.port === index)?.variable === "e" ? flow : effort;
  });
  const formOf = linearForms(graph.pool, new Set(owns));
  const matrix: number[][] = [];
  for (const [index, port] of node.ports.entries()) {
    const law = laws.find((each) => each.port === index);
    const form = law === undefined ? null : formOf(law.right);
    if (form === null) return null;
    const sign = port.end === "to" ? 1 : -1;
    const row = owns.map((own) => {
      const coefficient = form.coefficients.get(own);
      return coefficient === undefined
        ? 0
        : sign * evaluate(coefficient, (symbol) => valueOf(symbol) ?? Number.NaN);
    });
    if (!row.every(Number.isFinite)) return null;
    matrix.push(row);
  }
  const gained = powerGained(matrix);
  if (gained === null) return null;
  const point = gained.direction.flatMap((x, i) => {
    const { name, domain } = node.ports[i];
    const variable = owns[i] === graph.bonds[node.ports[i].bond].effort ? "e" : "f";
    return x === 0 ? [] : [`${name}.${variable} = ${quantityText(x, unit(domain, variable), 4)}`];
  });
  const message = `The laws of \`${node.name}\` create power: at ${point.join(", ")} the power that it takes is ${quantityText(gained.power, WATT, 4)}.`;
  return finding("not-passive", laws[0].span, message);
}

const WATT = parseUnit("W") as Unit;

function unit(domain: Domain, variable: "e" | "f" | "p" | "q"): Unit {
  return unitOfVariable(domain, variable);
}

/**
 * How far efforts and flows of machines reach, in SI: a fit to measured points may well go wrong beyond it, and nobody
 * is helped by being told. Our own choice.
 */
const REACH: Readonly<Record<string, readonly [effort: number, flow: number]>> = {
  translation: [1e6, 10],
  rotation: [1e5, 1e3],
  electrical: [1e3, 1e3],
  hydraulic: [4e7, 1e-2],
  magnetic: [1e4, 1e3],
  acoustic: [1e3, 1],
};

function reach(domain: Domain, which: 0 | 1): number {
  return (REACH[domain.name] ?? [1, 1])[which];
}

/** Both signs, from 1 downwards by the half decade first, so that a finding speaks of a plain number, then up to the reach. */
function samples(most: number): number[] {
  const sizes: number[] = [];
  for (let decade = 0; 10 ** decade <= most; decade += 1) sizes.push(10 ** decade, 3 * 10 ** decade);
  const first = Math.min(1, most);
  for (let decade = 0; decade > -7; decade -= 1) sizes.push(first * 10 ** decade, 0.3 * first * 10 ** decade);
  return sizes.filter((size) => size <= most).flatMap((size) => [size, -size]);
}
