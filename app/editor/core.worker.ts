import { checkFile, type FileReport, type TreeCache } from "../../grammar/pipeline.ts";
import { SourceText } from "../../grammar/source/text.ts";
import { formatText } from "../../grammar/syntax/format.ts";
import { answerTo } from "./build-audit.ts";
import { viewOf } from "./build-view.ts";
import type { CoreAnswer, CoreRequest } from "./core-messages.ts";
import { namesAt } from "./names/rename.ts";

/** The core beside the page: keeps the set's texts and trees, and works out only the newest request. */
const files = new Map<string, SourceText>();
const trees: TreeCache = new Map();
let newest: (CoreRequest & { kind: "check" }) | null = null;
/** What the last check found: questions are answered out of it. */
let report: FileReport | null = null;

self.onmessage = (event: MessageEvent<CoreRequest>) => {
  const request = event.data;
  if (request.kind === "format") {
    answer(request.number, () => ({
      kind: "formatted",
      number: request.number,
      text: formatText(new SourceText(request.path, request.text)),
    }));
    return;
  }
  if (request.kind === "names") {
    answer(request.number, () => ({
      kind: "named",
      number: request.number,
      answer: namesAt(files, trees, request),
    }));
    return;
  }
  if (request.kind === "ask") {
    answer(request.number, () => ({
      kind: "answer",
      number: request.number,
      answer: report?.path === request.path ? answerTo(request.question, report, files) : null,
    }));
    return;
  }
  for (const [path, text] of request.changed) replace(path, text);
  const idle = newest === null;
  newest = request;
  // Key strokes that are already waiting come in first, so that only the last of them is worked out.
  if (idle) setTimeout(checkNewest, 0);
};

function checkNewest(): void {
  const request = newest;
  newest = null;
  if (request === null) return;
  answer(request.number, () => {
    const began = performance.now();
    report = checkFile(files, request.path, { cache: trees });
    const view = viewOf(report, files, trees, request);
    return { kind: "view", number: request.number, view, milliseconds: performance.now() - began };
  });
}

function replace(path: string, text: string | null): void {
  const known = files.get(path);
  if (known !== undefined) trees.delete(known);
  if (text === null) files.delete(path);
  else files.set(path, new SourceText(path, text));
}

function answer(number: number, work: () => CoreAnswer): void {
  let result: CoreAnswer;
  try {
    result = work();
  } catch (fault) {
    result = { kind: "fault", number, message: fault instanceof Error ? fault.message : String(fault) };
  }
  self.postMessage(result);
}
