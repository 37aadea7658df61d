import { type KeyboardEvent, memo } from "react";
import {
  type Box,
  boxOf,
  type DrawnPart,
  LETTERING,
  type Shape,
  SUBSCRIPT,
} from "../../grammar/writing/drawing.ts";
import { LETTERS, PENS, pathData, type Theme } from "../../grammar/writing/drawing-svg.ts";
import type { Part } from "./nearest.ts";

/** The page's colours; each falls back to ink on paper. */
const PAGE: Theme = {
  ink: "var(--color-ink, #1c1b19)",
  paper: "var(--color-paper, #fffdf8)",
  faint: "var(--color-faded, #6b675f)",
  warning: "var(--color-mistake, #9c2f16)",
};
const LIT = "var(--color-lit, #fdeeb5)";

interface DrawnPartProps {
  readonly kind: Part["kind"];
  readonly part: DrawnPart;
  readonly lit: boolean;
  /** The one part that the Tab key reaches. */
  readonly stop: boolean;
  readonly onPoint: (part: Part | null) => void;
  readonly onFocus: (part: Part) => void;
  readonly onKey: (part: Part, event: KeyboardEvent<SVGGElement>) => void;
  readonly onOpen: (part: Part) => void;
}

/** A node or a bond: what is drawn, a wider area to point at, and its light: a ground and a heavier line. */
export const DrawnPartView = memo(function DrawnPartView(props: DrawnPartProps) {
  const { kind, part, lit, stop, onPoint, onFocus, onKey, onOpen } = props;
  const own: Part = { kind, id: part.id };
  return (
    // biome-ignore lint/a11y/useSemanticElements: a button cannot stand inside a drawing
    <g
      role="button"
      tabIndex={stop ? 0 : -1}
      aria-label={part.says}
      data-part={kind}
      data-id={part.id}
      data-lit={lit}
      className="drawn-part"
      onPointerEnter={() => onPoint(own)}
      onPointerLeave={() => onPoint(null)}
      onFocus={() => onFocus(own)}
      onBlur={() => onPoint(null)}
      onKeyDown={(event) => onKey(own, event)}
      onClick={() => onOpen(own)}
    >
      <title>{part.says}</title>
      {kind === "node" ? <NodeGround part={part} lit={lit} /> : <BondGround part={part} lit={lit} />}
      {part.shapes.map((shape, index) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: shapes of a part have a fixed order
        <ShapeView key={index} shape={shape} heavy={lit && kind === "bond"} />
      ))}
    </g>
  );
});

/** Under the symbol and under what is written beside it, each by itself, so that no stroke is hidden. */
function NodeGround({ part, lit }: { part: DrawnPart; lit: boolean }) {
  const written = part.shapes.filter((shape) => shape.kind === "text" && shape.lettering !== "symbol");
  const drawn = part.shapes.filter((shape) => !written.includes(shape));
  return (
    <>
      <Ground box={boxOf(drawn)} stroke={lit ? PAGE.ink : "none"} fill={lit ? LIT : "transparent"} />
      <Ground box={boxOf(written)} stroke="none" fill={lit ? LIT : "transparent"} />
    </>
  );
}

function Ground({ box, fill, stroke }: { box: Box; fill: string; stroke: string }) {
  const { x, y, width, height } = box;
  return <rect x={x - 2} y={y - 1} width={width + 4} height={height + 2} rx={2} style={{ fill, stroke }} />;
}

function BondGround({ part, lit }: { part: DrawnPart; lit: boolean }) {
  const line = part.shapes.find((shape) => shape.kind === "path" && shape.pen === "bond");
  if (line?.kind !== "path") return null;
  const stroke = lit ? LIT : "transparent";
  return (
    <path d={pathData(line)} style={{ fill: "none", stroke, strokeWidth: 16, pointerEvents: "stroke" }} />
  );
}

function ShapeView({ shape, heavy }: { shape: Shape; heavy: boolean }) {
  if (shape.kind === "path") {
    const { width, colour, dash } = PENS[shape.pen];
    const strokeWidth = heavy ? width + 1.2 : width;
    return (
      <path
        d={pathData(shape)}
        style={{ fill: "none", stroke: PAGE[colour], strokeWidth, strokeDasharray: dash }}
        data-pen={shape.pen}
      />
    );
  }
  const { family, colour, weight, slant } = LETTERS[shape.lettering];
  const { size } = LETTERING[shape.lettering];
  return (
    <text
      x={shape.at.x}
      y={shape.at.y}
      textAnchor={shape.anchor}
      style={{ fontFamily: family, fontSize: size, fontWeight: weight, fontStyle: slant, fill: PAGE[colour] }}
    >
      {shape.text}
      {shape.subscript === "" ? null : (
        <tspan dy={size * 0.22} style={{ fontSize: size * SUBSCRIPT }}>
          {shape.subscript}
        </tspan>
      )}
    </text>
  );
}
