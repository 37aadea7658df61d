import { describe, expect, it } from "vitest";
import type { Finding, FindingName } from "../../grammar/diagnostics/finding.ts";
import { checkFile } from "../../grammar/pipeline.ts";
import { type FileSet, fileSet } from "../../grammar/source/text.ts";
import { casesOf, MAIN_FILE, stages } from "../cases/case.ts";
import { knownModels, randomText, seeded } from "../syntax/random-texts.ts";

/** Every fix that is offered takes its finding away, and brings no error with it. */
const FULL = process.env.FULL === "1";

/** The causal cases have comments of their own; they are read as texts below. */
const cases = stages()
  .filter((stage) => stage !== "causality")
  .flatMap((stage) =>
    casesOf(stage).map(({ name, files }) => ({ name: `${stage}/${name}`, files, main: MAIN_FILE })),
  );
const models = knownModels();
const whole = [...models.keys()].map((main) => ({ name: main, files: fileSet([...models]), main }));

describe.each([
  ["cases of the language", cases],
  ["models as they stand", whole],
])("%s", (_, texts) => {
  it.each(texts)("$name", ({ files, main }) => {
    expect(unmended(files, main)).toEqual([]);
  });
});

it("models with a slip", { timeout: 1_800_000 }, () => {
  const random = seeded(20_263);
  const texts = [...models.values()];
  let fixes = 0;
  for (let i = 0; i < (FULL ? 20_000 : 400); i += 1) {
    const text = randomText(random, texts, 1);
    const files = fileSet([...models, [MAIN_FILE, text]]);
    // Of several slips in brackets and braces, each may be told as another one's doing.
    if (checkFile(files, MAIN_FILE).findings.filter(({ name }) => name === "syntax").length > 1) continue;
    const wrong = unmended(files, MAIN_FILE, () => {
      fixes += 1;
    });
    if (wrong.length > 0) expect.fail(`text ${i}: ${wrong.join("\n")}\n=== of\n${text}`);
  }
  expect(fixes).toBeGreaterThan(FULL ? 2_000 : 40);
});

/** Errors of later stages, which do not look at a text that has an error of resolve. */
const AFTER_RESOLVE: readonly FindingName[] = [
  "stroke-refused",
  "causal-conflict",
  "singular-junctions",
  "not-computable",
  "expectation-failed",
];

/** What an error may have hidden, or, of a name or a file that is guessed at, what the guess was wrong in. */
function mayComeToLight(found: Finding, others: boolean, fresh: Finding): boolean {
  // A statement is read up to its first slip.
  if (found.name === "syntax") return true;
  if (found.name === "unknown-name" || found.name === "file-missing") return fresh.name !== "syntax";
  // Who did not mean the unit may have meant neither.
  if (found.name === "unit-or-name") return fresh.name === "unit-mismatch";
  return (others || found.severity === "error") && AFTER_RESOLVE.includes(fresh.name);
}

/** What goes wrong when each fix is applied alone. */
function unmended(files: FileSet, main: string, each: () => void = () => {}): string[] {
  const before = checkFile(files, main).findings;
  const errors = before.filter(({ severity }) => severity === "error").length;
  return before.flatMap((found) => {
    if (found.fix === undefined) return [];
    each();
    const after = checkFile(mended(files, found), main).findings;
    const count = (findings: readonly Finding[]) => findings.filter((one) => sameAs(one, found)).length;
    const told = `${found.name}: ${found.message} Fix: ${found.fix.title}.`;
    const fresh = after.filter(
      (one) =>
        one.severity === "error" &&
        !before.some((old) => sameAs(old, one)) &&
        !mayComeToLight(found, errors > (found.severity === "error" ? 1 : 0), one),
    );
    const syntaxErrors = (findings: readonly Finding[]) =>
      findings.filter(({ name }) => name === "syntax").length;
    return [
      ...(errors === 1 && syntaxErrors(after) > 1 ? [`${told} It brings more errors of syntax.`] : []),
      ...(count(after) >= count(before) ? [`${told} The finding stays.`] : []),
      ...fresh.map(({ name, message }) => `${told} It brings ${name}: ${message}`),
    ];
  });
}

function sameAs(one: Finding, other: Finding): boolean {
  return one.name === other.name && one.message === other.message;
}

function mended(files: FileSet, { fix }: Finding): FileSet {
  const edits = [...(fix?.edits ?? [])].sort((a, b) => b.span.start - a.span.start);
  return fileSet(
    [...files].map(([path, { text }]) => {
      const own = edits.filter(({ span }) => span.file === path);
      return [
        path,
        own.reduce(
          (done, { span, text: put }) => done.slice(0, span.start) + put + done.slice(span.end),
          text,
        ),
      ];
    }),
  );
}
