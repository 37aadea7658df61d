import {
  type Drawing,
  type DrawnPart,
  LETTERING,
  type Lettering,
  type Pen,
  type Shape,
  SUBSCRIPT,
} from "./drawing.ts";

/** How pens and letters look; the page gives colours as CSS variables, a file as they are. */
export interface Theme {
  readonly ink: string;
  readonly paper: string;
  readonly faint: string;
  readonly warning: string;
}

/** Ink on paper; frames and words are told apart without their colour. */
export const PRINTED: Theme = { ink: "#1c1b19", paper: "#fffdf8", faint: "#6b675f", warning: "#9c2f16" };
export const PRINTED_DARK: Theme = { ink: "#e9e4d8", paper: "#1a1917", faint: "#a29c8f", warning: "#f08a6c" };

interface PenStyle {
  readonly width: number;
  readonly colour: keyof Theme;
  readonly dash?: string;
}

export const PENS: Record<Pen, PenStyle> = {
  bond: { width: 1.3, colour: "ink" },
  arrow: { width: 1.3, colour: "ink" },
  stroke: { width: 2, colour: "ink" },
  demanded: { width: 2, colour: "ink" },
  dependent: { width: 1.2, colour: "ink", dash: "4 3" },
  conflict: { width: 2.2, colour: "warning" },
  open: { width: 1.5, colour: "ink" },
};

interface LetterStyle {
  readonly family: string;
  readonly colour: keyof Theme;
  readonly weight: number;
  readonly slant: "normal" | "italic";
}

const PROSE = "'Source Sans 3 Variable', 'Source Sans 3', Arial, sans-serif";
const NOTATION = "'Source Code Pro', 'DejaVu Sans Mono', monospace";

export const LETTERS: Record<Lettering, LetterStyle> = {
  symbol: { family: PROSE, colour: "ink", weight: 600, slant: "normal" },
  name: { family: NOTATION, colour: "ink", weight: 400, slant: "normal" },
  domain: { family: PROSE, colour: "faint", weight: 400, slant: "italic" },
  word: { family: PROSE, colour: "ink", weight: 600, slant: "normal" },
};

/**
 * The drawing as an SVG file that stands alone: no script, no link, no font to fetch; every text of the model escaped.
 * Scalable Vector Graphics (SVG) 1.1, Second Edition.
 */
export function drawingSvg(drawing: Drawing, theme: Theme = PRINTED): string {
  const { x, y, width, height } = drawing.box;
  const lines = [
    `<svg xmlns="http://www.w3.org/2000/svg" width="${n(width)}" height="${n(height)}" viewBox="${[x, y, width, height].map(n).join(" ")}" role="img">`,
    `<title>${escaped(drawing.title)}</title>`,
    `<rect x="${n(x)}" y="${n(y)}" width="${n(width)}" height="${n(height)}" fill="${theme.paper}"/>`,
    ...drawing.bonds.map((part) => group("bond", part, theme)),
    ...drawing.nodes.map((part) => group("node", part, theme)),
    "</svg>",
  ];
  return `${lines.join("\n")}\n`;
}

function group(kind: "bond" | "node", { says, shapes }: DrawnPart, theme: Theme): string {
  return `<g class="${kind}"><title>${escaped(says)}</title>${shapes.map((shape) => element(shape, theme)).join("")}</g>`;
}

function element(shape: Shape, theme: Theme): string {
  if (shape.kind === "path") {
    const { width, colour, dash } = PENS[shape.pen];
    const dashed = dash === undefined ? "" : ` stroke-dasharray="${dash}"`;
    return `<path d="${pathData(shape)}" fill="none" stroke="${theme[colour]}" stroke-width="${width}"${dashed}/>`;
  }
  const { family, colour, weight, slant } = LETTERS[shape.lettering];
  const { size } = LETTERING[shape.lettering];
  const subscript =
    shape.subscript === ""
      ? ""
      : `<tspan dy="${n(size * 0.22)}" font-size="${n(size * SUBSCRIPT)}">${escaped(shape.subscript)}</tspan>`;
  return (
    `<text x="${n(shape.at.x)}" y="${n(shape.at.y)}" text-anchor="${shape.anchor}" font-family="${family}" ` +
    `font-size="${size}" font-weight="${weight}" font-style="${slant}" fill="${theme[colour]}">${escaped(shape.text)}${subscript}</text>`
  );
}

export function pathData({ points, closed }: Extract<Shape, { kind: "path" }>): string {
  return `M${points.map(({ x, y }) => `${n(x)} ${n(y)}`).join("L")}${closed ? "Z" : ""}`;
}

/** A hundredth of a unit is finer than any printer; a fixed form makes equal drawings equal bytes. */
function n(value: number): string {
  return String(Math.round(value * 100) / 100 || 0);
}

/** XML 1.0, fifth edition, 2.2 and 2.4: what may not stand in text, and what must be written as a reference. */
function escaped(text: string): string {
  return text
    .replace(/[^\t\n\r\u0020-\uD7FF\uE000-\uFFFD\u{10000}-\u{10FFFF}]/gu, "\uFFFD")
    .replace(/&/g, "&amp;")
    .replace(/</g, "&lt;")
    .replace(/>/g, "&gt;")
    .replace(/"/g, "&quot;")
    .replace(/'/g, "&#39;");
}
