import type { DiagramModel } from "./diagram-model.ts";
import { LETTERING, type Point } from "./drawing.ts";
import { joinsDomains } from "./drawing-domains.ts";
import { findSpine, type Hanging, type Link, type Spine } from "./drawing-spine.ts";
import { type NamePlace, nameAbove, nameBelow, nodeReach, nodeWidth, symbolHalf } from "./drawing-symbols.ts";

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

export interface Member {
  readonly node: number;
  readonly at: Point;
  readonly name: NamePlace;
}

export interface Arrangement {
  readonly blocks: readonly Block[];
  readonly links: readonly Link[];
}

/** From a hub's middle to the middle of what hangs on it. */
const REACH = 56;
/** Between what stands side by side; half of it is kept clear around a block. */
const GAP = 12;
/** Between bonds that leave a hub on one side. */
export const LANE = 14;
/** Of a domain's name, what does not fit between two blocks anyway. */
const LABEL_ROOM = 24;

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

interface Item {
  readonly width: number;
  /** Puts the item with its middle at `at`, on the side `up` (−1) or down (+1). */
  readonly place: (at: Point, side: -1 | 1) => Member[];
}

function arrangeHub(
  model: DiagramModel,
  spine: Spine,
  hub: number,
  lanesBefore: number,
  lanesAfter: number,
): Member[] {
  const node = model.nodes[hub];
  const half = symbolHalf(node);
  const members: Member[] = [];
  const leaves = [...spine.leaves[hub]];
  const source = ({ node: leaf }: Hanging) => /S[ef]/.test(model.nodes[leaf].kind);
  const few = node.kind !== "0" && node.kind !== "1";

  /** A leaf in line with the spine, on a side where no bond of the spine leaves. */
  const inLine = (leaf: Hanging, side: -1 | 1) => {
    leaves.splice(leaves.indexOf(leaf), 1);
    const reach = Math.max(REACH, half.x + 18 + nodeWidth(model.nodes[leaf.node]) / 2);
    members.push({ node: leaf.node, at: { x: side * reach, y: 0 }, name: nameBelow(model.nodes[leaf.node]) });
  };
  if (lanesBefore === 0) {
    const first = leaves.find(source) ?? (few || leaves.length > 3 ? leaves[0] : undefined);
    if (first !== undefined) inLine(first, -1);
  }
  if (lanesAfter === 0) {
    const alone = few || leaves.length === 1 || leaves.length > 2;
    const last = leaves.find(source) ?? (alone ? leaves[0] : undefined);
    if (last !== undefined) inLine(last, 1);
  }

  const rows = { up: [] as Item[], down: [] as Item[] };
  for (const item of spine.hanging[hub].map((h) => hangingItem(model, spine, h)))
    narrower(rows, item, "down").push(item);
  for (const item of leaves.map((leaf) => leafItem(model, leaf))) narrower(rows, item, "up").push(item);

  const lift = liftOf(lanesBefore, lanesAfter);
  const up = placeRow(rows.up, -1, lift);
  const down = placeRow(rows.down, 1, lift);
  const name = hubName(model, hub, up, down, lift);
  return [{ node: hub, at: { x: 0, y: 0 }, name }, ...members, ...up, ...down];
}

/** How far the outermost lane is from the hub's level. */
function liftOf(lanesBefore: number, lanesAfter: number): number {
  return (Math.max(lanesBefore, lanesAfter, 1) - 1) * (LANE / 2);
}

function narrower(rows: { up: Item[]; down: Item[] }, item: Item, preferred: "up" | "down"): Item[] {
  const other = preferred === "up" ? "down" : "up";
  return rowWidth(rows[other]) < rowWidth(rows[preferred]) - (rows[preferred].length === 0 ? item.width : 0)
    ? rows[other]
    : rows[preferred];
}

function rowWidth(row: readonly Item[]): number {
  return row.reduce((sum, { width }) => sum + width + GAP, 0);
}

/** A row is set farther off the longer it is, so that no bond to its end runs through its middle. */
function placeRow(row: readonly Item[], side: -1 | 1, lift: number): Member[] {
  const y = side * Math.max(REACH, 12 * row.length + 26, lift + 48);
  const width = rowWidth(row) - GAP;
  let x = -width / 2;
  const members: Member[] = [];
  for (const item of row) {
    members.push(...item.place({ x: x + item.width / 2, y }, side));
    x += item.width + GAP;
  }
  return members;
}

