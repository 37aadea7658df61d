import type { DiagramBond, DiagramModel, DiagramNode } from "./diagram-model.ts";
import { around, type Box, boxOf, corners, type Drawing, type DrawnPart, type Point } from "./drawing.ts";
import { type Arrangement, arrange } from "./drawing-arrange.ts";
import { bondShapes, direction, middleOf } from "./drawing-bonds.ts";
import { domainChanges } from "./drawing-domains.ts";
import type { LayoutAnswer } from "./drawing-layout.ts";
import type { Member } from "./drawing-rows.ts";
import { nodeShapes, symbolHalf, word } from "./drawing-symbols.ts";

/** Clear space between a symbol and the bonds that end at it. */
const CLEAR = 3;
const MARGIN = 12;

/**
 * From what the layout answered to the drawing. With a `previous` drawing the new one is shifted so that most of what
 * both show stays where it was: an edit must not make the page jump.
 */
export function placeDrawing(
  model: DiagramModel,
  answer: LayoutAnswer,
  previous: Drawing | null = null,
  arrangement: Arrangement = arrange(model),
): Drawing {
  const placed = membersPlaced(arrangement, answer, model.nodes.length);
  const shift = previous === null ? { x: 0, y: 0 } : shiftTowards(previous, model, placed);
  const at = (node: number): Point => {
    const { x, y } = placed[node]?.at ?? { x: 0, y: 0 };
    return { x: x + shift.x, y: y + shift.y };
  };
  const index = new Map(model.nodes.map(({ id }, i) => [id, i]));
  const routes = routesOf(arrangement, answer, shift);

  const nodes = model.nodes.map((node, i): DrawnPart => {
    const name = placed[i]?.name ?? { at: { x: 0, y: 24 }, anchor: "middle" as const };
    return { id: node.id, says: saysNode(node), centre: at(i), shapes: nodeShapes(node, at(i), name) };
  });
  const changes = domainChanges(model);
  const bonds = model.bonds.map((bond, i): DrawnPart => {
    const [from, to] = [index.get(bond.from) ?? 0, index.get(bond.to) ?? 0];
    const line = lineOf(model, at, from, to, routes.get(i));
    const label = changes.get(i) ?? null;
    return {
      id: bond.id,
      says: saysBond(bond),
      centre: middleOf(line).at,
      shapes: bondShapes(bond, line, label),
    };
  });
  return { title: model.system, box: frame([...bonds, ...nodes]), bonds, nodes };
}

function membersPlaced({ blocks }: Arrangement, answer: LayoutAnswer, count: number): (Member | undefined)[] {
  const origin = new Map((answer.children ?? []).map(({ id, x = 0, y = 0 }) => [id, { x, y }]));
  const placed: (Member | undefined)[] = Array.from({ length: count });
  for (const { hub, members, extent } of blocks) {
    const { x, y } = origin.get(`n${hub}`) ?? { x: 0, y: 0 };
    for (const member of members) {
      placed[member.node] = {
        ...member,
        at: { x: x + extent.left + member.at.x, y: y + extent.up + member.at.y },
      };
    }
  }
  return placed;
}

/** By bond: the layout's points between the two blocks, from the bond's near hub to its far one, and which is near. */
interface Route {
  readonly near: number;
  readonly points: readonly Point[];
}

function routesOf({ links }: Arrangement, answer: LayoutAnswer, shift: Point): Map<number, Route> {
  const sections = new Map((answer.edges ?? []).map(({ id, sections: [section] = [] }) => [id, section]));
  const routes = new Map<number, Route>();
  for (const { bond, near } of links) {
    const section = sections.get(`b${bond}`);
    if (section === undefined) continue;
    const points = [section.startPoint, ...(section.bendPoints ?? []), section.endPoint];
    routes.set(bond, { near, points: points.map(({ x, y }) => ({ x: x + shift.x, y: y + shift.y })) });
  }
  return routes;
}

/** From symbol to symbol through the route's points. */
function lineOf(
  model: DiagramModel,
  at: (node: number) => Point,
  from: number,
  to: number,
  route: Route | undefined,
): Point[] {
  if (from === to) return loopAt(at(from), model.nodes[from]);
  const between = route === undefined ? [] : route.near === from ? route.points : [...route.points].reverse();
  const start = between[0] ?? at(to);
  const end = between[between.length - 1] ?? at(from);
  const line = [leave(model.nodes[from], at(from), start), ...between, leave(model.nodes[to], at(to), end)];
  return withoutStraightCorners(line);
}

