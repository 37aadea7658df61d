import { type Finding, finding } from "../diagnostics/finding.ts";
import type { SourceText } from "../source/text.ts";
import { LIMITS } from "./limits.ts";
import { toLines } from "./lines.ts";
import { OutlineReader } from "./outline.ts";
import { scan } from "./scan.ts";
import type { File } from "./tree.ts";

export interface Parsed {
  readonly tree: File;
  readonly findings: Finding[];
}

/**
 * The text of one file as a tree, with a finding for every statement that could not be read; the rest of the file
 * is read all the same. Never throws for what a user wrote.
 */
export function parse(source: SourceText): Parsed {
  const { path, text } = source;
  const range = { start: 0, end: text.length };
  if (tooLarge(text)) {
    const size = (LIMITS.fileBytes / 1e6).toFixed(0);
    const message = `A file may hold ${size} MB; this one has ${(text.length / 1e6).toFixed(1)} million characters. Move systems to files of their own.`;
    const tree: File = { path, range, edition: null, items: [], comments: [], balanced: false };
    return {
      tree,
      findings: [finding("too-large", { file: path, start: 0, end: Math.min(text.length, 80) }, message)],
    };
  }

  const findings: Finding[] = [];
  const { lines, comments, homeless } = toLines(text, scan(text));
  const { items, edition, balanced } = new OutlineReader(source, findings).read(lines);

  if (edition === null && text.trim() !== "") {
    const start = lines[0]?.tokens[0]?.startOffset ?? 0;
    const span = {
      file: path,
      start,
      end: lines[0]?.tokens[0] === undefined ? start : start + lines[0].tokens[0].image.length,
    };
    // Where a line further down says it, that line has a finding of its own.
    const fix = /^\s*notation\s/m.test(text)
      ? undefined
      : {
          title: "Begin with `notation 1`",
          edits: [{ span: { file: path, start: 0, end: 0 }, text: "notation 1\n" }],
        };
    findings.push(
      finding("syntax", span, "A file begins with the edition of the notation: `notation 1`.", { fix }),
    );
  }
  for (const token of homeless) {
    const span = { file: path, start: token.startOffset, end: token.startOffset + 2 };
    const fix = { title: "Write `#`", edits: [{ span, text: "#" }] };
    findings.push(
      finding(
        "syntax",
        span,
        "A remark stands behind the declaration it describes; a comment begins with `#`.",
        { fix },
      ),
    );
  }
  const unclean = text.indexOf("\ufffd");
  if (unclean !== -1 && !findings.some(({ span }) => span.start <= unclean && unclean < span.end)) {
    const span = { file: path, start: unclean, end: unclean + 1 };
    findings.push(
      finding("syntax", span, "The file is not clean UTF-8: what stood here was lost; save it as UTF-8."),
    );
  }
  findings.sort((a, b) => a.span.start - b.span.start);
  return { tree: { path, range, edition, items, comments, balanced }, findings };
}

function tooLarge(text: string): boolean {
  if (text.length > LIMITS.fileBytes) return true;
  if (text.length * 3 <= LIMITS.fileBytes) return false;
  return new TextEncoder().encode(text).length > LIMITS.fileBytes;
}
