import { readdirSync, readFileSync, symlinkSync } from "node:fs";
import path from "node:path";
import { afterAll, describe, expect, it } from "vitest";
import { CheckDocument } from "../../grammar/writing/schemas.ts";
import { CLEAN, CONFLICT, DEPENDENT, FAILED_REQUIREMENT, Workplace } from "./run.ts";
import { junitMistakes, sarifMistakes } from "./standards/validate.ts";

const place = new Workplace()
  .write("models/clean.wright", CLEAN)
  .write("models/conflict.wright", CONFLICT)
  .write("models/deep/dependent.wright", DEPENDENT)
  .write("models/failed.wright", FAILED_REQUIREMENT)
  .write("reports/old.xml", "old")
  .write(".git/HEAD", "");

afterAll(() => place.remove());

const written = (name: string) => readFileSync(path.join(place.folder, name), "utf8");

// biome-ignore lint/suspicious/noExplicitAny: the schema says what it is.
const sarifOf = (text: string): any => JSON.parse(text);

describe("check --output", () => {
  it("writes every form in one run beside what goes to standard output", async () => {
    symlinkSync("old.xml", path.join(place.folder, "reports/link.xml"));
    const forms = [
      "sarif=reports/a.sarif",
      "junit=reports/link.xml",
      "markdown=reports/a.md",
      "json=reports/a.json",
    ];
    const args = [...forms, "annotations=reports/a=b.txt", "text=reports/a.txt"].flatMap((o) => [
      "--output",
      o,
    ]);
    const { code, out, err } = place.run(["check", "models", ...args, "--color", "always"]);
    expect([code, err]).toEqual([1, ""]);
    expect(out).toContain("\u001b[1;31merror");
    expect(sarifMistakes(JSON.parse(written("reports/a.sarif")))).toEqual([]);
    expect(await junitMistakes(written("reports/old.xml"))).toEqual([]);
    expect(CheckDocument.parse(JSON.parse(written("reports/a.json"))).summary.files).toBe(4);
    expect(written("reports/a.md")).toContain("## Bondwright check: **failed**");
    expect(written("reports/a.txt")).toContain("models/conflict.wright:10:3  error  causal-conflict  ");
    expect(written("reports/a=b.txt")).toMatch(
      /^models\/conflict\.wright:10:3: error: .* \[causal-conflict\]$/m,
    );
    // Nothing half-written stays behind.
    expect(readdirSync(path.join(place.folder, "reports")).sort()).toEqual(
      ["a.json", "a.md", "a.sarif", "a.txt", "a=b.txt", "link.xml", "old.xml"].sort(),
    );
  });

  it.each([["sarif"], ["sarif="], ["html=a.html"], ["=a"], ["json=no/such/folder/a.json"], ["json=models"]])(
    "%s is wrong use, and nothing is printed",
    (output) => {
      const { code, out, err } = place.run(["check", "models/clean.wright", "--output", output]);
      expect([code, out]).toEqual([2, ""]);
      expect(err).toMatch(/^bondwright: .*(FORM=FILE|cannot be written)/);
    },
  );

  it("writes no file twice, and none when there is nothing to report", () => {
    const twice = ["--output", "json=twice.json", "--output", "sarif=./twice.json"];
    expect(place.run(["check", "models", ...twice]).code).toBe(2);
    expect(place.run(["check", "missing.wright", "--output", "json=twice.json"]).code).toBe(2);
    expect(readdirSync(place.folder)).not.toContain("twice.json");
  });
});

