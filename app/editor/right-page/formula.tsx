import type { Formula } from "../view-model.ts";

/** A typeset formula. The HTML is our own typesetter's, made from our own writer's LaTeX. */
export function Typeset({ formula }: { formula: Formula }) {
  // biome-ignore lint/security/noDangerouslySetInnerHtml: see above; nothing of a reader's text is in it unescaped
  return <span className="typeset" dangerouslySetInnerHTML={{ __html: formula.html }} />;
}
