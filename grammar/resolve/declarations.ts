import type { Finding } from "../diagnostics/finding.ts";
import { curveOf } from "./curves.ts";
import { Draft, NO_INDICES } from "./draft.ts";
import type { SourceFile } from "./files.ts";
import { fileConst } from "./parameters.ts";
import { plainScope } from "./scope.ts";
import { Translator } from "./translate.ts";

/**
 * Consts, functions and curves of a file, looked at for themselves: a function's names even where nothing calls
 * it (its units are checked at each call), a curve's units and points.
 */
export function checkDeclarations(file: SourceFile): Finding[] {
  const draft = new Draft(file);
  const translator = new Translator(draft);
  const scope = plainScope(file, null, NO_INDICES, true);
  for (const item of file.tree.items) {
    if (item.kind === "const" || item.kind === "param")
      fileConst(translator, { file, item }, scope, item.name.range);
    else if (item.kind === "function") {
      const bound = new Map(item.parameters.map(({ text }) => [text, translator.unknown]));
      translator.whole(item.body, { ...scope, bound, fixed: false });
    } else if (item.kind === "curve") {
      curveOf(translator, { file, item });
    }
  }
  return draft.findings;
}