function leafItem(model: DiagramModel, { node }: Hanging): Item {
  const own = model.nodes[node];
  const place = (at: Point, side: -1 | 1): Member[] => [
    { node, at, name: side < 0 ? nameAbove(own) : nameBelow(own) },
  ];
  return { width: nodeWidth(own), place };
}

/** A junction off the spine: its one-ports left, right and beyond it; a single one beyond. */
function hangingItem(model: DiagramModel, spine: Spine, { node }: Hanging): Item {
  const own = model.nodes[node];
  const leaves = spine.leaves[node].map((leaf) => model.nodes[leaf.node]);
  const indices = spine.leaves[node].map((leaf) => leaf.node);
  const [left, right, beyond] = leaves.length === 1 ? [-1, -1, 0] : [0, 1, leaves.length > 2 ? 2 : -1];
  const reach = (leaf: number) => Math.max(REACH, symbolHalf(own).x + 18 + nodeWidth(leaves[leaf]) / 2);
  const sideways = (leaf: number) =>
    leaf === -1 ? nodeWidth(own) / 2 : reach(leaf) + nodeWidth(leaves[leaf]) / 2;
  const half = Math.max(sideways(left), sideways(right), nodeWidth(own) + 12);
  const place = (at: Point, side: -1 | 1): Member[] => {
    // Beside the bond it hangs on, where the names of its one-ports do not reach.
    const aside = { x: 12, y: side < 0 ? 13 + 0.75 * LETTERING.name.size : -14 };
    const members: Member[] = [{ node, at, name: { at: aside, anchor: "start" } }];
    const beside = (leaf: number, x: number, y: number) => {
      if (leaf === -1) return;
      const name = side < 0 && y !== 0 ? nameAbove(leaves[leaf]) : nameBelow(leaves[leaf]);
      members.push({ node: indices[leaf], at: { x: at.x + x, y: at.y + y }, name });
    };
    beside(left, left === -1 ? 0 : -reach(left), 0);
    beside(right, right === -1 ? 0 : reach(right), 0);
    beside(beyond, 0, side * REACH);
    return members;
  };
  return { width: 2 * half, place };
}

/** Over the hub or under it where no row is; else beside the bond to the row that leaves more room. */
function hubName(
  model: DiagramModel,
  hub: number,
  up: readonly Member[],
  down: readonly Member[],
  lift: number,
): NamePlace {
  const node = model.nodes[hub];
  const raised = ({ at, anchor }: NamePlace, by: number): NamePlace => ({
    at: { x: at.x, y: at.y + by },
    anchor,
  });
  if (down.length === 0 && (up.length > 0 || (node.kind !== "0" && node.kind !== "1")))
    return raised(nameBelow(node), lift);
  if (up.length === 0) return raised(nameAbove(node), -lift);
  if (down.length === 0) return raised(nameBelow(node), lift);
  const flattest = (row: readonly Member[]) => Math.max(0, ...row.map(({ at }) => at.x / Math.abs(at.y)));
  const above = flattest(up) <= flattest(down);
  const baseline = above ? -(12 + lift) : 12 + lift + 0.75 * LETTERING.name.size;
  const height = 12 + lift + LETTERING.name.size;
  return { at: { x: 11 + height * (above ? flattest(up) : flattest(down)), y: baseline }, anchor: "start" };
}

function extentOf(model: DiagramModel, members: readonly Member[], lift: number, joins: boolean): Extent {
  const hub = symbolHalf(model.nodes[members[0].node]);
  // What joins two domains has their names written over its bonds.
  const aside = hub.x + (joins ? LABEL_ROOM : 0);
  const extent = { left: aside, right: aside, up: lift + hub.y, down: lift + hub.y };
  for (const { node, at, name } of members) {
    const own = model.nodes[node];
    const half = nodeWidth(own) / 2;
    const [before, after] =
      name.anchor === "start" ? [symbolHalf(own).x, name.at.x + 2 * half] : [half, half];
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
