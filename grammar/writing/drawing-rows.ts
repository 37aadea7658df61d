import type { DiagramModel, DiagramNode } from "./diagram-model.ts";
import { LETTERING, type Point } from "./drawing.ts";
import { type Hanging, isJunction, type Spine } from "./drawing-spine.ts";
import {
  type NamePlace,
  nameAbove,
  nameBelow,
  nodeWidth,
  symbolHalf,
  writtenHeight,
  writtenWidth,
} from "./drawing-symbols.ts";

/** A node in its place relative to the hub it belongs to. */
export interface Member {
  readonly node: number;
  readonly at: Point;
  readonly name: NamePlace;
}

/** From a hub's middle to the middle of what hangs on it. */
export const REACH = 56;
/** Between what stands side by side; half of it is kept clear around a block. */
export const GAP = 12;
/** Room for the half arrow and both strokes. */
export const SHORTEST_BOND = 34;

interface Item {
  readonly width: number;
  /** What it needs between its middle and the hub's bonds: half its symbol, and what is written before it. */
  readonly inwards: number;
  readonly hangs: boolean;
  /** Puts the item with its middle at `at`, on the side `up` (−1) or down (+1). */
  readonly place: (at: Point, side: Side) => Member[];
}

type Side = -1 | 1;

/**
 * What hangs on a hub in a row above and a row below, junctions below first, both about as wide; and where this leaves
 * room for the hub's own name. `lift` is how far bonds leave the hub above and below its level.
 */
export function rowsOf(
  model: DiagramModel,
  spine: Spine,
  hub: number,
  leaves: readonly Hanging[],
  lift: number,
): { readonly members: Member[]; readonly name: NamePlace } {
  const node = model.nodes[hub];
  const rows: Rows = { up: [], down: [] };
  for (const item of spine.hanging[hub].map((one) => hangingItem(model, spine, one))) {
    narrower(rows, item, "down").push(item);
  }
  for (const item of leaves.map((leaf) => leafItem(model, leaf))) narrower(rows, item, "up").push(item);

  const named = nameSide(node, rows);
  const beside = named === "over" || named === "under" ? null : named;
  const up = placeRow(node, rows.up, -1, lift, beside === -1);
  const down = placeRow(node, rows.down, 1, lift, beside === 1);
  return { members: [...up, ...down], name: hubName(node, named, up, down, lift) };
}

interface Rows {
  readonly up: Item[];
  readonly down: Item[];
}

/** Over the hub or under it where no row is; else beside the bonds to the row that leaves more room. */
function nameSide(node: DiagramNode, { up, down }: Rows): "over" | "under" | Side {
  if (down.length === 0 && (up.length > 0 || !isJunction(node))) return "under";
  if (up.length === 0) return "over";
  const crowded = (row: readonly Item[]) => row.length + (row.some(({ hangs }) => hangs) ? 100 : 0);
  return crowded(up) <= crowded(down) ? -1 : 1;
}

function hubName(
  node: DiagramNode,
  named: "over" | "under" | Side,
  up: readonly Member[],
  down: readonly Member[],
  lift: number,
): NamePlace {
  if (named === "over") return moved(nameAbove(node), -lift);
  if (named === "under") return moved(nameBelow(node), lift);
  // Right of every bond to the row, also where these lean over.
  const lean = largest((named === -1 ? up : down).map(({ at }) => at.x / Math.abs(at.y)));
  const { at } = aside(node, named, lift);
  return { at: { x: at.x + lean * (Math.abs(at.y) + writtenHeight(node)), y: at.y }, anchor: "start" };
}

function moved({ at, anchor }: NamePlace, by: number): NamePlace {
  return { at: { x: at.x, y: at.y + by }, anchor };
}

/** Right of an upright bond that leaves the symbol on a side. */
function aside(node: DiagramNode, side: Side, lift = 0): NamePlace {
  const clear = symbolHalf(node).y + 4 + lift;
  return { at: { x: 12, y: side < 0 ? -clear : clear + 0.75 * LETTERING.name.size }, anchor: "start" };
}

