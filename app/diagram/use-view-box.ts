import {
  type PointerEvent as ReactPointerEvent,
  type RefObject,
  useCallback,
  useEffect,
  useRef,
  useState,
} from "react";
import type { Box, Point } from "../../grammar/writing/drawing.ts";
import { moved, zoomed } from "./view-box.ts";

export interface ViewBox {
  /** The part of the drawing that was chosen; null: at its own size, to be read and scrolled from the beginning. */
  readonly chosen: Box | null;
  /** What of the drawing is in sight, at this moment. */
  seen(): Box;
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
  const latest = useRef({ chosen, whole });
  latest.current = { chosen, whole };
  const seen = useCallback(() => {
    const { chosen, whole } = latest.current;
    return chosen ?? inSight(svg.current, whole);
  }, [svg]);
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
      show(zoomed(seen(), latest.current.whole, Math.exp(-event.deltaY / 300), inDrawing(element, event)));
    };
    element.addEventListener("wheel", onWheel, { passive: false });
    return () => element.removeEventListener("wheel", onWheel);
  }, [svg, seen]);

  const drag: ViewBox["drag"] = {
    onPointerDown(event) {
      // At its own size the drawing is scrolled by a finger, as the page is.
      if (event.button !== 0 || (event.pointerType === "touch" && chosen === null)) return;
      grip.current = {
        pointer: event.pointerId,
        at: { x: event.clientX, y: event.clientY },
        view: seen(),
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
  return { chosen, seen, show, drag };
}

/** At its own size, a unit a pixel: what the sheet round the drawing does not hide. */
function inSight(svg: SVGSVGElement | null, whole: Box): Box {
  const sheet = svg?.parentElement;
  if (svg === null || !sheet) return whole;
  const [drawn, frame] = [svg.getBoundingClientRect(), sheet.getBoundingClientRect()];
  return {
    x: whole.x + frame.left - drawn.left,
    y: whole.y + frame.top - drawn.top,
    width: sheet.clientWidth,
    height: sheet.clientHeight,
  };
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
