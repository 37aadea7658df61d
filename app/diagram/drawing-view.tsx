import {
  type CSSProperties,
  type KeyboardEvent,
  type ReactNode,
  useCallback,
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

const NOTHING: Box = { x: 0, y: 0, width: 600, height: 200 };
/** The least scale at which names can be read, and how wide a drawing may be to be kept at it. */
const READABLE = 0.6;
const WIDEST_OVER = 900;
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
  const { drawing, waiting, fault } = useDrawing(model);
  const svg = useRef<SVGSVGElement>(null);
  const help = useId();
  const all = drawing?.box ?? NOTHING;
  const { view, whole, show, drag } = useViewBox(svg, all);
  const [stop, setStop] = useState<Part | null>(null);
  const firstStop =
    stop !== null && drawing !== null && partBox(drawing, stop) !== null ? stop : firstPart(drawing);

  const pan = (way: Way) =>
    show(moved(view, all, (STEPS[way][0] * view.width) / 8, (STEPS[way][1] * view.height) / 8));
  const zoom = (factor: number) => show(zoomed(view, all, factor));

  const onFrameKey = (event: KeyboardEvent<SVGSVGElement>) => {
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    const way = event.target === event.currentTarget ? WAYS[event.key] : undefined;
    if (way !== undefined) pan(way);
    else if (event.key === "+" || event.key === "=") zoom(1.25);
    else if (event.key === "-") zoom(0.8);
    else if (event.key === "0") show(null);
    else return;
    event.preventDefault();
  };

  // Kept in one place, so that a part is drawn anew only when it or its light changes.
  const state = useRef({ drawing, view, whole, all, openPart, show });
  state.current = { drawing, view, whole, all, openPart, show };
  const onPartFocus = useCallback(
    (part: Part) => {
      const { drawing, view, whole, all, show } = state.current;
      setStop(part);
      onPoint(part);
      const box = drawing === null ? null : partBox(drawing, part);
      if (box !== null && !whole) show(revealing(view, all, box));
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
  const least = Math.min(READABLE * all.width, WIDEST_OVER);
  return (
    <div className="diagram">
      <div className="diagram-sheet" style={{ "--least-width": `${least}px` } as CSSProperties}>
        {/* biome-ignore lint/a11y/useSemanticElements: a fieldset cannot draw */}
        <svg
          ref={svg}
          viewBox={`${view.x} ${view.y} ${view.width} ${view.height}`}
          width={all.width}
          height={all.height}
          // The whole drawing lets a finger scroll the page; what is zoomed is moved by it.
          style={{ touchAction: whole ? "auto" : "none" }}
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
        <button type="button" className="button" disabled={whole} onClick={() => show(null)}>
          Whole
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
          Drag or use the arrow keys to move, + and − or the wheel with Ctrl to zoom, 0 for the whole. Tab
          goes on to the elements: there the arrow keys lead from one to the next, Enter opens its line,
          Escape leads back.
        </p>
      </details>
    </div>
  );
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
