import type { FlatGraph, FlatNode } from "../resolve/graph.ts";
import { evaluate } from "../symbolic/evaluate.ts";
import type { Symbol } from "../symbolic/expression.ts";
import type { StoreSite } from "./elements.ts";
import { leftNullSpace, reduceRows, SMALL } from "./row-reduction.ts";
import type { Stroke } from "./strokes.ts";

export interface TiedStore {
  readonly bond: number;
  /** The bonds of the elements that settle it. */
  readonly premises: readonly number[];
}

/**
 * Strokes can fit round a ring of junctions whose equations still say nothing about the ring itself but that the
 * variables given to it sum to zero: capacitors in a delta, a capacitor across another. Then some of the stores that
 * give them depend on the others, though every stroke let them integrate. This finds them by the rank of the ring's
 * equations: the last by name in each such sum. A sum that a resistor takes part in settles that resistor and ties no
 * store, so sums are first combined to be rid of those. The result is the same whatever the order of lines: what is
 * tied is what is the last in some sum.
 */
export function tiedStores(
  graph: FlatGraph,
  strokes: readonly (Stroke | null)[],
  sites: readonly StoreSite[],
): TiedStore[] {
  if (!hasRing(graph)) return [];
  const rings = new Rings(graph, strokes);
  if (rings.cyclic.length === 0 || rings.cyclic.length > LARGEST_RING) return [];
  const sums = rings.sums();

  const orders = new Map<number, number>();
  sites.forEach(({ node, port, integral }, order) => {
    const { bond } = node.ports[port];
    if (strokes[bond] === integral) orders.set(bond, order);
  });
  // Columns: what is settled by its sum, then stores from the last name to the first, then what is given anyway.
  const place = (variable: number) => {
    const order = orders.get(variable >> 1);
    if (order !== undefined) return sites.length - order;
    return SOURCES.has(rings.giver(variable).kind) ? sites.length + 1 : 0;
  };
  const columns = [...new Set(sums.flatMap((sum) => [...sum.keys()]))].sort((a, b) => place(a) - place(b));
  const rows = sums.map((sum) => columns.map((variable) => sum.get(variable) ?? 0));
  return reduceRows(rows).flatMap((pivot, i): TiedStore[] => {
    const bond = columns[pivot] >> 1;
    if (!orders.has(bond)) return [];
    const others = columns.filter((_, j) => j !== pivot && Math.abs(rows[i][j]) > SMALL);
    return [{ bond, premises: others.map((variable) => variable >> 1) }];
  });
}

const SOURCES: ReadonlySet<string> = new Set(["Se", "Sf", "port"]);

/** The rank of a larger system would cost more than the whole assignment. */
const LARGEST_RING = 240;
/** Paths from the ring's inputs back to the elements that give them; beyond this the search is left. */
const MOST_PATHS = 20_000;

function isInner({ kind }: FlatNode): boolean {
  return kind === "0" || kind === "1" || kind === "TF" || kind === "GY";
}

/** Do the bonds between junctions and two-ports close a ring? (Most models are trees, and done with here.) */
function hasRing({ nodes, bonds }: FlatGraph): boolean {
  const parent = nodes.map((_, i) => i);
  const root = (i: number) => {
    let at = i;
    while (parent[at] !== at) {
      parent[at] = parent[parent[at]];
      at = parent[at];
    }
    return at;
  };
  for (const { from, to } of bonds) {
    if (!isInner(nodes[from]) || !isInner(nodes[to])) continue;
    const [a, b] = [root(from), root(to)];
    if (a === b) return true;
    parent[a] = b;
  }
  return false;
}

interface Term {
  readonly variable: number;
  readonly factor: number;
}

/** The equations of junctions and two-ports; variable 2·bond is its effort, 2·bond + 1 its flow. */
class Rings {
  /** The variables that depend on themselves, or lie between such. */
  readonly cyclic: readonly number[];
  readonly #graph: FlatGraph;
  readonly #strokes: readonly (Stroke | null)[];
  readonly #bringers = new Map<FlatNode, FlatNode["ports"][number]>();
  readonly #lookup: (symbol: Symbol) => number;

