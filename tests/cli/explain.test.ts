import { afterAll, describe, expect, it } from "vitest";
import { terminalText } from "../../cli/output/terminal-text.ts";
import { FINDINGS, type FindingName } from "../../grammar/diagnostics/finding.ts";
import { pageOf } from "../../grammar/diagnostics/pages.ts";
import { CLEAN, CONFLICT, DEPENDENT, Workplace } from "./run.ts";

const place = new Workplace()
  .write("clean.wright", CLEAN)
  .write("conflict.wright", CONFLICT)
  .write("dependent.wright", DEPENDENT);

afterAll(() => place.remove());

describe("explain", () => {
  it("shows a page: name and severity, what it is, and both examples", () => {
    const { code, out, err } = place.run(["explain", "causal-conflict"]);
    expect({ code, err }).toEqual({ code: 0, err: "" });
    expect(out).toMatch(/^causal-conflict {2}error\n\nTwo parts of the model set the same effort/);
    expect(out).toContain("Fails:\n    notation 1\n    system Lines {\n      input p_a : bar = 5 bar\n");
    expect(out).toContain("\n\nModel the line between them.\n\nMended:\n    notation 1\n");
  });

  it.each(Object.keys(FINDINGS) as FindingName[])("wraps the page of %s and keeps its code", (name) => {
    const page = pageOf(name);
    const lines = terminalText(page?.text ?? "").split("\n");
    expect(lines.filter((line) => line.length > 80 && !line.startsWith("    "))).toEqual([]);
    const code = lines.filter((line) => line.startsWith("    ")).map((line) => line.slice(4));
    expect(code).toEqual(page?.examples.flatMap((example) => example.code.trimEnd().split("\n")));
    expect(lines.filter((line) => /^(Fails.*|Mended):$/.test(line))).toHaveLength(2);
  });

  it("lists every finding under its severity", () => {
    const { code, out } = place.run(["explain"]);
    expect(code).toBe(0);
    const sections = out.split(/^(?=Errors|Warnings|Notes)/m).filter((section) => section !== "");
    const listed = sections.flatMap((section) =>
      [...section.matchAll(/^([a-z][a-z-]+) {2,}\S/gm)].map(([, name]) => [
        name,
        section.slice(0, section.indexOf("\n") - 1).toLowerCase(),
      ]),
    );
    expect(Object.fromEntries(listed)).toEqual(FINDINGS);
  });

  it("offers what may be meant by a name that is none", () => {
    for (const [asked, meant] of [
      ["algebraic-lop", "algebraic-loop"],
      ["causality", "derivative-causality"],
      ["Unused-Name", "unused-name"],
    ]) {
      const { code, out, err } = place.run(["explain", asked]);
      expect([code, out]).toEqual([2, ""]);
      expect(err).toContain(`Is ${meant}`);
    }
    const { code, err } = place.run(["explain", "__proto__"]);
    expect(code).toBe(2);
    expect(err).toContain("There is no finding __proto__. `bondwright explain` lists them all.");
  });
});

describe("the last line of a check", () => {
  it.each([
    ["conflict.wright", "causal-conflict"],
    ["dependent.wright", "derivative-causality"],
  ])("of %s tells where to read on", (file, name) => {
    const { out } = place.run(["check", file]);
    expect(out.trimEnd().split("\n").at(-1)).toBe(`\`bondwright explain ${name}\` tells more.`);
  });

  it("is the summary where there is nothing to explain", () => {
    expect(place.run(["check", "clean.wright"]).out).not.toContain("bondwright explain");
    expect(place.run(["check", "--quiet", "conflict.wright"]).out).not.toContain("bondwright explain");
  });
});
