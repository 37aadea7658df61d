import { useEffect, useMemo, useRef, useState } from "react";
import type { DiagramModel } from "../../grammar/writing/diagram-model.ts";
import type { Drawing } from "../../grammar/writing/drawing.ts";
import { arrange } from "../../grammar/writing/drawing-arrange.ts";
import { foldLayout } from "../../grammar/writing/drawing-fold.ts";
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

/** Where a drawing was folded: the next one of the same system and width is folded there again. */
interface Turns {
  readonly system: string;
  readonly width: number;
  readonly bonds: readonly string[];
}

interface LaidOut {
  readonly key: string;
  readonly answer: LayoutAnswer;
}

/**
 * The drawing of a model, folded to a width; none while that is not known. A change of strokes or marks is redrawn at once with the layout there is, one of laws or of
 * lines is not redrawn at all; a change of structure asks the worker, and answers that are overtaken are dropped.
 */
export function useDrawing(model: DiagramModel, width: number | null): DrawingState {
  const key = useMemo(() => layoutKey(model), [model]);
  const look = useMemo(() => lookKey(model), [model]);
  const [laidOut, setLaidOut] = useState<LaidOut | null>(null);
  const [fault, setFault] = useState<string | null>(null);
  const shown = useRef<Drawing | null>(null);
  const turns = useRef<Turns | null>(null);
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
  const made = useMemo(() => {
    if (laidOut === null || laidOut.key !== key || width === null) return null;
    const { current: model } = newest;
    const known = turns.current;
    const kept = known?.system === model.system && known.width === width ? known.bonds : [];
    const arrangement = arrange(model);
    const folded = foldLayout(model, arrangement, laidOut.answer, width, new Set(kept));
    return {
      drawing: placeDrawing(model, folded.answer, sameSystem(shown.current, model), arrangement),
      turns: { system: model.system, width, bonds: folded.turns },
    };
  }, [laidOut, key, look, width]);

  useEffect(() => {
    if (made === null) return;
    shown.current = made.drawing;
    turns.current = made.turns;
  }, [made]);
  const drawing = made?.drawing ?? null;
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
