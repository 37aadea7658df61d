import type { DiagramModel } from "../../grammar/writing/diagram-model.ts";

/** What the marks that occur in a drawing mean, in words; a plain drawing needs none. */
export function marksOf({ nodes, bonds }: DiagramModel): string[] {
  const marks: string[] = [];
  if (nodes.some(({ dependent }) => dependent)) {
    marks.push("Dashed frame: a dependent store, settled by other stores");
  }
  if (nodes.some(({ conflict }) => conflict)) marks.push("Heavy octagon: where causality is in conflict");
  if (bonds.some(({ conflict }) => conflict)) marks.push("Crossed bond: a bond in conflict");
  if (bonds.some(({ demanded, stroke }) => demanded !== null && demanded === stroke)) {
    marks.push("Double stroke: demanded in the text");
  }
  if (nodes.some(({ kind }) => kind === "port")) marks.push("Ring: an open port");
  return marks;
}
