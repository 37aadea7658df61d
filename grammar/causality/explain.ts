import type { FlatNode } from "../resolve/graph.ts";
import type { CausalGraph, Reason, ReasonStep, Stroke } from "./strokes.ts";

/** Why a bond's stroke stands: from what leaves no choice down to the bond itself, each step after its premises. */
export function explainStroke(causal: CausalGraph, bond: number): ReasonStep[] {
  return chainTo(causal, [bond]).map((index) => stepOf(causal, index));
}

/** The bonds that the given ones rest on, themselves included, each after its premises. */
export function chainTo(causal: CausalGraph, bonds: readonly number[]): number[] {
  const done = new Set<number>();
  const order: number[] = [];
  const stack = bonds.map((bond) => ({ bond, next: 0 })).reverse();
  const entered = new Set<number>(bonds);
  while (stack.length > 0) {
    const top = stack[stack.length - 1];
    const premises = causal.reasons[top.bond]?.premises ?? [];
    while (top.next < premises.length && entered.has(premises[top.next])) top.next += 1;
    if (top.next < premises.length) {
      entered.add(premises[top.next]);
      stack.push({ bond: premises[top.next], next: 0 });
    } else {
      stack.pop();
      if (!done.has(top.bond)) order.push(top.bond);
      done.add(top.bond);
    }
  }
  return order;
}

function stepOf(causal: CausalGraph, index: number): ReasonStep {
  const bond = causal.graph.bonds[index];
  const stroke = causal.strokes[index];
  const reason = causal.reasons[index];
  if (stroke === null || reason === null) {
    return {
      bond: index,
      stroke: "to",
      text: `the stroke of ${code(bond.id)} is open, because of a conflict`,
      span: bond.span,
    };
  }
  return {
    bond: index,
    stroke,
    text: reasonText(causal, index, stroke, reason),
    span: reasonSpan(causal, index, reason),
  };
}

/** Where the step stands in the text: a demanded stroke at its arrow, a junction's at the bond, others at the element. */
export function reasonSpan(causal: CausalGraph, index: number, reason: Reason) {
  const bond = causal.graph.bonds[index];
  if (reason.rule === "demanded") return bond.demanded?.span ?? bond.span;
  if (reason.premises.length > 0 || reason.rule === "chosen-bond") return bond.span;
  return causal.graph.nodes[reason.node].span;
}

/** The step in the trade's words. */
export function reasonText(causal: CausalGraph, index: number, stroke: Stroke, reason: Reason): string {
  const { graph } = causal;
  const bond = graph.bonds[index];
  const node = graph.nodes[reason.node];
  const title = titleOf(node);
  /** What the node gives to this bond: it gives the effort where the stroke is at the far end. */
  const here = (bond.from === node.index ? "from" : "to") === stroke;
  const gives = here ? "flow" : "effort";
  switch (reason.rule) {
    case "source":
      return `${title} sets the ${gives} of ${code(bond.id)}`;
    case "demanded":
      return `the text demands the stroke of ${code(bond.id)} at ${code(graph.nodes[stroke === "from" ? bond.from : bond.to].name)}`;
    case "one-way-law":
      return `the one-way law of ${title} gives the ${gives} of ${code(bond.id)}`;
    case "heat-bond":
      return `${title} gives the flow of its heat bond ${code(bond.id)}`;
    case "integral-store":
      return `${title} integrates, and so gives the ${gives} of ${code(bond.id)}`;
    case "derivative-store":
      return `${title} cannot integrate: that would contradict ${listBonds(causal, reason.premises)}`;
    case "law-not-invertible":
      return `the law of ${title} cannot be turned round, so it gives the ${gives} of ${code(bond.id)}`;
    case "chosen-resistor":
      return `${title} gives the ${gives} of ${code(bond.id)}, as its law is written; nothing forces it`;
    case "chosen-bond":
      return `the stroke of ${code(bond.id)} is free, and taken at ${code(graph.nodes[stroke === "from" ? bond.from : bond.to].name)}`;
    case "excluded":
      return `the other stroke on ${code(bond.id)} would contradict ${listBonds(causal, reason.premises)}`;
    case "open-port":
      return `open port ${code(node.name)} is taken to give the ${gives} of ${code(bond.id)}`;
    case "transformer":
    case "gyrator":
      return twoPortText(causal, index, gives, reason, title);
    case "junction":
      return junctionText(causal, index, node, gives, reason);
  }
}

function junctionText(
  causal: CausalGraph,
  index: number,
  node: FlatNode,
  gives: string,
  reason: Reason,
): string {
  const variable = node.kind === "0" ? "effort" : "flow";
  const bond = causal.graph.bonds[index];
  const title = titleOf(node);
  if (gives === variable) {
    return `${title} has its ${variable} from ${listBonds(causal, reason.premises)}, and passes it on to ${code(bond.id)}`;
  }
  if (reason.premises.length === 0)
    return `${title} has no bond but ${code(bond.id)}, which must bring its ${variable}`;
  return `no other bond of ${title} brings its ${variable}, so ${code(bond.id)} must`;
}

function twoPortText(
  causal: CausalGraph,
  index: number,
  gives: string,
  reason: Reason,
  title: string,
): string {
  const given = reason.rule === "transformer" ? gives : gives === "effort" ? "flow" : "effort";
  const premise = listBonds(causal, reason.premises);
  const id = code(causal.graph.bonds[index].id);
  return reason.rule === "transformer"
    ? `${title} passes the ${given} of ${premise} on to ${id}`
    : `${title} turns the ${given} of ${premise} into the ${gives} of ${id}`;
}

/** 1-junction `shaft`, Se `supply`, open port `top`. */
export function titleOf(node: FlatNode): string {
  const name = code(node.name);
  if (node.kind === "0" || node.kind === "1") return `${node.kind}-junction ${name}`;
  if (node.kind === "port") return `open port ${name}`;
  return `${node.modulated ? "M" : ""}${node.kind} ${name}`;
}

/** Names stand in backquotes in every message. */
export function code(name: string): string {
  return `\`${name}\``;
}

const NAMED_BONDS = 4;

function listBonds(causal: CausalGraph, bonds: readonly number[]): string {
  const names = bonds.slice(0, NAMED_BONDS).map((bond) => code(causal.graph.bonds[bond].id));
  const rest = bonds.length - names.length;
  if (rest > 0) return `${names.join(", ")} and ${rest} more`;
  if (names.length === 0) return "the junctions themselves";
  const last = names.pop() as string;
  return names.length === 0 ? last : `${names.join(", ")} and ${last}`;
}
