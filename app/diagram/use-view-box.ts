import { type PointerEvent as ReactPointerEvent, type RefObject, useEffect, useRef, useState } from "react";
import type { Box, Point } from "../../grammar/writing/drawing.ts";
import { moved, zoomed } from "./view-box.ts";

export interface ViewBox {
  readonly view: Box;
  /** Everything is shown, and goes on to be when the drawing changes. */
  readonly whole: boolean;
  show(view: Box | null): void;
  readonly drag: {
    onPointerDown(event: ReactPointerEvent<SVGSVGElement>): void;
    onPointerMove(event: ReactPointerEvent<SVGSVGElement>): void;
    onPointerUp(event: ReactPointerEvent<SVGSVGElement>): void;
    onPointerCancel(event: ReactPointerEvent<SVGSVGElement>): void;
  };
}

/** From here on a press is a drag and no click. */
const DRAG_FROM = 4;

/** Which part of the drawing is shown, moved by dragging and zoomed by the wheel with Ctrl held (as by a pinch). */
export function useViewBox(svg: RefObject<SVGSVGElement | null>, whole: Box): ViewBox {
  const [chosen, show] = useState<Box | null>(null);
  const view = chosen ?? whole;
  const latest = useRef({ view, whole });
  latest.current = { view, whole };
  const grip = useRef<{
    readonly pointer: number;
    readonly at: Point;
    readonly view: Box;
    dragged: boolean;
  } | null>(null);

  useEffect(() => {
    const element = svg.current;
    if (element === null) return;
    // React listens to the wheel passively, which could not keep the browser from zooming the page.
    const onWheel = (event: WheelEvent) => {
      if (!event.ctrlKey && !event.metaKey) return;
      event.preventDefault();
      const { view, whole } = latest.current;
      show(zoomed(view, whole, Math.exp(-event.deltaY / 300), inDrawing(element, event)));
    };
    element.addEventListener("wheel", onWheel, { passive: false });
    return () => element.removeEventListener("wheel", onWheel);
  }, [svg]);

  const drag: ViewBox["drag"] = {
    onPointerDown(event) {
      if (event.button !== 0) return;
      grip.current = {
        pointer: event.pointerId,
        at: { x: event.clientX, y: event.clientY },
        view,
        dragged: false,
      };
    },
    onPointerMove(event) {
      const held = grip.current;
      if (held === null || held.pointer !== event.pointerId) return;
      const [dx, dy] = [event.clientX - held.at.x, event.clientY - held.at.y];
      if (!held.dragged && Math.hypot(dx, dy) < DRAG_FROM) return;
      held.dragged = true;
      event.currentTarget.setPointerCapture(event.pointerId);
      const unit = unitsPerPixel(event.currentTarget);
      show(moved(held.view, whole, -dx * unit, -dy * unit));
    },
    onPointerUp(event) {
      if (grip.current?.dragged) {
        // The click that ends a drag opens nothing.
        const swallow = (click: MouseEvent) => click.stopPropagation();
        window.addEventListener("click", swallow, { capture: true, once: true });
        setTimeout(() => window.removeEventListener("click", swallow, { capture: true }), 0);
        event.currentTarget.releasePointerCapture(event.pointerId);
      }
      grip.current = null;
    },
    onPointerCancel() {
      grip.current = null;
    },
  };
  return { view, whole: chosen === null, show, drag };
}

function inDrawing(svg: SVGSVGElement, at: { clientX: number; clientY: number }): Point {
  const matrix = svg.getScreenCTM();
  if (matrix === null) return { x: 0, y: 0 };
  const { x, y } = new DOMPoint(at.clientX, at.clientY).matrixTransform(matrix.inverse());
  return { x, y };
}

function unitsPerPixel(svg: SVGSVGElement): number {
  return 1 / (svg.getScreenCTM()?.a ?? 1);
}
