import ELK from "elkjs/lib/elk.bundled.js";
import type { DiagramModel } from "../../grammar/writing/diagram-model.ts";
import type { Drawing } from "../../grammar/writing/drawing.ts";
import { arrange } from "../../grammar/writing/drawing-arrange.ts";
import { foldLayout } from "../../grammar/writing/drawing-fold.ts";
import { type LayoutAnswer, layoutRequest } from "../../grammar/writing/drawing-layout.ts";
import { placeDrawing } from "../../grammar/writing/drawing-place.ts";

const kernel = new ELK();

/** Model → drawing, through the same layout as on the page. */
export async function drawn(model: DiagramModel, previous: Drawing | null = null): Promise<Drawing> {
  const request = layoutRequest(model, arrange(model));
  const answer = await kernel.layout(request as Parameters<typeof kernel.layout>[0]);
  return placeDrawing(model, answer as LayoutAnswer, previous);
}

/** The same, folded to a width; `before` is what an earlier version of the model was drawn as. */
export async function folded(
  model: DiagramModel,
  width: number,
  before?: { readonly drawing: Drawing; readonly turns: readonly string[] },
): Promise<{ drawing: Drawing; turns: readonly string[] }> {
  const arrangement = arrange(model);
  const request = layoutRequest(model, arrangement);
  const laidOut = (await kernel.layout(request as Parameters<typeof kernel.layout>[0])) as LayoutAnswer;
  const { answer, turns } = foldLayout(model, arrangement, laidOut, width, new Set(before?.turns));
  return { drawing: placeDrawing(model, answer, before?.drawing ?? null, arrangement), turns };
}
