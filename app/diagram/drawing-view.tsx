import {
  type CSSProperties,
  type KeyboardEvent,
  type ReactNode,
  type RefObject,
  useCallback,
  useEffect,
  useId,
  useRef,
  useState,
} from "react";
import type { DiagramModel } from "../../grammar/writing/diagram-model.ts";
import { type Box, boxOf, type Drawing } from "../../grammar/writing/drawing.ts";
import { drawingSvg } from "../../grammar/writing/drawing-svg.ts";
import "./diagram.css";
import { DrawnPartView } from "./drawn-part.tsx";
import { marksOf } from "./marks.ts";
import { nearest, type Part, type Way } from "./nearest.ts";
import { useDrawing } from "./use-drawing.ts";
import { useViewBox } from "./use-view-box.ts";
import { moved, revealing, zoomed } from "./view-box.ts";

/** What a drawing's margins take of the sheet's width. */
const EDGES = 24;
const STEP = 16;
const NOTHING: Box = { x: 0, y: 0, width: 600, height: 200 };
const WAYS: Readonly<Record<string, Way>> = {
  ArrowLeft: "left",
  ArrowRight: "right",
  ArrowUp: "up",
  ArrowDown: "down",
};
const STEPS: Record<Way, readonly [x: number, y: number]> = {
  left: [-1, 0],
  right: [1, 0],
  up: [0, -1],
  down: [0, 1],
};

interface DrawingViewProps {
  readonly model: DiagramModel;
  readonly isLit: (part: Part) => boolean;
  readonly onPoint: (part: Part | null) => void;
  readonly openPart: (part: Part) => void;
  readonly children: ReactNode;
}

