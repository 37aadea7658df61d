import { afterAll, describe, expect, it } from "vitest";
import { CheckDocument } from "../../grammar/writing/schemas.ts";
import { CLEAN, DEPENDENT, Workplace } from "./run.ts";
import { junitMistakes, sarifMistakes } from "./standards/validate.ts";

const place = new Workplace();

afterAll(() => place.remove());

/** A set of its own for one test. */
function set(name: string, settings: unknown, gear = DEPENDENT): string {
  place.write(`${name}/gear.wright`, gear).write(`${name}/parts/cart.wright`, CLEAN);
  place.write(`${name}/bondwright.json`, typeof settings === "string" ? settings : JSON.stringify(settings));
  return name;
}

function checked(args: readonly string[]) {
  const { out, code, err } = place.run(["check", ...args, "--format", "json"]);
  expect(err).toBe("");
  return { code, document: CheckDocument.parse(JSON.parse(out)) };
}

const [{ fingerprint }] = checked([set("plain", {})]).document.findings;

const entry = (change: object = {}) => ({
  finding: "derivative-causality",
  file: "gear.wright",
  fingerprint,
  owner: "drives team",
  reason: "the shaft is rigid",
  until: "2999-12-31",
  ...change,
});

describe("severities", () => {
  it("are those of the settings, in every form and in the exit code", () => {
    const severities = { "derivative-causality": { severity: "error", reason: "no dependent stores here" } };
    const { code, document } = checked([set("strict", { severities })]);
    expect([code, document.summary.errors, document.findings[0].severity]).toEqual([1, 1, "error"]);
    expect(place.run(["check", "strict", "--format", "annotations"]).out).toContain(": error: ");
    severities["derivative-causality"].severity = "note";
    expect(place.run(["check", set("mild", { severities }), "--fail-on", "warning"]).code).toBe(0);
  });
});

describe("an accepted finding", () => {
  it("is shown with its owner, reason and day, and fails nothing", async () => {
    set("accepted", { accepted: [entry()] });
    const { code, document } = checked(["accepted", "--fail-on", "note"]);
    expect([code, document.summary.warnings, document.summary.accepted]).toEqual([0, 0, 1]);
    expect(document.findings[0].accepted?.owner).toBe("drives team");

    const form = (name: string) => place.run(["check", "accepted", "--format", name]).out;
    expect(form("text")).toContain("accepted warning  derivative-causality");
    expect(form("text")).toContain("by drives team until 2999-12-31: the shaft is rigid");
    expect(form("annotations")).toBe("");
    expect(form("markdown")).toContain("### Accepted");
    const sarif = JSON.parse(form("sarif"));
    expect(sarifMistakes(sarif)).toEqual([]);
    expect(sarif.runs[0].results[0].suppressions[0]).toMatchObject({ kind: "external", status: "accepted" });
    expect(await junitMistakes(form("junit"))).toEqual([]);
    expect(form("junit")).not.toContain("<failure");
  });

  it("stays accepted when lines move, and hides no second one", () => {
    const moved = DEPENDENT.replace("  Se motor", "\n  # the motor\n\n  Se motor").replace(
      "  I J2\n",
      "  I J2 # drum\n",
    );
    expect(checked([set("moved", { accepted: [entry()] }, moved), "--fail-on", "warning"]).code).toBe(0);
    const twin = `${DEPENDENT}\n${DEPENDENT.slice(DEPENDENT.indexOf("## A")).replace("system Gear", "system Twin")}`;
    const { code, document } = checked([set("twin", { accepted: [entry()] }, twin), "--fail-on", "warning"]);
    expect([code, document.summary.accepted, document.summary.warnings]).toEqual([1, 1, 1]);
  });

  it("is stale when its day has passed, at its line of the settings", () => {
    const { code, document } = checked([
      set("late", { accepted: [entry({ until: "2020-01-31" })] }),
      "--fail-on",
      "warning",
    ]);
    expect(code).toBe(1);
    expect(document.findings.map(({ name, file }) => [name, file])).toEqual([
      ["derivative-causality", "late/gear.wright"],
      ["stale-acceptance", "late/bondwright.json"],
    ]);
    expect(document.findings[1].message).toContain("ended on 2020-01-31");
    expect(document.findings[1].start.column).toBeGreaterThan(1);
  });

  it("is stale when it no longer occurs, which only a check of the whole set can tell", () => {
    set("gone", { accepted: [entry()] }, CLEAN);
    const { code, document } = checked(["gone", "--fail-on", "warning"]);
    expect([code, document.findings.map(({ name }) => name)]).toEqual([1, ["stale-acceptance"]]);
    expect(document.findings[0].message).toContain("no longer occurs");
    expect(checked(["gone/parts", "--fail-on", "warning"]).code).toBe(0);
    expect(checked(["gone", "--system", "Cart", "--fail-on", "warning"]).code).toBe(0);
  });

  it("of another set is another matter", () => {
    set("outer", { accepted: [entry({ file: "inner/gear.wright" })] }, CLEAN);
    set("outer/inner", {});
    expect(checked(["outer", "--fail-on", "warning"]).document.findings.map(({ name }) => name)).toEqual([
      "stale-acceptance",
      "derivative-causality",
    ]);
  });
});

describe("settings that are wrong", () => {
  it.each([
    ["{", "bad/bondwright.json: This is not JSON: "],
    [{ accept: [] }, "bad/bondwright.json: there is no setting accept. Is accepted meant?"],
    [{ accepted: [entry({ until: "soon" })] }, "bad/bondwright.json: accepted[0].until: a day is wanted"],
  ])("stop the check before it has judged anything: %j", (settings, message) => {
    const { code, out, err } = place.run(["check", set("bad", settings)]);
    expect([code, out]).toEqual([2, ""]);
    expect(err).toContain(message);
  });
});

it("prints fingerprints where they are asked for", () => {
  expect(place.run(["check", "plain", "--fingerprints"]).out).toContain(
    `\n       fingerprint ${fingerprint}\n`,
  );
  expect(place.run(["check", "plain"]).out).not.toContain("fingerprint");
});
