import type { FileReport, TreeCache } from "../../grammar/pipeline.ts";
import type { Range } from "../../grammar/source/span.ts";
import type { FileSet, SourceText } from "../../grammar/source/text.ts";
import type { File, FileItem, Statement } from "../../grammar/syntax/tree.ts";
import { placeOf } from "./place.ts";
import type { OutlineEntry } from "./view-model.ts";

/** Every name that the file declares, and the systems, functions, curves and consts of the files it uses. */
export function outlineOf(report: FileReport, files: FileSet, trees: TreeCache): OutlineEntry[] {
  const own = files.get(report.path);
  const others = [...trees].filter(([source]) => source.path !== report.path);
  return [
    ...(own === undefined ? [] : entriesOf(report.tree, own, files)),
    ...others.flatMap(([source, { tree }]) =>
      entriesOf(tree, source, files).filter(({ within }) => within === null),
    ),
  ];
}

function entriesOf(tree: File, source: SourceText, files: FileSet): OutlineEntry[] {
  return tree.items.flatMap((item) => {
    const own = itemEntry(item, source, files);
    const inner = item.kind === "system" ? statementEntries(item.body, item.name.text, source, files) : [];
    return own === null ? inner : [own, ...inner];
  });
}

function itemEntry(item: FileItem, source: SourceText, files: FileSet): OutlineEntry | null {
  if (item.kind === "use" || item.kind === "unreadable") return null;
  const space = item.kind === "param" || item.kind === "const" ? "value" : item.kind;
  return entry(item.name.text, space, item.kind, null, item, item.name.range, source, files);
}

function statementEntries(
  body: readonly Statement[],
  within: string,
  source: SourceText,
  files: FileSet,
): OutlineEntry[] {
  return body.flatMap((statement): OutlineEntry[] => {
    const make = (name: string, space: OutlineEntry["space"], word: string, at: Range) => [
      entry(name, space, word, within, statement, at, source, files),
    ];
    switch (statement.kind) {
      case "param":
      case "const":
      case "input":
      case "output":
      case "let":
      case "track":
        return make(statement.name.text, "value", statement.kind, statement.name.range);
      case "junction":
        return make(statement.name.name.text, "node", statement.junction, statement.name.range);
      case "element":
        return make(statement.name.name.text, "node", statement.word.text, statement.name.range);
      case "sub":
      case "port":
        return make(statement.name.name.text, "node", statement.kind, statement.name.range);
      case "wiring":
        return statement.as === null ? [] : make(statement.as.name.text, "node", "bond", statement.as.range);
      case "repeat":
        return statementEntries(statement.body, within, source, files);
      default:
        return [];
    }
  });
}

function entry(
  name: string,
  space: OutlineEntry["space"],
  word: string,
  within: string | null,
  whole: { readonly range: Range; readonly description?: string | null; readonly remark?: string | null },
  at: Range,
  source: SourceText,
  files: FileSet,
): OutlineEntry {
  const place = placeOf({ file: source.path, start: at.start, end: at.end }, files);
  return {
    name,
    space,
    word,
    within,
    declaration: source.line(place.line).trim(),
    description: whole.description ?? whole.remark ?? null,
    place,
    lastLine: source.position(whole.range.end).line,
  };
}