/** The drawing with all that moves it: pointer, wheel, keys, and a button for each. */
export function DrawingView({ model, isLit, onPoint, openPart, children }: DrawingViewProps) {
  const svg = useRef<SVGSVGElement>(null);
  const sheet = useRef<HTMLDivElement>(null);
  const { drawing, waiting, fault } = useDrawing(model, useWidth(sheet));
  const help = useId();
  const all = drawing?.box ?? NOTHING;
  const { chosen, seen, show, drag } = useViewBox(svg, all);
  const view = chosen ?? all;
  const [stop, setStop] = useState<Part | null>(null);
  const firstStop =
    stop !== null && drawing !== null && partBox(drawing, stop) !== null ? stop : firstPart(drawing);

  const pan = (way: Way) => {
    const from = seen();
    show(moved(from, all, (STEPS[way][0] * from.width) / 8, (STEPS[way][1] * from.height) / 8));
  };
  const zoom = (factor: number) => show(zoomed(seen(), all, factor));

  const onFrameKey = (event: KeyboardEvent<SVGSVGElement>) => {
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    const way = event.target === event.currentTarget ? WAYS[event.key] : undefined;
    if (way !== undefined) pan(way);
    else if (event.key === "+" || event.key === "=") zoom(1.25);
    else if (event.key === "-") zoom(0.8);
    else if (event.key === "0") show(null);
    else if (event.key === "1") show(all);
    else return;
    event.preventDefault();
  };

  // Kept in one place, so that a part is drawn anew only when it or its light changes.
  const state = useRef({ drawing, chosen, all, openPart, show });
  state.current = { drawing, chosen, all, openPart, show };
  const onPartFocus = useCallback(
    (part: Part) => {
      const { drawing, chosen, all, show } = state.current;
      setStop(part);
      onPoint(part);
      const box = drawing === null ? null : partBox(drawing, part);
      if (box !== null && chosen !== null) show(revealing(chosen, all, box));
    },
    [onPoint],
  );
  const onPartKey = useCallback((part: Part, event: KeyboardEvent<SVGGElement>) => {
    const { drawing, openPart } = state.current;
    const way = WAYS[event.key];
    if (event.key === "Enter" || event.key === " ") openPart(part);
    else if (event.key === "Escape") svg.current?.focus();
    else if (way !== undefined && drawing !== null) {
      const next = nearest(drawing, part, way);
      const selector = next === null ? null : `[data-part="${next.kind}"][data-id="${CSS.escape(next.id)}"]`;
      if (selector !== null) svg.current?.querySelector<SVGGElement>(selector)?.focus();
    } else return;
    event.preventDefault();
    event.stopPropagation();
  }, []);

  const parts = (kind: Part["kind"]) =>
    (drawing?.[kind === "node" ? "nodes" : "bonds"] ?? []).map((part) => {
      const own = { kind, id: part.id };
      return (
        <DrawnPartView
          key={part.id}
          kind={kind}
          part={part}
          lit={isLit(own)}
          stop={firstStop?.kind === kind && firstStop.id === part.id}
          onPoint={onPoint}
          onFocus={onPartFocus}
          onKey={onPartKey}
          onOpen={openPart}
        />
      );
    });

  const marks = marksOf(model);
  return (
    <div className="diagram">
      <div ref={sheet} className="diagram-sheet" data-chosen={chosen !== null}>
        {/* biome-ignore lint/a11y/useSemanticElements: a fieldset cannot draw */}
        <svg
          ref={svg}
          viewBox={`${view.x} ${view.y} ${view.width} ${view.height}`}
          width={all.width}
          height={all.height}
          style={{ "--own-height": `${all.height}px` } as CSSProperties}
          // biome-ignore lint/a11y/noNoninteractiveTabindex: the arrow keys move what it shows
          tabIndex={0}
          role="group"
          aria-label={`Bond graph of ${model.system}`}
          aria-describedby={help}
          aria-busy={waiting}
          onKeyDown={onFrameKey}
          {...drag}
        >
          {parts("bond")}
          {parts("node")}
        </svg>
      </div>
      <p className="note" role="status">
        {fault !== null ? `The drawing could not be laid out: ${fault}. The table says the same.` : null}
        {fault === null && drawing === null ? "The drawing is being laid out." : null}
      </p>
      {marks.length === 0 ? null : <p className="note">{marks.join(" · ")}</p>}
      <p className="no-print diagram-tools">
        {children}
        <button type="button" className="button" onClick={() => zoom(1.25)}>
          Closer
        </button>
        <button type="button" className="button" onClick={() => zoom(0.8)}>
          Farther
        </button>
        <button type="button" className="button" onClick={() => show(all)}>
          Whole
        </button>
        <button type="button" className="button" disabled={chosen === null} onClick={() => show(null)}>
          Reading size
        </button>
        {(Object.keys(STEPS) as Way[]).map((way) => (
          <button
            key={way}
            type="button"
            className="button"
            aria-label={`Move ${way}`}
            onClick={() => pan(way)}
          >
            {{ left: "←", right: "→", up: "↑", down: "↓" }[way]}
          </button>
        ))}
        <button
          type="button"
          className="button"
          disabled={drawing === null}
          onClick={() => drawing && save(drawing)}
        >
          Save as SVG
        </button>
      </p>
      <details className="note no-print diagram-keys">
        <summary>Keys and pointer</summary>
        <p id={help}>
          Drag or use the arrow keys to move, + and − or the wheel with Ctrl to zoom, 0 for reading size, 1
          for the whole. Tab goes on to the elements: there the arrow keys lead from one to the next, Enter
          opens the line of an element and tells of a bond why its stroke stands, Escape leads back.
        </p>
      </details>
    </div>
  );
}

/** Of the sheet, in steps, so that the drawing is not folded anew for every pixel; null until it is known. */
function useWidth(sheet: RefObject<HTMLDivElement | null>): number | null {
  const [width, setWidth] = useState<number | null>(null);
  useEffect(() => {
    if (sheet.current === null) return;
    const observer = new ResizeObserver(([{ contentRect }]) => {
      if (contentRect.width > 0) setWidth(Math.floor((contentRect.width - EDGES) / STEP) * STEP);
    });
    observer.observe(sheet.current);
    return () => observer.disconnect();
  }, [sheet]);
  return width;
}

function firstPart(drawing: Drawing | null): Part | null {
  const first = drawing?.nodes[0];
  return first === undefined ? null : { kind: "node", id: first.id };
}

function partBox(drawing: Drawing, { kind, id }: Part): Box | null {
  const found = (kind === "node" ? drawing.nodes : drawing.bonds).find((part) => part.id === id);
  return found === undefined ? null : boxOf(found.shapes);
}

function save(drawing: Drawing): void {
  const url = URL.createObjectURL(new Blob([drawingSvg(drawing)], { type: "image/svg+xml" }));
  const link = document.createElement("a");
  link.href = url;
  link.download = `${drawing.title}.svg`;
  link.click();
  URL.revokeObjectURL(url);
}
