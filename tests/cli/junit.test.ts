import { afterAll, describe, expect, it } from "vitest";
import type { CheckRun } from "../../cli/check-run.ts";
import { DiskFiles } from "../../cli/disk-files.ts";
import { junitReport } from "../../cli/output/junit.ts";
import { finding } from "../../grammar/diagnostics/finding.ts";
import { checkFile } from "../../grammar/pipeline.ts";
import { CLEAN, Workplace } from "./run.ts";
import { junitMistakes } from "./standards/validate.ts";

const place = new Workplace().write("cart.wright", CLEAN);

afterAll(() => place.remove());

/** A check of one file with one requirement, whose text and findings are as given. */
function runOf(text: string, judged: boolean, messages: readonly string[] = []): CheckRun {
  const files = new DiskFiles(place.folder);
  const report = checkFile(files, "cart.wright");
  const span = { file: "cart.wright", start: 0, end: 1 };
  const systems = report.systems.map((system) => ({
    ...system,
    expectations: system.expectations.map((each) => ({
      ...each,
      text,
      judged,
      passed: false,
      message: text,
    })),
  }));
  const findings = messages.map((message) => finding("syntax", span, message));
  return {
    checked: [{ report: { ...report, systems, findings }, files, shown: (path) => path, seconds: 0.0123 }],
    failOn: "error",
    passed: false,
    startedAt: new Date("2026-12-01T08:00:00Z"),
    quiet: false,
    fingerprints: false,
  };
}

describe("JUnit XML", () => {
  it("skips a requirement that is not judged", async () => {
    const xml = junitReport(runOf("stable", false));
    expect(await junitMistakes(xml)).toEqual([]);
    expect(xml).toContain('tests="2" failures="0" errors="0" skipped="1" time="0.012"');
    expect(xml).toContain('name="stable" time="0.000"><skipped message="stable"/></testcase>');
  });

  it("holds every character that a name may have, and none that XML forbids", async () => {
    const every = Array.from({ length: 0x3000 }, (_, code) => String.fromCharCode(code)).join("");
    const text = `${every}\ufffe\uffff\ud800 ]]> <!-- & \u{1F6DF} ##vso[task.complete]`;
    const xml = junitReport(runOf(text, true, [text]));
    expect(await junitMistakes(xml)).toEqual([]);
    expect(xml).toContain("\u{1F6DF}");
    expect(xml).not.toMatch(/[\ufffe\uffff]|\p{Surrogate}|##vso/u);
  });
});
