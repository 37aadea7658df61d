import { type RefObject, useEffect, useRef } from "react";
import type { TextPageHandle } from "./text-page.client.tsx";

interface FoldProps {
  readonly text: RefObject<TextPageHandle | null>;
  /** The right page; what can be tied carries `data-tied`, and what is lit `data-lit="true"`. */
  readonly page: RefObject<HTMLElement | null>;
  readonly tiedLines: readonly number[];
  readonly litLines: readonly number[];
  /** The ties are those of the last text without errors. */
  readonly stale: boolean;
  /** Called with the function that draws anew, for whoever notices that something moved. */
  readonly redraw: RefObject<() => void>;
}

/**
 * The fold between the pages. A tick on the left stands at each line that something follows from, one on the right
 * at each equation and row; threads run across from the lit lines to what is lit. For the eye alone: the same ties
 * are told in words by the lines' numbers beside each row and equation.
 */
export function Fold({ text, page, tiedLines, litLines, stale, redraw }: FoldProps) {
  const canvas = useRef<SVGSVGElement>(null);
  useEffect(() => {
    let waiting = 0;
    const draw = () => {
      cancelAnimationFrame(waiting);
      waiting = requestAnimationFrame(() => {
        if (canvas.current !== null)
          drawFold(canvas.current, text.current, page.current, tiedLines, litLines);
      });
    };
    redraw.current = draw;
    const moved = page.current;
    moved?.addEventListener("scroll", draw, { passive: true });
    window.addEventListener("resize", draw);
    // Drawings and fonts come later and move what stands below them.
    const grown = new ResizeObserver(draw);
    for (const part of moved?.children ?? []) grown.observe(part);
    draw();
    return () => {
      grown.disconnect();
      cancelAnimationFrame(waiting);
      moved?.removeEventListener("scroll", draw);
      window.removeEventListener("resize", draw);
    };
  });
  return (
    <svg ref={canvas} className="fold no-print" data-stale={stale} aria-hidden="true" focusable="false" />
  );
}

const SVG = "http://www.w3.org/2000/svg";

/** Drawn straight into the picture: scrolling must not wait for a render. */
function drawFold(
  canvas: SVGSVGElement,
  text: TextPageHandle | null,
  page: HTMLElement | null,
  tiedLines: readonly number[],
  litLines: readonly number[],
): void {
  const box = canvas.getBoundingClientRect();
  const view = page?.getBoundingClientRect();
  if (view === undefined || box.width === 0) return;
  const inSight = (y: number) => y > view.top && y < view.bottom;
  const left = (line: number) => {
    const y = text?.middleOf(line) ?? null;
    return y === null ? null : y - box.top;
  };
  const anchors = [...(page?.querySelectorAll<HTMLElement>("[data-tied]") ?? [])].flatMap((element) => {
    const rect = element.getBoundingClientRect();
    const y = rect.top + Math.min(rect.height / 2, 18);
    return inSight(y) ? [{ y: y - box.top, lit: element.dataset.lit === "true" }] : [];
  });
  const strokes: SVGElement[] = [];
  const stroke = (d: string, name: string) => {
    const path = document.createElementNS(SVG, "path");
    path.setAttribute("d", d);
    path.setAttribute("class", name);
    strokes.push(path);
  };
  const width = box.width;
  for (const line of tiedLines) {
    const y = left(line);
    if (y !== null) stroke(`M0 ${y}h6`, litLines.includes(line) ? "tick lit" : "tick");
  }
  for (const { y, lit } of anchors) stroke(`M${width} ${y}h-6`, lit ? "tick lit" : "tick");
  const lit = anchors.filter((anchor) => anchor.lit);
  for (const line of litLines) {
    const from = left(line);
    if (from === null) continue;
    for (const { y } of lit) {
      stroke(`M6 ${from}C${width * 0.6} ${from} ${width * 0.4} ${y} ${width - 6} ${y}`, "thread");
    }
  }
  canvas.replaceChildren(...strokes);
}
