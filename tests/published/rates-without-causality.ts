import type { RandomGraph } from "./random-graph.ts";

/** A number is null where the relations leave it open. */
export interface Solution {
  /** By name of a store. */
  readonly rates: ReadonlyMap<string, number | null>;
  /** By bond. */
  readonly efforts: readonly (number | null)[];
  readonly flows: readonly (number | null)[];
}

/**
 * The rates of all stores of a linear bond graph, found without causality: every relation of every node, and each of
 * them differentiated once in time, as one linear system in the efforts e, flows f, the values z of stores that are not
 * given, their rates ż, and ė, ḟ. The derivatives settle what dependent stores leave open (E. Hairer, G. Wanner: Solving
 * Ordinary Differential Equations II, 2nd edition, chapter VII, reduction of the index by differentiation; recalled from
 * memory). Solved by Gauss–Jordan elimination with complete pivoting.
 *
 * `given` holds the values of the independent stores. Throws where the relations contradict each other.
 */
export function solvedWithoutCausality(graph: RandomGraph, given: ReadonlyMap<string, number>): Solution {
  const { nodes, bonds } = graph;
  const count = bonds.length;
  const stores = nodes.flatMap(({ kind }, i) => (kind === "C" || kind === "I" ? [i] : []));
  // Columns: e, f, ė, ḟ by bond, then z and ż by store.
  const columns = 4 * count + 2 * stores.length;
  const value = (variable: "e" | "f", bond: number) => (variable === "e" ? 0 : count) + bond;
  const stored = (store: number) => 4 * count + stores.indexOf(store);
  const rate = (store: number) => 4 * count + stores.length + stores.indexOf(store);
  const rows: number[][] = [];
  const row = (terms: readonly (readonly [column: number, factor: number])[], right: number) => {
    const cells = new Array<number>(columns + 1).fill(0);
    for (const [column, factor] of terms) cells[column] += factor;
    cells[columns] = right;
    rows.push(cells);
  };
  /** A relation and its derivative: the columns of rates lie as those of values. */
  const relation = (
    terms: readonly (readonly [column: number, factor: number])[],
    right = 0,
    rightRate = 0,
  ) => {
    row(terms, right);
    const differentiated = (column: number) => column + (column < 4 * count ? 2 * count : stores.length);
    row(
      terms.map(([column, factor]) => [differentiated(column), factor] as const),
      rightRate,
    );
  };

  for (const [index, node] of nodes.entries()) {
    const own = bonds.flatMap(([from, to], b) =>
      from === index ? [{ b, sign: -1 }] : to === index ? [{ b, sign: 1 }] : [],
    );
    const [{ b }] = own;
    if (node.kind === "0" || node.kind === "1") {
      const [common, summed] = node.kind === "0" ? (["e", "f"] as const) : (["f", "e"] as const);
      for (const other of own.slice(1))
        relation([
          [value(common, other.b), 1],
          [value(common, b), -1],
        ]);
      relation(own.map((one) => [value(summed, one.b), one.sign] as const));
    }
    if (node.kind === "Se") relation([[value("e", b), 1]], node.value, node.rate);
    if (node.kind === "Sf") relation([[value("f", b), 1]], node.value, node.rate);
    if (node.kind === "R")
      relation([
        [value("e", b), 1],
        [value("f", b), -node.value],
      ]);
    if (node.kind === "C" || node.kind === "I") {
      const [told, answered] = node.kind === "C" ? (["e", "f"] as const) : (["f", "e"] as const);
      relation([
        [value(told, b), node.value],
        [stored(index), -1],
      ]);
      row(
        [
          [rate(index), 1],
          [value(answered, b), -1],
        ],
        0,
      );
      const known = given.get(node.name);
      if (known !== undefined) row([[stored(index), 1]], known);
    }
    if (node.kind === "TF" || node.kind === "GY") {
      const into = own.find(({ sign }) => sign === 1)?.b ?? 0;
      const out = own.find(({ sign }) => sign === -1)?.b ?? 0;
      const [first, second] = node.kind === "TF" ? (["f", "e"] as const) : (["e", "f"] as const);
      relation([
        [value(first, out), 1],
        [value("f", into), -node.value],
      ]);
      relation([
        [value("e", into), 1],
        [value(second, out), -node.value],
      ]);
    }
  }
  const solution = eliminated(rows, columns);
  return {
    rates: new Map(stores.map((store) => [nodes[store].name, solution(rate(store))])),
    efforts: bonds.map((_, b) => solution(value("e", b))),
    flows: bonds.map((_, b) => solution(value("f", b))),
  };
}

const SMALL = 1e-9;

/** Gauss–Jordan elimination; the answer gives a variable's value, or null where the rows do not settle it. */
function eliminated(rows: number[][], columns: number): (column: number) => number | null {
  const pivots = new Map<number, number>();
  let done = 0;
  for (; done < rows.length; done += 1) {
    let best = { size: SMALL, row: -1, column: -1 };
    for (let row = done; row < rows.length; row += 1) {
      for (let column = 0; column < columns; column += 1) {
        const size = Math.abs(rows[row][column]);
        if (size > best.size) best = { size, row, column };
      }
    }
    if (best.row === -1) break;
    [rows[done], rows[best.row]] = [rows[best.row], rows[done]];
    const pivot = rows[done];
    const scale = pivot[best.column];
    for (let i = 0; i <= columns; i += 1) pivot[i] /= scale;
    for (const [r, row] of rows.entries()) {
      const factor = row[best.column];
      if (r === done || factor === 0) continue;
      for (let i = 0; i <= columns; i += 1) row[i] -= factor * pivot[i];
      row[best.column] = 0;
    }
    pivots.set(best.column, done);
  }
  for (const row of rows.slice(done)) {
    if (Math.abs(row[columns]) > 1e-6) throw new Error("the relations contradict each other");
  }
  return (column) => {
    const at = pivots.get(column);
    if (at === undefined) return null;
    const free = rows[at].some((cell, i) => i < columns && i !== column && Math.abs(cell) > SMALL);
    return free ? null : rows[at][columns];
  };
}
