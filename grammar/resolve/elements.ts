import { type Fix, finding } from "../diagnostics/finding.ts";
import { type Draft, type DraftNode, type End, spanOf } from "./draft.ts";
import { reversingFix } from "./reversing-fix.ts";

/** Each node has the bonds its kind has ports for, in the direction its kind takes power. */
export function checkElements(draft: Draft): void {
  for (const node of draft.nodes) {
    if (node.type === "port") continue;
    if (checkNode(draft, node)) continue;
    draft.broken = true;
    // Laws speak of ports that are not there, which was said.
    const named = node.declaration.kind === "element" && node.declaration.ports !== null;
    if (named || node.type === "IC") node.suspect = true;
  }
}

const MAY_HAVE_PORTS: ReadonlySet<string> = new Set(["R", "C", "I", "IC"]);

function checkNode(draft: Draft, node: DraftNode): boolean {
  if (node.suspect) return false;
  const { ends } = node;
  const at = spanOf(node.instance, node.declaration.name.range);
  if (ends.length === 0) {
    if (!draft.unread) draft.report(finding("unconnected", at, `\`${node.local}\` has no bond.`));
    return false;
  }
  if (node.type === "0" || node.type === "1") return true;
  const ports = node.declaration.kind === "element" ? node.declaration.ports : null;
  if (ports !== null && !MAY_HAVE_PORTS.has(node.type)) {
    draft.report(
      finding(
        "wrong-port-count",
        at,
        `${node.type} ${node.local} has no ports with names; only R, C, I and IC can have them.`,
      ),
    );
    return false;
  }
  if (node.type === "IC" && ports === null) {
    draft.report(
      finding(
        "wrong-port-count",
        at,
        `IC ${node.local} needs ports with names, as in \`IC ${node.local}(coil, plunger)\`.`,
      ),
    );
    return false;
  }
  if (ports !== null) return checkField(draft, node);
  return node.type === "TF" || node.type === "GY" || node.type === "RS"
    ? checkTwoPort(draft, node)
    : checkOnePort(draft, node);
}

function checkOnePort(draft: Draft, node: DraftNode): boolean {
  const [end, second] = node.ends;
  if (second !== undefined) {
    draft.report(
      finding(
        "wrong-port-count",
        spanOf(second.instance, second.range),
        `${node.type} ${node.local} has one port, but ${node.ends.length} bonds; a junction joins what shares an effort or a flow.`,
        {
          facts: bondFacts(node.ends),
        },
      ),
    );
    return false;
  }
  if (node.type === "Se" || node.type === "Sf" || end.side === "to") return true;
  const fix: Fix | undefined = reversingFix(end);
  draft.report(
    finding(
      "reversed-passive",
      spanOf(end.instance, end.range),
      `${node.type} ${node.local} takes power, so its bond points at it; here the bond leaves it.`,
      { fix },
    ),
  );
  return false;
}

function checkTwoPort(draft: Draft, node: DraftNode): boolean {
  const into = node.ends.filter(({ side }) => side === "to");
  const out = node.ends.filter(({ side }) => side === "from");
  if (into.length === 1 && out.length === 1) {
    into[0].port = "in";
    out[0].port = "out";
    return true;
  }
  if (draft.unread && node.ends.length < 2) return false;
  const at = spanOf(node.instance, node.declaration.name.range);
  draft.report(
    finding(
      "wrong-port-count",
      at,
      `${node.type} ${node.local} needs one bond that points at it, its \`in\`, and one that leaves it, its \`out\`; here ${into.length} ${into.length === 1 ? "points" : "point"} at it and ${out.length} ${out.length === 1 ? "leaves" : "leave"} it.`,
      {
        facts: bondFacts(node.ends),
      },
    ),
  );
  return false;
}

function checkField(draft: Draft, node: DraftNode): boolean {
  const ports = node.declaration.kind === "element" ? (node.declaration.ports ?? []) : [];
  let right = true;
  const names = new Set<string>();
  for (const port of ports) {
    if (names.has(port.name.text)) {
      draft.report(
        finding(
          "duplicate-name",
          spanOf(node.instance, port.range),
          `${node.local} has a port \`${port.name.text}\` already.`,
        ),
      );
      return false;
    }
    names.add(port.name.text);
    const ends = node.ends.filter((end) => end.port === port.name.text);
    const name = `${node.local}.${port.name.text}`;
    if (ends.length === 0) {
      if (!draft.unread)
        draft.report(
          finding("unconnected", spanOf(node.instance, port.range), `The port \`${name}\` has no bond.`),
        );
      right = false;
    } else if (ends.length > 1) {
      draft.report(
        finding(
          "wrong-port-count",
          spanOf(ends[1].instance, ends[1].range),
          `The port \`${name}\` has ${ends.length} bonds; it takes one.`,
        ),
      );
      right = false;
    } else if ((ends[0].side === "from") !== port.gives) {
      const [end] = ends;
      draft.report(
        finding(
          "port-direction",
          spanOf(end.instance, end.range),
          `The port \`${name}\` ${port.gives ? "gives power, so its bond leaves it" : "takes power, so its bond points at it"}; here the arrow points the other way.`,
          {
            facts: [{ message: "declared here", span: spanOf(node.instance, port.range) }],
            fix: port.gives ? undefined : reversingFix(end),
          },
        ),
      );
      right = false;
    }
  }
  return right;
}

function bondFacts(ends: readonly End[]) {
  return ends.slice(0, 6).map((end) => ({
    message: end.side === "to" ? "this bond points at it" : "this bond leaves it",
    span: spanOf(end.instance, end.range),
  }));
}
