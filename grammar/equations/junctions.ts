import type { FlatNode, FlatPort } from "../resolve/graph.ts";
import type { Expr } from "../symbolic/expression.ts";
import type { AssignmentsBuilder } from "./assignments.ts";

/**
 * A 1-junction has one flow, brought by the one bond with its stroke at the far end, and efforts that sum to zero,
 * power counted in; a 0-junction the other way round.
 */
export function assignJunction(into: AssignmentsBuilder, node: FlatNode): void {
  const { pool, bonds } = into.graph;
  const one = node.kind === "1";
  const bringer = node.ports.find((port) => into.givesEffort(port.bond, port.end) === one);
  if (bringer === undefined) return;
  const common = (port: FlatPort) => (one ? bonds[port.bond].flow : bonds[port.bond].effort);
  const summed = (port: FlatPort) => (one ? bonds[port.bond].effort : bonds[port.bond].flow);
  const terms: Expr[] = [];
  for (const port of node.ports) {
    if (port === bringer) continue;
    into.set({
      variable: common(port),
      right: common(bringer),
      residual: null,
      node: node.index,
      rule: "junction-equal",
      span: bonds[port.bond].span,
    });
    const against = port.end === bringer.end;
    terms.push(against ? pool.negate(summed(port)) : summed(port));
  }
  into.set({
    variable: summed(bringer),
    right: pool.sum(terms),
    residual: null,
    node: node.index,
    rule: "junction-sum",
    span: node.span,
  });
}

/**
 * TF: out.f = m*in.f and in.e = m*out.e; GY: out.e = r*in.f and in.e = r*out.f. Either conserves power for any
 * ratio, also a modulated one; the strokes say in which direction the two relations are read.
 */
export function assignTwoPort(into: AssignmentsBuilder, node: FlatNode): void {
  const { pool, bonds } = into.graph;
  const law = node.laws.find((each) => each.kind === "ratio");
  if (law === undefined || node.ports.length !== 2) return;
  const [input, output] = node.ports.map((port) => bonds[port.bond]);
  const givesIn = into.givesEffort(node.ports[0].bond, node.ports[0].end);
  const transformer = node.kind === "TF";
  const { ratio } = law;
  // [variable on the in bond, its partner on the out bond], each in.x = ratio * partner or its inverse.
  const pairs = transformer
    ? ([
        [input.effort, output.effort, true],
        [input.flow, output.flow, false],
      ] as const)
    : ([
        [input.effort, output.flow, true],
        [input.flow, output.effort, false],
      ] as const);
  for (const [own, partner, scaled] of pairs) {
    const setsOwn = (own === input.effort) === givesIn;
    const [variable, from] = setsOwn ? [own, partner] : [partner, own];
    const right = setsOwn === scaled ? pool.product(ratio, from) : pool.divide(from, ratio);
    into.set({
      variable,
      right,
      residual: null,
      node: node.index,
      rule: transformer ? "transformer" : "gyrator",
      span: law.span,
    });
  }
}