function narrower(rows: Rows, item: Item, preferred: "up" | "down"): Item[] {
  const other = preferred === "up" ? "down" : "up";
  return rowWidth(rows[other]) < rowWidth(rows[preferred]) - (rows[preferred].length === 0 ? item.width : 0)
    ? rows[other]
    : rows[preferred];
}

function rowWidth(row: readonly Item[]): number {
  return row.reduce((sum, { width }) => sum + width + GAP, 0);
}

/**
 * A row is set farther off the longer it is, so that no bond to its end runs through its middle, and so far that what
 * is written between it and the hub has room.
 */
function placeRow(
  hub: DiagramNode,
  row: readonly Item[],
  side: Side,
  lift: number,
  named: boolean,
): Member[] {
  const inwards = largest(row.map((item) => item.inwards));
  const outwards = symbolHalf(hub).y + lift;
  const between = named ? Math.max(SHORTEST_BOND, writtenHeight(hub) + 8) : SHORTEST_BOND;
  const y = side * Math.max(REACH, 12 * row.length + 26, outwards + between + inwards);
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
  const place = (at: Point, side: Side): Member[] => [
    { node, at, name: side < 0 ? nameAbove(own) : nameBelow(own) },
  ];
  return { width: nodeWidth(own), inwards: symbolHalf(own).y, hangs: false, place };
}

/** A junction off the spine: its one-ports left, right and beyond it; a single one beyond. */
function hangingItem(model: DiagramModel, spine: Spine, { node }: Hanging): Item {
  const own = model.nodes[node];
  const leaves = spine.leaves[node].map((leaf) => model.nodes[leaf.node]);
  const indices = spine.leaves[node].map((leaf) => leaf.node);
  const [before, after, beyond] = leaves.length === 1 ? [-1, -1, 0] : [0, 1, leaves.length > 2 ? 2 : -1];
  const reach = (leaf: number) =>
    Math.max(
      REACH,
      symbolHalf(own).x +
        Math.max(SHORTEST_BOND + symbolHalf(leaves[leaf]).x, GAP + writtenWidth(leaves[leaf]) / 2),
    );
  const sideways = (leaf: number) =>
    leaf === -1 ? nodeWidth(own) / 2 : reach(leaf) + nodeWidth(leaves[leaf]) / 2;
  const half = Math.max(sideways(before), sideways(after), writtenWidth(own) + 12);
  const tallest = Math.max(...leaves.slice(0, 2).map((leaf) => symbolHalf(leaf).y));
  const place = (at: Point, side: Side): Member[] => {
    // Towards the hub, off the bond it hangs on, where the names of its one-ports do not reach.
    const { at: right } = aside(own, side < 0 ? 1 : -1, Math.max(0, tallest - symbolHalf(own).y));
    const name: NamePlace =
      at.x < -1 ? { at: { x: -right.x, y: right.y }, anchor: "end" } : { at: right, anchor: "start" };
    const members: Member[] = [{ node, at, name }];
    const beside = (leaf: number, x: number, y: number) => {
      if (leaf === -1) return;
      const name = side < 0 ? nameAbove(leaves[leaf]) : nameBelow(leaves[leaf]);
      members.push({ node: indices[leaf], at: { x: at.x + x, y: at.y + y }, name });
    };
    beside(before, before === -1 ? 0 : -reach(before), 0);
    beside(after, after === -1 ? 0 : reach(after), 0);
    const { y: halfBeyond } = beyond === -1 ? { y: 0 } : symbolHalf(leaves[beyond]);
    beside(beyond, 0, side * Math.max(REACH, symbolHalf(own).y + SHORTEST_BOND + halfBeyond));
    return members;
  };
  const inwards =
    Math.max(symbolHalf(own).y, tallest) + Math.max(0, writtenHeight(own) + 4 - SHORTEST_BOND / 2);
  return { width: 2 * half, inwards, hangs: true, place };
}

/** At least 0; a row may be too long to be handed on as arguments. */
function largest(values: readonly number[]): number {
  return values.reduce((most, value) => Math.max(most, value), 0);
}