/** Where a bond towards `next` ends at a symbol: at its box; level where the route is level with the symbol. */
function leave(node: DiagramNode, centre: Point, next: Point): Point {
  const half = symbolHalf(node);
  const [reachX, reachY] = [half.x + CLEAR, half.y + CLEAR];
  const [dx, dy] = [next.x - centre.x, next.y - centre.y];
  if (Math.abs(dy) < half.y && Math.abs(dx) > reachX)
    return { x: centre.x + Math.sign(dx) * reachX, y: next.y };
  const along = direction(centre, next);
  const [alongX, alongY] = [Math.abs(along.x), Math.abs(along.y)];
  const edge = Math.min(reachX / Math.max(alongX, 1e-9), reachY / Math.max(alongY, 1e-9));
  // A stroke across a slanting bond must stay clear of the symbol's corner: beyond its supporting line.
  const corner = half.x * alongX + half.y * alongY + 1;
  const reach = Math.min(Math.max(edge, corner), Math.hypot(dx, dy));
  return { x: centre.x + along.x * reach, y: centre.y + along.y * reach };
}

function loopAt({ x, y }: Point, node: DiagramNode): Point[] {
  const half = symbolHalf(node);
  const right = x + half.x + CLEAR;
  return [
    { x: right, y: y - 6 },
    { x: right + 30, y: y - 6 },
    { x: right + 30, y: y + 6 },
    { x: right, y: y + 6 },
  ];
}

function withoutStraightCorners(line: readonly Point[]): Point[] {
  return line.filter((point, i) => {
    if (i === 0 || i === line.length - 1) return true;
    const before = direction(line[i - 1], point);
    const after = direction(point, line[i + 1]);
    return Math.abs(before.x * after.y - before.y * after.x) > 1e-3;
  });
}

/** The shift, among those that keep some node in place, that moves the median of the others least. */
function shiftTowards(
  previous: Drawing,
  model: DiagramModel,
  placed: readonly (Member | undefined)[],
): Point {
  const before = new Map(previous.nodes.map(({ id, centre }) => [id, centre]));
  const moves: Point[] = [];
  for (const [i, { id }] of model.nodes.entries()) {
    const old = before.get(id);
    const now = placed[i]?.at;
    if (old !== undefined && now !== undefined) moves.push({ x: old.x - now.x, y: old.y - now.y });
  }
  if (moves.length === 0) return { x: 0, y: 0 };
  const distances = (shift: Point) =>
    median(moves.map((move) => Math.hypot(move.x - shift.x, move.y - shift.y)));
  const step = Math.max(1, Math.floor(moves.length / 24));
  let best = { x: median(moves.map(({ x }) => x)), y: median(moves.map(({ y }) => y)) };
  let least = distances(best);
  for (let i = 0; i < moves.length; i += step) {
    const distance = distances(moves[i]);
    if (distance < least) [best, least] = [moves[i], distance];
  }
  return best;
}

function median(values: readonly number[]): number {
  return [...values].sort((a, b) => a - b)[values.length >> 1];
}

function frame(parts: readonly DrawnPart[]): Box {
  const { x, y, width, height } = around(parts.flatMap(({ shapes }) => corners(boxOf(shapes))));
  return { x: x - MARGIN, y: y - MARGIN, width: width + 2 * MARGIN, height: height + 2 * MARGIN };
}

function saysNode(node: DiagramNode): string {
  const marked = word(node);
  const parts = [`${node.symbol} ${node.id}`, node.domain, marked, node.description];
  return parts.filter((part) => part !== null && part !== "").join(", ");
}

function saysBond(bond: DiagramBond): string {
  const end = bond.stroke === null ? null : bond[bond.stroke];
  const demanded = bond.demanded !== null && bond.demanded === bond.stroke ? ", demanded in the text" : "";
  const stroke = end === null ? "causality open" : `stroke at ${end}${demanded}`;
  return `bond ${bond.from} to ${bond.to}, ${bond.domain}, ${stroke}${bond.conflict ? ", conflict" : ""}`;
}
