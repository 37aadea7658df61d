import ELK from "elkjs/lib/elk.bundled.js";
import type { DiagramModel } from "../../grammar/writing/diagram-model.ts";
import type { Drawing } from "../../grammar/writing/drawing.ts";
import { arrange } from "../../grammar/writing/drawing-arrange.ts";
import { type LayoutAnswer, layoutRequest } from "../../grammar/writing/drawing-layout.ts";
import { placeDrawing } from "../../grammar/writing/drawing-place.ts";

const kernel = new ELK();

/** Model → drawing, through the same layout as on the page. */
export async function drawn(model: DiagramModel, previous: Drawing | null = null): Promise<Drawing> {
  const request = layoutRequest(model, arrange(model));
  const answer = await kernel.layout(request as Parameters<typeof kernel.layout>[0]);
  return placeDrawing(model, answer as LayoutAnswer, previous);
}