describe("check, as SARIF", () => {
  it("has a rule with help for each finding, places from the repository's root, facts and levels", () => {
    const sub = ["check", "conflict.wright", "deep", "--format", "sarif"];
    const log = sarifOf(place.run(sub, { cwd: "models" }).out);
    expect(sarifMistakes(log)).toEqual([]);
    const [{ results, tool, columnKind }] = log.runs;
    expect(columnKind).toBe("utf16CodeUnits");
    const conflict = results.find(({ ruleId }: { ruleId: string }) => ruleId === "causal-conflict");
    expect(conflict.level).toBe("error");
    expect(conflict.locations[0].physicalLocation).toEqual({
      artifactLocation: { uri: "models/conflict.wright", uriBaseId: "SRCROOT" },
      region: { startLine: 10, startColumn: 3, endLine: 10, endColumn: 12 },
    });
    expect(conflict.relatedLocations[0].physicalLocation.region.startLine).toBe(5);
    const rule = tool.driver.rules[conflict.ruleIndex];
    expect(rule.id).toBe("causal-conflict");
    expect(rule.help.markdown).toContain("```wright\n");
    expect(rule.help.text).not.toBe("");
  });

  it("knows a finding again though lines, blanks and comments move", () => {
    const prints = (text: string) =>
      sarifOf(place.run(["check", "-", "--format", "sarif"], { stdin: text }).out).runs[0].results.map(
        ({ partialFingerprints }: { partialFingerprints: object }) => partialFingerprints,
      );
    const before = prints(CONFLICT);
    expect(before.length).toBeGreaterThan(0);
    expect(new Set(before.map((print: object) => JSON.stringify(print))).size).toBe(before.length);
    const moved = CONFLICT.replace("notation 1", "notation 1\n\n# moved\n").replace(
      "b -> node",
      "b   ->  node # here",
    );
    expect(prints(moved)).toEqual(before);
    const renamed = CONFLICT.replace("Se b", "Se c").replace("b -> node", "c -> node");
    expect(prints(renamed)).not.toEqual(before);
  });

  it("carries fixes as replacements", () => {
    const text = CLEAN.replace("damper = b", "damper = b_");
    const log = sarifOf(place.run(["check", "-", "--format", "sarif"], { stdin: text }).out);
    const fixed = log.runs[0].results.filter(({ fixes }: { fixes?: unknown }) => fixes !== undefined);
    expect(sarifMistakes(log)).toEqual([]);
    expect(fixed.length).toBeGreaterThan(0);
    const [change] = fixed[0].fixes[0].artifactChanges;
    expect(change.artifactLocation.uri).toBe("stdin.wright");
    expect(change.replacements[0]).toHaveProperty("insertedContent.text");
  });
});

describe("check, as JUnit XML", () => {
  it("has a case a file and a case a requirement", async () => {
    const { out } = place.run(["check", "models", "--format", "junit"]);
    expect(await junitMistakes(out)).toEqual([]);
    expect(out).toMatch(/<testcase classname="models\.clean" name="no errors" time="[\d.]+"\/>/);
    expect(out).toContain('<testcase classname="models.clean.Cart" name="order = 1" time="0.000"/>');
    expect(out).toMatch(
      /classname="models\.conflict" name="no errors" .*><failure type="finding" message="causal-conf/,
    );
    expect(out).toMatch(
      /classname="models\.failed\.Cart" name="order = 2" .*><failure .*measured: 1<\/failure>/s,
    );
    // The failed requirement fails its own case and no other.
    expect(out).toMatch(/classname="models\.failed" name="no errors" time="[\d.]+"\/>/);
  });

  it("gives equal requirements names of their own, and judges by --fail-on", async () => {
    const twice = CLEAN.replace("expect order = 1", "expect order = 1\n  expect order = 1");
    const { out } = place.run(["check", "-", "--format", "junit"], { stdin: twice });
    expect(await junitMistakes(out)).toEqual([]);
    expect(out).toContain('name="order = 1 (2)"');
    const strict = place.run(["check", "models/deep", "--format", "junit", "--fail-on", "warning"]).out;
    expect(strict).toMatch(/name="no findings of severity warning or over".*><failure/);
  });
});

describe("check --trial", () => {
  const trials = `${CLEAN}
trial pushing of Cart {
  drive F = step(1 s, 10 N)
  run for 5 s
}

trial coasting of Cart {
  run for 5 s
}
${CLEAN.slice(CLEAN.indexOf("## A cart")).replaceAll("Cart", "Sled")}`;
  place.write("trials/cart.wright", trials);

  it("leaves out what belongs to other trials and systems", () => {
    const { out } = place.run(["check", "trials", "--trial", "coasting", "--format", "json"]);
    const document = CheckDocument.parse(JSON.parse(out));
    expect(document.systems.map(({ name }) => name)).toEqual(["Cart"]);
    const coasting = trials.split("\n").findIndex((line) => line.startsWith("trial coasting")) + 1;
    for (const { start } of document.findings) {
      expect(start.line >= coasting - 5 && start.line < coasting).toBe(false);
    }
  });

  it("is wrong use where there is none of that name", () => {
    const { code, err } = place.run(["check", "trials", "--trial", "towing"]);
    expect([code, err]).toEqual([2, "bondwright: No file that was given holds a trial towing.\n"]);
  });
});
