import type { DiagramModel } from "./diagram-model.ts";
import { LETTERING, type Point } from "./drawing.ts";
import type { Hanging, Spine } from "./drawing-spine.ts";
import {
  type NamePlace,
  nameAbove,
  nameBelow,
  nodeWidth,
  symbolHalf,
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
  /** Puts the item with its middle at `at`, on the side `up` (−1) or down (+1). */
  readonly place: (at: Point, side: -1 | 1) => Member[];
}

/** What hangs on a hub in a row above and a row below, junctions below first, both about as wide. */
export function twoRows(
  model: DiagramModel,
  spine: Spine,
  hanging: readonly Hanging[],
  leaves: readonly Hanging[],
  atLeast: number,
): { readonly up: Member[]; readonly down: Member[] } {
  const rows = { up: [] as Item[], down: [] as Item[] };
  for (const item of hanging.map((one) => hangingItem(model, spine, one)))
    narrower(rows, item, "down").push(item);
  for (const item of leaves.map((leaf) => leafItem(model, leaf))) narrower(rows, item, "up").push(item);
  return { up: placeRow(rows.up, -1, atLeast), down: placeRow(rows.down, 1, atLeast) };
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
function placeRow(row: readonly Item[], side: -1 | 1, atLeast: number): Member[] {
  const y = side * Math.max(REACH, 12 * row.length + 26, atLeast);
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
  const reach = (leaf: number) =>
    Math.max(
      REACH,
      symbolHalf(own).x +
        Math.max(SHORTEST_BOND + symbolHalf(leaves[leaf]).x, GAP + writtenWidth(leaves[leaf]) / 2),
    );
  const sideways = (leaf: number) =>
    leaf === -1 ? nodeWidth(own) / 2 : reach(leaf) + nodeWidth(leaves[leaf]) / 2;
  const half = Math.max(sideways(left), sideways(right), writtenWidth(own) + 12);
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
