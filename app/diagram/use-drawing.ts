import { useEffect, useMemo, useRef, useState } from "react";
import type { DiagramModel } from "../../grammar/writing/diagram-model.ts";
import type { Drawing } from "../../grammar/writing/drawing.ts";
import { arrange } from "../../grammar/writing/drawing-arrange.ts";
import {
  type LayoutAnswer,
  layoutKey,
  layoutRequest,
  lookKey,
} from "../../grammar/writing/drawing-layout.ts";
import { placeDrawing } from "../../grammar/writing/drawing-place.ts";
import { layoutInWorker } from "./layout.client.ts";

export interface DrawingState {
  /** The newest that could be drawn; while a new layout is worked out, the one before. */
  readonly drawing: Drawing | null;
  readonly waiting: boolean;
  readonly fault: string | null;
}

interface LaidOut {
  readonly key: string;
  readonly answer: LayoutAnswer;
}

/**
 * The drawing of a model. A change of strokes or marks is redrawn at once with the layout there is, one of laws or of
 * lines is not redrawn at all; a change of structure asks the worker, and answers that are overtaken are dropped.
 */
export function useDrawing(model: DiagramModel): DrawingState {
  const key = useMemo(() => layoutKey(model), [model]);
  const look = useMemo(() => lookKey(model), [model]);
  const [laidOut, setLaidOut] = useState<LaidOut | null>(null);
  const [fault, setFault] = useState<string | null>(null);
  const shown = useRef<Drawing | null>(null);
  const newest = useRef(model);
  newest.current = model;

  useEffect(() => {
    let overtaken = false;
    setFault(null);
    layoutInWorker(layoutRequest(newest.current, arrange(newest.current))).then(
      (answer) => {
        if (!overtaken) setLaidOut({ key, answer });
      },
      (error: unknown) => {
        if (!overtaken) setFault(error instanceof Error ? error.message : String(error));
      },
    );
    return () => {
      overtaken = true;
    };
  }, [key]);

  // biome-ignore lint/correctness/useExhaustiveDependencies: `look` stands for all of the model that is drawn
  const drawing = useMemo(() => {
    if (laidOut === null || laidOut.key !== key) return null;
    return placeDrawing(newest.current, laidOut.answer, sameSystem(shown.current, newest.current));
  }, [laidOut, key, look]);

  useEffect(() => {
    if (drawing !== null) shown.current = drawing;
  }, [drawing]);
  return {
    drawing: drawing ?? sameSystem(shown.current, model),
    waiting: drawing === null && fault === null,
    fault,
  };
}

/** Another system starts afresh: nothing of the drawing before it says where things should stay. */
function sameSystem(drawing: Drawing | null, model: DiagramModel): Drawing | null {
  return drawing?.title === model.system ? drawing : null;
}
