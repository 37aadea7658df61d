import type { DiagramModel } from "./diagram-model.ts";
import type { Point } from "./drawing.ts";
import { type Arrangement, LANE } from "./drawing-arrange.ts";

/** What is asked of the layout, in the JSON form of the Eclipse Layout Kernel: blocks of known size, and their links. */
export interface LayoutRequest {
  readonly id: string;
  readonly layoutOptions: Readonly<Record<string, string>>;
  readonly children: readonly {
    readonly id: string;
    readonly width: number;
    readonly height: number;
    readonly layoutOptions: Readonly<Record<string, string>>;
    readonly ports: readonly Port[];
  }[];
  readonly edges: readonly { readonly id: string; readonly sources: string[]; readonly targets: string[] }[];
}

/** What the layout answers: the same with positions. */
export interface LayoutAnswer {
  readonly children?: readonly { readonly id: string; readonly x?: number; readonly y?: number }[];
  readonly edges?: readonly { readonly id: string; readonly sections?: readonly Section[] }[];
}

/** Where a bond enters or leaves a block: at the height of the hub, a lane for each bond. */
interface Port {
  readonly id: string;
  readonly x: number;
  readonly y: number;
  readonly width: 0;
  readonly height: 0;
  readonly layoutOptions: Readonly<Record<string, string>>;
}

interface Section {
  readonly startPoint: Point;
  readonly endPoint: Point;
  readonly bendPoints?: readonly Point[];
}

const OPTIONS = {
  "elk.algorithm": "layered",
  "elk.direction": "RIGHT",
  "elk.edgeRouting": "ORTHOGONAL",
  "elk.padding": "[top=8,left=8,bottom=8,right=8]",
  "elk.randomSeed": "1",
  "elk.spacing.nodeNode": "18",
  "elk.spacing.componentComponent": "40",
  "elk.spacing.edgeNode": "16",
  "elk.spacing.edgeEdge": String(LANE),
  "elk.layered.spacing.nodeNodeBetweenLayers": "28",
  "elk.layered.spacing.edgeNodeBetweenLayers": "14",
  "elk.layered.spacing.edgeEdgeBetweenLayers": String(LANE),
  // The order of the text settles what the theory of layout leaves open: the same text, the same drawing.
  "elk.layered.considerModelOrder.strategy": "NODES_AND_EDGES",
  "elk.layered.nodePlacement.strategy": "NETWORK_SIMPLEX",
  "elk.layered.nodePlacement.favorStraightEdges": "true",
};

/** Ids are numbers of nodes and bonds, so that no name of the model meets the layout's own. */
export function layoutRequest(model: DiagramModel, { blocks, links }: Arrangement): LayoutRequest {
  const before: number[][] = model.nodes.map(() => []);
  const after: number[][] = model.nodes.map(() => []);
  for (const { bond, near, far } of links) {
    after[near].push(bond);
    before[far].push(bond);
  }
  return {
    id: "root",
    layoutOptions: OPTIONS,
    children: blocks.map(({ hub, extent }) => {
      const width = extent.left + extent.right;
      return {
        id: `n${hub}`,
        width,
        height: extent.up + extent.down,
        layoutOptions: { "elk.portConstraints": "FIXED_POS" },
        ports: [...ports("in", before[hub], 0, extent.up), ...ports("out", after[hub], width, extent.up)],
      };
    }),
    edges: links.map(({ bond }) => ({ id: `b${bond}`, sources: [`out${bond}`], targets: [`in${bond}`] })),
  };
}

function ports(side: "in" | "out", bonds: readonly number[], x: number, level: number): Port[] {
  return bonds.map((bond, lane) => ({
    id: `${side}${bond}`,
    x,
    y: level + (lane - (bonds.length - 1) / 2) * LANE,
    width: 0,
    height: 0,
    layoutOptions: { "elk.port.side": side === "in" ? "WEST" : "EAST" },
  }));
}

/** What the layout depends on: as long as this stays the same, a drawing can be remade without a new layout. */
export function layoutKey(model: DiagramModel): string {
  const nodes = model.nodes.map(({ id, symbol, dependent, conflict }) => [id, symbol, dependent || conflict]);
  return JSON.stringify([nodes, model.bonds.map(({ from, to, domain }) => [from, to, domain])]);
}

/** What a drawing shows, all but the places in the text: while this stays the same, there is nothing to draw anew. */
export function lookKey(model: DiagramModel): string {
  return JSON.stringify(model, (name, value) => (name === "span" ? undefined : value));
}
