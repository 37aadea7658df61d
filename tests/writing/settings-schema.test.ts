import { describe, expect, it } from "vitest";
import { z } from "zod";
import { readSettings } from "../../grammar/diagnostics/settings.ts";
import { SettingsDocument } from "../../grammar/writing/settings-schema.ts";

const ACCEPTED = {
  finding: "derivative-causality",
  file: "gear.wright",
  fingerprint: "0123456789abcdef",
  owner: "drives team",
  reason: "rigid by design",
  until: "2027-03-31",
};

const accepted = (change: object) => ({ accepted: [{ ...ACCEPTED, ...change }] });
const severities = (name: string, entry: unknown) => ({ severities: { [name]: entry } });

const GOOD: unknown[] = [
  {},
  { $schema: "settings.json", severities: {}, accepted: [] },
  severities("missing-description", { severity: "error", reason: "we hand models over" }),
  severities("syntax", { severity: "error", reason: "as it is" }),
  accepted({}),
];

const BAD: [part: string, document: unknown][] = [
  ["an object", []],
  ["an object", null],
  ["there is no setting severites. Is severities meant?", { severites: {} }],
  ["there is no setting __proto__", JSON.parse('{ "__proto__": {} }')],
  ["severities: an object", { severities: [] }],
  [
    "severities.missing-descripton: there is no finding",
    severities("missing-descripton", { severity: "note", reason: "x" }),
  ],
  ["severities.stiff: an object", severities("stiff", "note")],
  ["severities.stiff.severity: one of", severities("stiff", { severity: "off", reason: "x" })],
  ["severities.stiff.reason: a text", severities("stiff", { severity: "note" })],
  ["severities.stiff.reason: a text", severities("stiff", { severity: "note", reason: "  " })],
  [
    "severities.stiff: there is no setting why",
    severities("stiff", { severity: "note", reason: "x", why: "y" }),
  ],
  [
    "severities.syntax: an error cannot be made a note",
    severities("syntax", { severity: "note", reason: "x" }),
  ],
  ["accepted: a list", { accepted: {} }],
  ["accepted[0]: an object", { accepted: ["x"] }],
  ["accepted[0].finding: there is no finding", accepted({ finding: "no-such" })],
  ["accepted[0].finding: syntax is an error", accepted({ finding: "syntax" })],
  ["accepted[0].finding: what is stale", accepted({ finding: "stale-acceptance" })],
  ["accepted[0].fingerprint: 16 hexadecimal", accepted({ fingerprint: "12" })],
  ["accepted[0].owner: a text", accepted({ owner: "" })],
  ["accepted[0].reason: a text", accepted({ reason: 5 })],
  ["accepted[0].file: a text", accepted({ file: undefined })],
  ["accepted[0].until: a day", accepted({ until: "31.3.2027" })],
];

describe("the settings of a set", () => {
  it.each(GOOD)("%j is read, and the schema holds it", (document) => {
    expect(() => readSettings(JSON.stringify(document))).not.toThrow();
    expect(SettingsDocument.safeParse(document).success).toBe(true);
  });

  it.each(BAD)("%s: refused by the reader and by the schema", (message, document) => {
    expect(() => readSettings(JSON.stringify(document))).toThrow(message);
    // JSON Schema sees `__proto__` where zod, which works on objects, does not.
    if (!message.includes("__proto__")) expect(SettingsDocument.safeParse(document).success).toBe(false);
  });

  it("names every mistake at once, and those that no schema can tell", () => {
    const two = {
      severities: { stif: 1 },
      accepted: [ACCEPTED, ACCEPTED, { ...ACCEPTED, until: "2027-02-30" }],
    };
    expect(() => readSettings(JSON.stringify(two))).toThrow(
      /severities\.stif: there is no finding stif\. Is stiff meant\?\n.*accepted\[1\]: accepted\[0\] accepts the same finding\.\naccepted\[2\]\.until: a day/s,
    );
    expect(() => readSettings("{ ")).toThrow("This is not JSON: ");
  });

  it("public/schemas/settings.json is what editors are told", async () => {
    const json = { title: "bondwright.json", ...z.toJSONSchema(SettingsDocument) };
    await expect(`${JSON.stringify(json, null, 2)}\n`).toMatchFileSnapshot(
      "../../public/schemas/settings.json",
    );
  });
});
