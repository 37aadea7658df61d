import type { SourceText } from "../../grammar/source/text.ts";
import type { File } from "../../grammar/syntax/tree.ts";

/**
 * What a tree says, without where it says it: two texts mean the same if and only if this is equal.
 * A statement that could not be read means its own words.
 */
export function meaning(tree: File, { text }: SourceText): unknown {
  const { edition, items, comments } = tree;
  return {
    edition: edition?.number ?? null,
    items: plain(items),
    comments: comments.map((comment) => [comment.text, comment.description]),
  };

  function plain(node: unknown): unknown {
    if (Array.isArray(node)) return node.map(plain);
    if (typeof node !== "object" || node === null) return node;
    const kept = Object.entries(node).filter(([key]) => key !== "range" && key !== "block");
    const said: Record<string, unknown> = Object.fromEntries(kept.map(([key, value]) => [key, plain(value)]));
    if ("kind" in node && node.kind === "unreadable" && "range" in node) {
      const { start, end } = node.range as { start: number; end: number };
      said.words = text.slice(start, end).replace(/\r\n?/g, "\n");
    }
    return said;
  }
}
