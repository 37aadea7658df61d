import katex from "katex";
import type { Formula } from "./view-model.ts";

/** Typeset formulas by their LaTeX: between two key strokes nearly all of them stay the same. */
const typeset = new Map<string, string>();
const KEPT = 5_000;

/** HTML for the eye with MathML for those who listen. The LaTeX is our own writer's; nothing in it is trusted. */
function typesetLatex(latex: string): string {
  const known = typeset.get(latex);
  if (known !== undefined) return known;
  if (typeset.size >= KEPT) typeset.clear();
  const html = katex.renderToString(`\\displaystyle ${latex}`, {
    throwOnError: false,
    trust: false,
    strict: "ignore",
    output: "htmlAndMathml",
  });
  typeset.set(latex, html);
  return html;
}

export function formula(text: string, latex: string): Formula {
  return { text, html: typesetLatex(latex) };
}