  constructor(graph: FlatGraph, strokes: readonly (Stroke | null)[]) {
    this.#graph = graph;
    this.#strokes = strokes;
    const values = new Map(graph.parameters.map(({ symbol, value }) => [symbol as Symbol, value]));
    // A ratio that changes with time stands for any number: rank is asked for in general position.
    this.#lookup = (symbol) => values.get(symbol) ?? 0.7548776662 + symbol.name.length;
    for (const node of graph.nodes) {
      const bringer = node.ports.find(({ bond, end }) => (strokes[bond] === end) === (node.kind === "0"));
      if (bringer !== undefined) this.#bringers.set(node, bringer);
    }
    this.cyclic = this.#trim(
      this.#trim(
        [...graph.bonds.keys()].flatMap((bond) => [2 * bond, 2 * bond + 1]),
        false,
      ),
      true,
    );
  }

  /** The node whose relations give the variable: an effort comes from the end without the stroke. */
  giver(variable: number): FlatNode {
    const { from, to } = this.#graph.bonds[variable >> 1];
    const atStroke = variable % 2 === 1;
    return this.#graph.nodes[(this.#strokes[variable >> 1] === "from") === atStroke ? from : to];
  }

  /** What a variable is the sum of; null where an element gives it. */
  #terms(variable: number): Term[] | null {
    const node = this.giver(variable);
    const bond = variable >> 1;
    const kind = variable % 2;
    if (node.kind === "0" || node.kind === "1") {
      const bringer = this.#bringers.get(node);
      if (bringer === undefined) return null;
      if (kind === (node.kind === "0" ? 0 : 1)) return [{ variable: 2 * bringer.bond + kind, factor: 1 }];
      return node.ports
        .filter((port) => port !== bringer)
        .map((port) => ({ variable: 2 * port.bond + kind, factor: port.end === bringer.end ? -1 : 1 }));
    }
    if (node.kind !== "TF" && node.kind !== "GY") return null;
    const law = node.laws.find((one) => one.kind === "ratio");
    if (law?.kind !== "ratio" || node.ports.length !== 2) return null;
    const ratio = evaluate(law.ratio, this.#lookup);
    const input = node.ports[0].bond === bond;
    const other = node.ports[input ? 1 : 0].bond;
    if (node.kind === "GY")
      return [{ variable: 2 * other + 1 - kind, factor: kind === 0 ? ratio : 1 / ratio }];
    return [{ variable: 2 * other + kind, factor: input === (kind === 0) ? ratio : 1 / ratio }];
  }

  /** Leaves out, one after the other, what depends on nothing that is left (or, `forward`, what nothing depends on). */
  #trim(variables: readonly number[], forward: boolean): number[] {
    const left = new Set(variables);
    const arrows = new Map<number, number[]>();
    const count = new Map<number, number>(variables.map((variable) => [variable, 0]));
    for (const variable of variables) {
      for (const term of this.#terms(variable) ?? []) {
        if (!left.has(term.variable)) continue;
        const [tail, head] = forward ? [variable, term.variable] : [term.variable, variable];
        const heads = arrows.get(tail);
        if (heads === undefined) arrows.set(tail, [head]);
        else heads.push(head);
        count.set(head, (count.get(head) ?? 0) + 1);
      }
    }
    const free = variables.filter((variable) => count.get(variable) === 0);
    for (let variable = free.pop(); variable !== undefined; variable = free.pop()) {
      left.delete(variable);
      for (const head of arrows.get(variable) ?? []) {
        const rest = (count.get(head) ?? 0) - 1;
        count.set(head, rest);
        if (rest === 0) free.push(head);
      }
    }
    return [...left];
  }

  /** For each way in which the ring's equations fall short of rank: the sum of elements' variables that is zero. */
  sums(): Map<number, number>[] {
    const place = new Map(this.cyclic.map((variable, i) => [variable, i]));
    const inputs: Term[][] = this.cyclic.map(() => []);
    const matrix = this.cyclic.map((variable, i) => {
      const row = new Array<number>(this.cyclic.length).fill(0);
      row[i] = 1;
      for (const term of this.#terms(variable) ?? []) {
        const at = place.get(term.variable);
        if (at === undefined) inputs[i].push(term);
        else row[at] -= term.factor;
      }
      return row;
    });
    return leftNullSpace(matrix).flatMap((weights) => {
      const start = weights.flatMap((weight, i) =>
        weight === 0 ? [] : inputs[i].map(({ variable, factor }) => ({ variable, factor: weight * factor })),
      );
      return this.#givenBy(start) ?? [];
    });
  }

  /** A sum in the elements' variables, back through junctions and two-ports; null where there are too many paths. */
  #givenBy(start: readonly Term[]): Map<number, number> | null {
    const total = new Map<number, number>();
    const open = [...start];
    let steps = 0;
    for (let term = open.pop(); term !== undefined; term = open.pop()) {
      steps += 1;
      if (steps > MOST_PATHS) return null;
      const terms = this.#terms(term.variable);
      if (terms === null) total.set(term.variable, (total.get(term.variable) ?? 0) + term.factor);
      else for (const { variable, factor } of terms) open.push({ variable, factor: term.factor * factor });
    }
    return total;
  }
}
