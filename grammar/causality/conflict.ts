import { type Fact, type Finding, type Fix, finding } from "../diagnostics/finding.ts";
import type { FlatNode } from "../resolve/graph.ts";
import { chainTo, code, reasonSpan, reasonText, titleOf } from "./explain.ts";
import { type Clash, opposite } from "./propagation.ts";
import type { CausalGraph, Reason, Stroke } from "./strokes.ts";

/**
 * Two chains set opposite strokes on one bond. `stroke-refused` where a demanded stroke or a one-way law started one
 * of them, since there the text itself can give way; `causal-conflict` where the physics contradicts itself.
 */
export function conflictFinding(causal: CausalGraph, clash: Clash): Finding {
  const { bond, kept, refused } = clash;
  const roots = [kept, refused.reason].flatMap((reason) => rootsOf(causal, bond, reason));
  const asked = roots.find(({ reason }) => reason.rule === "demanded" || reason.rule === "one-way-law");
  const facts = [
    ...chainFacts(causal, bond, opposite(refused.stroke), kept),
    ...chainFacts(causal, bond, refused.stroke, refused.reason),
  ];
  if (asked !== undefined) {
    const { message, fix } = refusedWords(causal, clash, asked);
    return finding("stroke-refused", reasonSpan(causal, asked.bond, asked.reason), message, { facts, fix });
  }
  return finding("causal-conflict", causal.graph.bonds[bond].span, conflictWords(causal, clash), { facts });
}

/** Neither stroke of a bond can stand, though nothing on either side is fixed: the junctions themselves contradict. */
export function singularFinding(causal: CausalGraph, bond: number, first: Clash, second: Clash): Finding {
  const { graph } = causal;
  const nodes = new Set<FlatNode>();
  for (const { bond: met, kept, refused } of [first, second]) {
    for (const node of [graph.bonds[met].from, graph.bonds[met].to, kept.node, refused.reason.node])
      nodes.add(graph.nodes[node]);
  }
  const facts = [...nodes].map((node) => ({ message: `${titleOf(node)} takes part`, span: node.span }));
  const message = `Neither stroke can stand on ${code(graph.bonds[bond].id)}: the junctions round it contradict each other, so their efforts and flows have no solution.`;
  return finding("singular-junctions", graph.bonds[bond].span, message, { facts });
}

function conflictWords(causal: CausalGraph, { bond, kept, refused }: Clash): string {
  const { graph } = causal;
  const { id, from } = graph.bonds[bond];
  const first = reasonText(causal, bond, opposite(refused.stroke), kept);
  const second = reasonText(causal, bond, refused.stroke, refused.reason);
  // The side that sets the stroke at its far end gives the effort; where both do, the effort comes from both ends.
  const keptSide = kept.node === from ? "from" : "to";
  const variable = keptSide === opposite(refused.stroke) ? "flow" : "effort";
  return `The ${variable} of ${code(id)} is set at both ends: ${first}, but ${second}.`;
}

interface Root {
  readonly bond: number;
  readonly reason: Reason;
}

function refusedWords(
  causal: CausalGraph,
  { bond, kept, refused }: Clash,
  asked: Root,
): { message: string; fix?: Fix } {
  const { graph } = causal;
  const own = rootsOf(causal, bond, kept).some(
    (root) => root.bond === asked.bond && root.reason === asked.reason,
  );
  const [other, stroke] = own ? [refused.reason, refused.stroke] : [kept, opposite(refused.stroke)];
  const against = reasonText(causal, bond, stroke, other);
  const demanded = graph.bonds[asked.bond];
  if (asked.reason.rule === "demanded") {
    const message = `The stroke that the text demands on ${code(demanded.id)} cannot stand: ${against}.`;
    const span = demanded.demanded?.span;
    const fix =
      span === undefined
        ? undefined
        : { title: "Leave the stroke to the causality of the model", edits: [{ span, text: "->" }] };
    return { message, fix };
  }
  return {
    message: `The one-way law of ${titleOf(graph.nodes[asked.reason.node])} cannot stand: ${against}.`,
  };
}

function rootsOf(causal: CausalGraph, bond: number, reason: Reason): Root[] {
  if (reason.premises.length === 0) return [{ bond, reason }];
  return chainTo(causal, reason.premises).flatMap((index) => {
    const own = causal.reasons[index];
    return own !== null && own.premises.length === 0 ? [{ bond: index, reason: own }] : [];
  });
}

/** A chain longer than this is shown by both its ends. */
const CHAIN_SHOWN = 12;

function chainFacts(causal: CausalGraph, bond: number, stroke: Stroke, reason: Reason): Fact[] {
  const steps = chainTo(causal, reason.premises).map((index) => {
    const own = causal.reasons[index] as Reason;
    return factOf(causal, index, causal.strokes[index] as Stroke, own);
  });
  steps.push(factOf(causal, bond, stroke, reason));
  if (steps.length <= CHAIN_SHOWN) return steps;
  const left = steps.length - CHAIN_SHOWN;
  return [
    ...steps.slice(0, CHAIN_SHOWN / 2),
    { message: `${left} more steps along the chain` },
    ...steps.slice(-CHAIN_SHOWN / 2),
  ];
}

function factOf(causal: CausalGraph, index: number, stroke: Stroke, reason: Reason): Fact {
  return { message: reasonText(causal, index, stroke, reason), span: reasonSpan(causal, index, reason) };
}
