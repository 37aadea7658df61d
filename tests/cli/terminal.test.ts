import { afterAll, describe, expect, it } from "vitest";
import packageJson from "../../package.json";
import { CLEAN, CONFLICT, Workplace } from "./run.ts";

const ESCAPE = "\u001b";
const place = new Workplace().write("conflict.wright", CONFLICT).write("clean.wright", CLEAN);

afterAll(() => place.remove());

describe("colour", () => {
  it("is off where the output is no terminal, and on when asked for", () => {
    expect(place.run(["check", "conflict.wright"]).out).not.toContain(ESCAPE);
    expect(place.run(["check", "conflict.wright", "--color", "always"]).out).toContain(
      `${ESCAPE}[1;31merror`,
    );
    expect(
      place.run(["check", "conflict.wright", "--color", "always"], { env: { NO_COLOR: "1" } }).out,
    ).toContain(ESCAPE);
    expect(place.run(["check", "conflict.wright", "--color", "never"]).out).not.toContain(ESCAPE);
  });
});

describe("what a model may do to a terminal", () => {
  it("sends no control characters and turns no text round", () => {
    const text = `${CONFLICT.replace("  b -> node", `  b -> node # ${ESCAPE}[2J\u0007\u202e`)}@${ESCAPE}]0;title\u0007\n`;
    place.write("hostile.wright", text);
    for (const args of [["check"], ["equations"], ["format", "--check"]]) {
      const { out, err } = place.run([...args, "hostile.wright"]);
      // biome-ignore lint/suspicious/noControlCharactersInRegex: control characters are what is looked for.
      expect(out + err).not.toMatch(/[\u0000-\u0009\u000b-\u001f\u007f-\u009f\u202e]/);
    }
  });

  it("starts no line with a command for a build machine", () => {
    place.write("::error::x.wright", CONFLICT);
    for (const line of place.run(["check", "::error::x.wright"]).out.split("\n")) {
      expect(line.trimStart()).not.toMatch(/^(::|##)/);
    }
  });
});

describe("where paths after `use` count from", () => {
  const part = "notation 1\nsystem Part {\n  port a takes translation\n  R r e = 1 N*s/m * f\n  a -> r\n}\n";
  const whole =
    'notation 1\nuse "parts/part.wright"\nsystem Whole {\n  Sf v f = 1 m/s\n  sub part = Part()\n  v -> part.a\n}\n';

  it("is the folder above in which they lead to files, or the one that is marked", () => {
    place.write("set/parts/part.wright", part).write("set/models/whole.wright", whole);
    expect(place.run(["check", "set/models/whole.wright"]).code).toBe(0);
    place.write("set/models/bondwright.json", "{}");
    const marked = place.run(["check", "set/models/whole.wright"]);
    expect(marked.code).toBe(1);
    expect(marked.out).toContain("file-missing");
  });

  it("follows the name given to standard input", () => {
    place.write("other/parts/part.wright", part);
    expect(place.run(["check", "-", "--stdin-name", "other/whole.wright"], { stdin: whole }).code).toBe(0);
    expect(place.run(["check", "-"], { stdin: whole }).code).toBe(1);
  });
});

it("tells its version", () => {
  expect(place.run(["--version"]).out).toBe(`${packageJson.version}\n`);
});
