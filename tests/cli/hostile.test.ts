import { afterAll, describe, expect, it } from "vitest";
import { CLEAN, Workplace } from "./run.ts";
import { junitMistakes, sarifMistakes } from "./standards/validate.ts";

/** Names and texts that try to be more than text. */
const COMMANDS = "##vso[task.setvariable variable=a]b ##[error]x ##teamcity[buildStop] ::error::x";
const NAME = "::error file=a::<b>&|*_`]](http:ev.il)@team #1 ##[error]\u001b[2J\u202e.wright";
const TEXT = CLEAN.replace(
  "  R  damper = b",
  `  R  damper e = "${COMMANDS} \u001b]0;x\u0007 <script> ]]> [a](http://ev.il) | @team" + b_`,
);
const FORMS = ["text", "json", "sarif", "junit", "markdown", "annotations"] as const;

const place = new Workplace()
  .write(NAME, TEXT)
  .write(
    `${COMMANDS.replaceAll("/", "")}/use.wright`,
    `${CLEAN.replace("e = F", "e = ##vso[x]")}\nuse "${NAME}"\n`,
  );

afterAll(() => place.remove());

const reports = Object.fromEntries(
  FORMS.map((form) => [form, place.run(["check", ".", "--format", form, "--fingerprints"])]),
);

describe("what a model's text and the names of files may do", () => {
  it.each(FORMS)("%s has no control characters and no commands for build machines", (form) => {
    const { code, out, err } = reports[form];
    expect([code, err]).toEqual([1, ""]);
    expect(out).toContain("error");
    // biome-ignore lint/suspicious/noControlCharactersInRegex: control characters are what is looked for.
    expect(out).not.toMatch(/[\u0000-\u0009\u000b-\u001f\u007f-\u009f\u202e]/);
    expect(out).not.toMatch(/##[a-z]*\[/i);
    for (const line of out.split("\n")) expect(line.trimStart()).not.toMatch(/^(::|##[a-z[])/i);
  });

  it("is text in JSON and SARIF still, and nothing but text in XML", async () => {
    expect(JSON.stringify(JSON.parse(reports.json.out))).toContain("##[error]");
    expect(sarifMistakes(JSON.parse(reports.sarif.out))).toEqual([]);
    expect(await junitMistakes(reports.junit.out)).toEqual([]);
  });

  it("makes no tag, link, mention or column in Markdown", () => {
    const tags = reports.markdown.out.replace(/<\/?code>/g, "");
    expect(tags).not.toMatch(/<|\]\(|:\/\/|@/);
    for (const row of tags.split("\n").filter((line) => line.startsWith("|"))) {
      expect([5, 6]).toContain(row.split("|").length);
    }
  });
});
