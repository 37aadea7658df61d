/** Random linear bond graphs of some twenty nodes, to be drawn. */
export interface RandomGraph {
  readonly nodes: readonly RandomNode[];
  /** Power counts positive from the first node to the second. */
  readonly bonds: readonly (readonly [from: number, to: number])[];
}

export interface RandomNode {
  readonly name: string;
  readonly kind: "0" | "1" | "Se" | "Sf" | "R" | "C" | "I" | "TF" | "GY";
  /** R, C, I: its parameter; Se, Sf: its input; TF, GY: its ratio. */
  readonly value: number;
  /** Of a source: the rate of its input. */
  readonly rate: number;
}

const ONE_PORTS = ["R", "R", "C", "I", "C", "I", "Se", "Sf"] as const;

/** A tree of junctions and two-ports, now and then closed to a mesh, with one-ports on every junction. */
export function randomGraph(draw: () => number): RandomGraph {
  const nodes: RandomNode[] = [];
  const bonds: (readonly [number, number])[] = [];
  const add = (kind: RandomNode["kind"]): number => {
    nodes.push({
      name: `x${kind}_${nodes.length}`,
      kind,
      value: 0.4 + 2 * draw(),
      rate: 2 * draw() - 1,
    });
    return nodes.length - 1;
  };
  const bond = (a: number, b: number) => bonds.push(draw() < 0.5 ? [a, b] : [b, a]);
  const pick = <T>(from: readonly T[]): T => from[Math.floor(draw() * from.length)];

  const junctions = [add(pick(["0", "1"]))];
  for (let more = 1 + Math.floor(draw() * 4); more > 0; more -= 1) {
    const from = pick(junctions);
    const two = draw();
    if (two < 0.4) {
      const twoPort = add(two < 0.2 ? "TF" : "GY");
      const far = add(pick(["0", "1"]));
      // The bond that points at a two-port is its `in`, the one that leaves is its `out`.
      bonds.push([from, twoPort], [twoPort, far]);
      junctions.push(far);
    } else {
      const far = add(nodes[from].kind === "0" ? "1" : "0");
      bond(from, far);
      junctions.push(far);
    }
  }
  if (junctions.length > 3 && draw() < 0.4) {
    const [a, b] = [junctions[0], junctions[junctions.length - 1]];
    if (
      nodes[a].kind !== nodes[b].kind &&
      !bonds.some(([x, y]) => (x === a && y === b) || (x === b && y === a))
    )
      bond(a, b);
  }
  for (const junction of junctions) {
    for (let more = 1 + Math.floor(draw() * 2); more > 0; more -= 1) {
      const element = add(pick(ONE_PORTS));
      if (nodes[element].kind === "Se" || nodes[element].kind === "Sf") bond(element, junction);
      else bonds.push([junction, element]);
    }
  }
  return { nodes, bonds };
}
