import type { Span } from "../../grammar/source/span.ts";
import type { FileSet } from "../../grammar/source/text.ts";
import type { Place } from "./view-model.ts";

export function placeOf(span: Span, files: FileSet): Place {
  const source = files.get(span.file);
  const start = source?.position(span.start) ?? { line: 1, column: 1 };
  const end = source?.position(span.end) ?? start;
  return {
    file: span.file,
    line: start.line,
    column: start.column,
    endLine: end.line,
    endColumn: end.column,
  };
}
