import { expect, test } from "vitest";
import type { Finding } from "../../grammar/diagnostics/finding.ts";
import { checkFile } from "../../grammar/pipeline.ts";
import type { Span } from "../../grammar/source/span.ts";
import { type FileSet, fileSet } from "../../grammar/source/text.ts";
import type { Statement } from "../../grammar/syntax/tree.ts";
import { knownModels, randomText, seeded } from "../syntax/random-texts.ts";

const COUNT = process.env.FULL === "1" ? 1_000_000 : 10_000;
const SEED = 20_262;

/** What must hold of every check, whatever was written; the answer is the first thing that doesn't. */
function broken(files: FileSet): string | null {
  const report = checkFile(files, "case.wright");
  for (const found of report.findings) {
    const astray = spansOf(found).find((span) => !isInside(span, files));
    if (astray !== undefined) return `${found.name} "${found.message}" points at ${JSON.stringify(astray)}`;
  }
  for (const item of report.tree.items) {
    if (item.kind !== "system" || !holdsUnreadable(item.body)) continue;
    const named = report.systems.filter(({ system }) => system === item.name.text);
    if (named.length === 1 && named[0].model !== null)
      return `${item.name.text} has equations, though a statement of it can't be read`;
  }
  return null;
}

function spansOf({ span, facts, fix }: Finding): Span[] {
  const told = facts.flatMap((fact) => (fact.span === undefined ? [] : [fact.span]));
  return [span, ...told, ...(fix?.edits.map((edit) => edit.span) ?? [])];
}

function isInside({ file, start, end }: Span, files: FileSet): boolean {
  const length = files.get(file)?.text.length ?? -1;
  return start >= 0 && start <= end && end <= length;
}

function holdsUnreadable(body: readonly Statement[]): boolean {
  return body.some(
    (one) => one.kind === "unreadable" || (one.kind === "repeat" && holdsUnreadable(one.body)),
  );
}

test(`${COUNT} random texts and mutated models through the whole core: no crash, every span in its file`, () => {
  const models = knownModels();
  const texts = [...models.values()];
  const random = seeded(SEED);
  for (let i = 0; i < COUNT; i += 1) {
    const text = randomText(random, texts, 0.8);
    const files = fileSet([...models, ["case.wright", text]]);
    let wrong: string | null;
    try {
      wrong = broken(files);
    } catch (thrown) {
      wrong = thrown instanceof Error ? `${thrown.stack}` : String(thrown);
    }
    if (wrong !== null) expect.fail(`text ${i}: ${wrong}\n=== of\n${text}`);
  }
}, 7_200_000);
