import type { CausalGraph, Stroke } from "../causality/strokes.ts";
import type { Finding, FindingName } from "../diagnostics/finding.ts";
import type { StateModel } from "../equations/model.ts";
import type { FlatBond, FlatGraph, FlatNode, NodeKind } from "../resolve/graph.ts";
import type { Span } from "../source/span.ts";

/**
 * What a drawing of a bond graph and the table beside it show: plain data without expressions, so that it crosses
 * from the worker that derives to the page that draws, and two of them can be compared by value.
 */
export interface DiagramModel {
  readonly system: string;
  readonly nodes: readonly DiagramNode[];
  readonly bonds: readonly DiagramBond[];
}

export interface DiagramNode {
  /** The full name: `rope.spring`. */
  readonly id: string;
  readonly kind: NodeKind;
  /** The symbol of the trade: `MTF` where the law is modulated; `port` for an open port. */
  readonly symbol: string;
  /** Null for what joins two domains. */
  readonly domain: string | null;
  readonly description: string | null;
  /** A store that other stores settle. */
  readonly dependent: boolean;
  readonly conflict: boolean;
  readonly span: Span;
}

export interface DiagramBond {
  /** As everywhere: `armature->motor`. */
  readonly id: string;
  /** Ids of the nodes; power counts positive from the first to the second. */
  readonly from: string;
  readonly to: string;
  /** The end with the causal stroke; null where causality is open. */
  readonly stroke: Stroke | null;
  /** The end at which the text demands it. */
  readonly demanded: Stroke | null;
  readonly conflict: boolean;
  readonly domain: string;
  readonly effortUnit: string;
  readonly flowUnit: string;
  readonly span: Span;
}

const CONFLICTS: ReadonlySet<FindingName> = new Set([
  "causal-conflict",
  "stroke-refused",
  "singular-junctions",
]);

/** `causal` and `model` are null where the chain stopped before them; the graph is then drawn without what they tell. */
export function diagramModel(
  graph: FlatGraph,
  causal: CausalGraph | null,
  model: StateModel | null,
  findings: readonly Finding[] = [],
): DiagramModel {
  const dependent = dependentNodes(causal, model);
  const conflicts = findings.filter(({ name }) => CONFLICTS.has(name)).map(({ span }) => span);
  const inConflict = (span: Span) => conflicts.some((conflict) => nested(conflict, span));
  // A bond has no room for the word: what it meets at carries it.
  const meeting = new Set(
    graph.bonds.filter(({ span }) => inConflict(span)).flatMap((bond) => meetingOf(graph, bond)),
  );
  return {
    system: graph.system,
    nodes: graph.nodes.map((node) => ({
      id: node.name,
      kind: node.kind,
      symbol: symbolOf(node),
      domain: node.domain?.name ?? null,
      description: node.description,
      dependent: dependent.has(node.index),
      conflict: inConflict(node.span) || meeting.has(node.index),
      span: node.span,
    })),
    bonds: graph.bonds.map((bond) => ({
      id: bond.id,
      from: graph.nodes[bond.from].name,
      to: graph.nodes[bond.to].name,
      stroke: causal?.strokes[bond.index] ?? null,
      demanded: bond.demanded?.end ?? null,
      conflict: inConflict(bond.span),
      domain: bond.domain.name,
      effortUnit: bond.domain.effort.text,
      flowUnit: bond.domain.flow.text,
      span: bond.span,
    })),
  };
}

/** By the state model where there is one: a store with derivative causality may still be a state there. */
function dependentNodes(causal: CausalGraph | null, model: StateModel | null): ReadonlySet<number> {
  if (model !== null) return new Set(model.dependent.map(({ node }) => node));
  return new Set((causal?.stores ?? []).filter(({ integral }) => !integral).map(({ node }) => node));
}

/** The ends of a bond that pass causality on; both where neither does. */
function meetingOf(graph: FlatGraph, { from, to }: FlatBond): number[] {
  const passing = [from, to].filter((node) => graph.nodes[node].ports.length > 1);
  return passing.length > 0 ? passing : [from, to];
}

function symbolOf(node: FlatNode): string {
  return node.modulated ? `M${node.kind}` : node.kind;
}

function nested(a: Span, b: Span): boolean {
  if (a.file !== b.file) return false;
  return (a.start <= b.start && b.end <= a.end) || (b.start <= a.start && a.end <= b.end);
}
