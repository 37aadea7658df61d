import { afterAll, describe, expect, it } from "vitest";
import { CheckDocument, EquationsDocument } from "../../grammar/writing/schemas.ts";
import { CLEAN, CONFLICT, DEPENDENT, SYNTAX_ERROR, UNMEASURABLE_REQUIREMENT, Workplace } from "./run.ts";

const place = new Workplace()
  .write("clean.wright", CLEAN)
  .write("conflict.wright", CONFLICT)
  .write("dependent.wright", DEPENDENT)
  .write("syntax.wright", SYNTAX_ERROR)
  .write("unmeasurable.wright", UNMEASURABLE_REQUIREMENT);

afterAll(() => place.remove());

describe("check, as text", () => {
  it("shows place, severity, name, the line with a mark, and the chain of bonds", () => {
    const { out } = place.run(["check", "conflict.wright"]);
    const lines = out.split("\n");
    expect(lines[0]).toMatch(
      /^conflict\.wright:10:3 {2}error {2}causal-conflict {2}The effort of `b->node` is set at both ends/,
    );
    expect(lines[1]).toBe("   10 |   b -> node");
    expect(lines[2]).toMatch(/^ {6}\| {3}\^+$/);
    expect(out).toContain("Se `a` sets the effort of `a->node` (conflict.wright:5:3)");
    expect(out).toContain("1 file, 1 system: 1 error");
  });

  it("fails a requirement that nothing measures, and says why", () => {
    const { out } = place.run(["check", "unmeasurable.wright"]);
    expect(out).toContain("error  not-computable  There is no mode 2");
    expect(out).toContain("0 of 1 requirement met, 1 failed");
  });

  it("prints nothing at all when quiet and clean", () => {
    expect(place.run(["check", "--quiet", "clean.wright"]).out).toBe("");
  });
});

describe("check, as JSON", () => {
  it.each(["clean", "conflict", "dependent", "syntax", "unmeasurable"])("%s holds to its schema", (name) => {
    const { out } = place.run(["check", "--format", "json", `${name}.wright`]);
    const document = CheckDocument.parse(JSON.parse(out));
    expect(document.files).toEqual([`${name}.wright`]);
    expect(document.summary.errors).toBe(
      document.findings.filter(({ severity }) => severity === "error").length,
    );
  });

  it("counts columns from 1 and in UTF-16 code units", () => {
    const text = CONFLICT.replace("  b -> node", "  b -> node # \u{1F6DF} buoy").replace("0 node", "0 node");
    place.write("buoy.wright", text);
    const { findings } = CheckDocument.parse(
      JSON.parse(place.run(["check", "--format", "json", "buoy.wright"]).out),
    );
    const conflict = findings.find(({ name }) => name === "causal-conflict");
    expect(conflict?.start).toEqual({ line: 10, column: 3 });
    expect(conflict?.end).toEqual({ line: 10, column: 12 });
  });
});

describe("equations", () => {
  it("holds to its schema, and gives SI values", () => {
    const document = EquationsDocument.parse(
      JSON.parse(place.run(["equations", "--format", "json", "clean.wright"]).out),
    );
    expect(document.system).toBe("Cart");
    expect(document.states).toEqual([{ name: "body.p", unit: "N*s", start: 0, kind: "p" }]);
    expect(document.equations).toEqual([{ state: "body.p", rate: "F - b*body.p/m" }]);
    expect(document.bonds[0]).toEqual({
      id: "push->rail",
      from: "push",
      to: "rail",
      stroke: "to",
      domain: "translation",
    });
  });

  it("gives empty arrays and the findings of a refused system", () => {
    const document = EquationsDocument.parse(
      JSON.parse(place.run(["equations", "--format", "json", "conflict.wright"]).out),
    );
    expect([document.states, document.equations, document.bonds]).toEqual([[], [], []]);
    expect(document.findings[0].name).toBe("causal-conflict");
  });

  it("writes text, co-energy variables, steps, LaTeX and a report", () => {
    expect(place.run(["equations", "clean.wright"]).out).toContain("  body.p' = F - b*body.p/m\n");
    expect(place.run(["equations", "clean.wright", "--states", "co-energy"]).out).toContain("body.f' = ");
    expect(place.run(["equations", "clean.wright", "--steps"]).out).toMatch(
      /Steps to body\.p'\n.*rate, line \d+/,
    );
    expect(place.run(["equations", "clean.wright", "--format", "latex"]).out).toContain(
      "\\dot{p}_{\\mathrm{body}} = F",
    );
    const report = place.run(["equations", "clean.wright", "--format", "markdown"]).out;
    expect(report).toContain("# Cart");
    expect(report).toContain("not a substitute for testing");
  });

  it("takes the last system of a file unless one is named, and only its findings", () => {
    const second = CLEAN.slice(CLEAN.indexOf("## A cart")).replace("system Cart", "system Trolley");
    place.write("two.wright", `${CONFLICT}\n${second}`);
    const last = place.run(["equations", "--format", "json", "two.wright"]);
    expect(EquationsDocument.parse(JSON.parse(last.out))).toMatchObject({ system: "Trolley", findings: [] });
    expect(last.code).toBe(0);
    const first = place.run(["equations", "--format", "json", "two.wright", "--system", "Lines"]);
    expect(EquationsDocument.parse(JSON.parse(first.out))).toMatchObject({ system: "Lines", states: [] });
    expect(first.code).toBe(1);
  });

  it("keeps findings off standard output", () => {
    const { out, err } = place.run(["equations", "dependent.wright"]);
    expect(out).not.toContain("derivative-causality");
    expect(err).toContain("derivative-causality");
  });
});
