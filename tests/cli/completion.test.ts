import { spawnSync } from "node:child_process";
import { afterAll, describe, expect, it } from "vitest";
import { Workplace } from "./run.ts";

const place = new Workplace();

afterAll(() => place.remove());

const script = place.run(["completion", "bash"]).out;

/** What bash offers for the last of these words. */
function offered(...words: string[]): string[] {
  const ask = `COMP_WORDS=("$@"); COMP_CWORD=$(($# - 1)); _bondwright; printf '%s\\n' "\${COMPREPLY[@]}"`;
  const bash = spawnSync("bash", ["--norc", "-c", `${script}\n${ask}`, "bash", ...words], {
    encoding: "utf8",
  });
  expect(bash.stderr).toBe("");
  return bash.stdout.trim().split("\n");
}

describe("completion in bash", () => {
  it.each([
    [["bondwright", "che"], ["check"]],
    [["bondwright", "check", "--format", "ju"], ["junit"]],
    [["bondwright", "check", "models", "--fai"], ["--fail-on"]],
    [["bondwright", "explain", "algebraic"], ["algebraic-loop"]],
    [
      ["bondwright", "completion", ""],
      ["bash", "zsh", "fish"],
    ],
    [["bondwright", "check", "mod"], [""]],
  ])("%j: %j", (words, expected) => {
    expect(offered(...words)).toEqual(expected);
  });
});

describe("completion in other shells", () => {
  it("names every command and option, and no text that the shell would read", () => {
    const help = place.run(["check", "--help"]).out;
    const options = [...help.matchAll(/^ {2}(?:-\w, )?--([a-z-]+)/gm)].map(([, name]) => name);
    expect(options).toContain("output");
    for (const shell of ["zsh", "fish"]) {
      const { out, code } = place.run(["completion", shell]);
      expect(code).toBe(0);
      expect(out).not.toContain("`");
      for (const line of out.split("\n")) expect(line.split("'").length % 2, line).toBe(1);
      for (const name of options.filter((each) => each !== "help")) expect(out).toContain(name);
    }
  });

  it("is wrong use where there is none for a shell", () => {
    expect(place.run(["completion", "tcsh"]).code).toBe(2);
  });
});
