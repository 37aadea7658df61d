import type { DiagramModel, DiagramNode } from "./diagram-model.ts";
import { joinsDomains } from "./drawing-domains.ts";
import { GAP, type Member, REACH, rowsOf, SHORTEST_BOND } from "./drawing-rows.ts";
import { findSpine, type Hanging, isJunction, type Link, type Spine } from "./drawing-spine.ts";
import {
  type NamePlace,
  nameBelow,
  nodeReach,
  nodeWidth,
  symbolHalf,
  writtenWidth,
} from "./drawing-symbols.ts";

/**
 * Each node of the spine with what hangs on it, as one block that the layout moves as a whole: a source before it, a
 * load behind it where the chain begins or ends, the other one-ports in a row above and a row below.
 */
export interface Block {
  readonly hub: number;
  /** The hub itself first. Positions are relative to the hub's middle. */
  readonly members: readonly Member[];
  /** What the block takes around the hub's middle. */
  readonly extent: Extent;
}

export interface Extent {
  readonly left: number;
  readonly right: number;
  readonly up: number;
  readonly down: number;
}

export interface Arrangement {
  readonly blocks: readonly Block[];
  readonly links: readonly Link[];
}

/** Between bonds that leave a hub on one side. */
export const LANE = 14;
/** Of a domain's name, what does not fit between two blocks anyway. */
const LABEL_ROOM = 32;

export function arrange(model: DiagramModel): Arrangement {
  const spine = findSpine(model);
  const lanes = { near: model.nodes.map(() => 0), far: model.nodes.map(() => 0) };
  for (const { near, far } of spine.links) {
    lanes.far[near] += 1;
    lanes.near[far] += 1;
  }
  const joining = joinsDomains(model);
  const blocks = spine.hubs.map((hub): Block => {
    const [before, after] = [lanes.near[hub], lanes.far[hub]];
    const members = arrangeHub(model, spine, hub, before, after);
    return {
      hub,
      members,
      extent: extentOf(model, members, liftOf(before, after), joining.has(model.nodes[hub].id)),
    };
  });
  return { blocks, links: spine.links };
}

function arrangeHub(
  model: DiagramModel,
  spine: Spine,
  hub: number,
  lanesBefore: number,
  lanesAfter: number,
): Member[] {
  const node = model.nodes[hub];
  const leaves = [...spine.leaves[hub]];
  const source = ({ node: leaf }: Hanging) => /S[ef]/.test(model.nodes[leaf].kind);
  const few = !isJunction(node);
  const take = (leaf: Hanging | undefined) =>
    leaf === undefined ? [] : leaves.splice(leaves.indexOf(leaf), 1);

  // In line with the spine, on a side where no bond of the spine leaves.
  const all = leaves.length;
  const first = lanesBefore > 0 ? [] : take(leaves.find(source) ?? (few || all > 3 ? leaves[0] : undefined));
  const alone = few || leaves.length === 1 || leaves.length > 2;
  const last = lanesAfter > 0 ? [] : take(leaves.find(source) ?? (alone ? leaves[0] : undefined));

  const lift = liftOf(lanesBefore, lanesAfter);
  const { members, name } = rowsOf(model, spine, hub, leaves, lift);
  const inLine = (side: -1 | 1) => (leaf: Hanging) => besideHub(model, leaf, node, name, side);
  return [
    { node: hub, at: { x: 0, y: 0 }, name },
    ...first.map(inLine(-1)),
    ...last.map(inLine(1)),
    ...members,
  ];
}

/** As near as its bond needs, and as what is written under both allows. */
function besideHub(
  model: DiagramModel,
  { node }: Hanging,
  hub: DiagramNode,
  name: NamePlace,
  side: -1 | 1,
): Member {
  const leaf = model.nodes[node];
  const [half, leafHalf] = [symbolHalf(hub).x, symbolHalf(leaf).x];
  const written = name.anchor === "middle" ? writtenWidth(hub) / 2 : half;
  const reach = Math.max(
    REACH,
    half + SHORTEST_BOND + leafHalf,
    written + GAP + (name.at.y < 0 ? leafHalf : writtenWidth(leaf) / 2),
    half + GAP + writtenWidth(leaf) / 2,
  );
  return { node, at: { x: side * reach, y: 0 }, name: nameBelow(leaf) };
}

/** How far the outermost lane is from the hub's level. */
function liftOf(lanesBefore: number, lanesAfter: number): number {
  return (Math.max(lanesBefore, lanesAfter, 1) - 1) * (LANE / 2);
}

function extentOf(model: DiagramModel, members: readonly Member[], lift: number, joins: boolean): Extent {
  const hub = symbolHalf(model.nodes[members[0].node]);
  // What joins two domains has their names written over its bonds.
  const aside = hub.x + (joins ? LABEL_ROOM : 0);
  const extent = { left: aside, right: aside, up: lift + hub.y, down: lift + hub.y };
  for (const { node, at, name } of members) {
    const own = model.nodes[node];
    const half = nodeWidth(own) / 2;
    const beside = Math.abs(name.at.x) + writtenWidth(own);
    const before = name.anchor === "end" ? beside : name.anchor === "start" ? symbolHalf(own).x : half;
    const after = name.anchor === "start" ? beside : name.anchor === "end" ? symbolHalf(own).x : half;
    extent.left = Math.max(extent.left, before - at.x);
    extent.right = Math.max(extent.right, after + at.x);
    const symbol = symbolHalf(own).y;
    extent.up = Math.max(extent.up, (name.at.y < 0 ? nodeReach(own) : symbol) - at.y);
    extent.down = Math.max(extent.down, (name.at.y > 0 ? nodeReach(own) : symbol) + at.y);
  }
  return {
    left: extent.left + GAP / 2,
    right: extent.right + GAP / 2,
    up: extent.up + GAP / 2,
    down: extent.down + GAP / 2,
  };
}
