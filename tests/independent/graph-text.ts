import { type Dimension, DOMAINS, integralOf, over, quantity, unitOf } from "./physical-units.ts";
import type { BondEnd, RandomGraph, RandomNode } from "./random-graph.ts";

/** A random graph in the notation: the statements of a system, one a line. */
export function linesOf(graph: RandomGraph): string[] {
  const { nodes, bonds, tracks, inputs } = graph;
  const signalUnits = new Map<string, Dimension>([["time", [0, 0, 1, 0]]]);
  for (const { name } of inputs) signalUnits.set(name, [0, 0, 0, 0]);
  for (const { name, of } of tracks) signalUnits.set(name, integralOf(common(nodes[of])));
  const lines = inputs.filter(({ name }) => name.startsWith("w_")).map(({ name }) => `input ${name} : 1`);
  for (const { name, of } of tracks)
    lines.push(`track ${name} = ${nodes[of].name}.${nodes[of].kind === "0" ? "e" : "f"}`);
  for (const node of nodes) {
    const factor = modulationOf(node, signalUnits);
    if (node.kind === "0" || node.kind === "1") lines.push(`${node.kind} ${node.name} : ${node.domains[0]}`);
    else if (node.kind === "Se" || node.kind === "Sf") lines.push(...source(node));
    else if (node.kind === "TF" || node.kind === "GY") lines.push(...twoPort(node, factor));
    else lines.push(...field(node, factor));
  }
  const end = ({ node, port }: BondEnd) =>
    isField(nodes[node]) ? `${nodes[node].name}.${PORTS[port]}` : nodes[node].name;
  for (const [from, to] of bonds) lines.push(`${end(from)} -> ${end(to)}`);
  return lines;
}

export function textOf(graph: RandomGraph): string {
  return `notation 1\nsystem Random {\n${linesOf(graph).join("\n")}\n}\n`;
}

/** `a`, `b`, `c` of a field. */
export const PORTS = ["a", "b", "c"];

export function isField({ kind, domains }: RandomNode): boolean {
  return (kind === "R" || kind === "C" || kind === "I" || kind === "IC") && domains.length > 1;
}

/** What a store integrates, at each of its ports; empty for what is no store. */
export function storedBy({ kind, domains }: RandomNode): readonly ("p" | "q")[] {
  if (kind === "IC") return ["p", "q"];
  return kind === "C" ? domains.map(() => "q") : kind === "I" ? domains.map(() => "p") : [];
}

function common({ kind, domains: [domain] }: RandomNode): Dimension {
  return kind === "0" ? DOMAINS[domain].effort : DOMAINS[domain].flow;
}

function modulationOf({ modulation }: RandomNode, units: ReadonlyMap<string, Dimension>): string {
  if (modulation === null) return "";
  return `*(1 + (${modulation}/(${quantity(1, units.get(modulation) ?? [0, 0, 0, 0])}))^2/4)`;
}

function source({ name, kind, domains: [domain] }: RandomNode): string[] {
  const [variable, unit] = kind === "Se" ? ["e", DOMAINS[domain].effort] : ["f", DOMAINS[domain].flow];
  return [`input v_${name} : ${unitOf(unit as Dimension)}`, `${kind} ${name} ${variable} = v_${name}`];
}

function twoPort({ name, kind, domains, matrix: [[ratio]] }: RandomNode, factor: string): string[] {
  const [into, out] = domains.map((domain) => DOMAINS[domain]);
  const unit = over(kind === "TF" ? out.flow : out.effort, into.flow);
  return [
    `param v_${name} = ${quantity(ratio, unit)}`,
    `${kind} ${name} out.${kind === "TF" ? "f" : "e"} = v_${name}${factor}*in.f`,
  ];
}

/** The law of a one-port or a field: a parameter for each entry of its matrix. */
function field(node: RandomNode, factor: string): string[] {
  const { name, kind, domains, matrix, inverse, energy, curved } = node;
  const stored = storedBy(node);
  const several = domains.length > 1;
  const variables = domains.map((domain, port) => {
    const { effort, flow } = DOMAINS[domain];
    const at = (variable: string) => (several ? `${PORTS[port]}.${variable}` : variable);
    const isQ = kind === "R" || stored[port] === "q";
    const told = kind === "R" ? at("f") : at(stored[port]);
    const toldUnit = kind === "R" ? flow : integralOf(isQ ? flow : effort);
    return { told, toldUnit, answer: at(isQ ? "e" : "f"), answerUnit: isQ ? effort : flow };
  });
  const own = (i: number, j: number) => `v_${name}_${i}${j}`;
  const lines = matrix.flatMap((row, i) =>
    row.flatMap((value, j) => {
      const [left, right] = [variables[i], variables[j]];
      const unit = inverse ? over(left.toldUnit, right.answerUnit) : over(left.answerUnit, right.toldUnit);
      return energy && j < i ? [] : [`param ${own(i, j)} = ${quantity(value, unit)}`];
    }),
  );
  const head = several ? `${kind} ${name}(${PORTS.slice(0, domains.length).join(", ")})` : `${kind} ${name}`;
  const [{ told, toldUnit, answer }] = variables;
  if (curved && kind === "R")
    lines.push(`${head} ${answer} = ${own(0, 0)}*${told}*abs(${told}/(${quantity(1, toldUnit)}))`);
  else if (curved) {
    const size = `(${told}/(${quantity(1, toldUnit)}))`;
    lines.push(
      energy
        ? `${head} energy = ${own(0, 0)}*${told}^2*(1/2 + ${size}^2/40)`
        : `${head} ${answer} = ${own(0, 0)}*${told}*(1 + ${size}^2/10)`,
    );
  } else if (energy) {
    const terms = matrix.flatMap((row, i) =>
      row.flatMap((_, j) =>
        j < i ? [] : [`${own(i, j)}*${variables[i].told}*${variables[j].told}${i === j ? "/2" : ""}`],
      ),
    );
    lines.push(`${head} energy = ${terms.join(" + ")}`);
  } else {
    const laws = matrix.map((row, i) => {
      const terms = row.map(
        (_, j) => `${own(i, j)}${factor}*${inverse ? variables[j].answer : variables[j].told}`,
      );
      return `${inverse ? variables[i].told : variables[i].answer} = ${terms.join(" + ")}`;
    });
    lines.push(`${head} ${laws.join(", ")}`);
  }
  return lines;
}
