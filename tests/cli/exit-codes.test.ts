import { afterAll, describe, expect, it } from "vitest";
import {
  CLEAN,
  CONFLICT,
  DEPENDENT,
  FAILED_REQUIREMENT,
  SYNTAX_ERROR,
  UNMEASURABLE_REQUIREMENT,
  Workplace,
} from "./run.ts";

const place = new Workplace()
  .write("clean.wright", CLEAN)
  .write("conflict.wright", CONFLICT)
  .write("dependent.wright", DEPENDENT)
  .write("failed.wright", FAILED_REQUIREMENT)
  .write("unmeasurable.wright", UNMEASURABLE_REQUIREMENT)
  .write("syntax.wright", SYNTAX_ERROR)
  .write("untidy.wright", CLEAN.replace("param m =", "param  m="))
  .write("no-system.wright", "notation 1\n")
  .write("latin.txt", Buffer.from("notation 1\n# gr\u00fcn\n", "latin1"))
  .write("clean-folder/a.wright", CLEAN)
  .write("mixed-folder/a.wright", CLEAN)
  .write("mixed-folder/deep/b.wright", CONFLICT)
  .write("empty-folder/readme.txt", "");

afterAll(() => place.remove());

describe("exit codes", () => {
  const table: [code: number, args: string, stdin?: string][] = [
    [0, "check clean.wright"],
    [0, "check clean-folder"],
    [0, "check -", CLEAN],
    [0, "check dependent.wright"],
    [1, "check unmeasurable.wright"],
    [0, "check clean.wright --system Cart"],
    [0, "equations clean.wright"],
    [0, "equations dependent.wright"],
    [0, "equations -", CLEAN],
    [0, "format --check clean.wright"],
    [0, "format --stdout untidy.wright"],
    [0, "--version"],
    [0, "--help"],
    [0, "check --help"],
    [1, "check conflict.wright"],
    [1, "check mixed-folder"],
    [1, "check ."],
    [1, "check"],
    [1, "check failed.wright"],
    [1, "check syntax.wright"],
    [1, "check -", CONFLICT],
    [1, "check dependent.wright --fail-on warning"],
    [1, "check unmeasurable.wright --fail-on note"],
    [1, "check conflict.wright --quiet --format json"],
    [1, "equations conflict.wright"],
    [1, "equations syntax.wright --format json"],
    [1, "format --check untidy.wright"],
    [1, "format --check syntax.wright"],
    [1, "format --stdout syntax.wright"],
    [2, ""],
    [2, "check missing.wright"],
    [2, "check empty-folder"],
    [2, "check latin.txt"],
    [2, "check clean.wright --system Winch"],
    [2, "check clean.wright --format xml"],
    [2, "check clean.wright --fail-on never"],
    [2, "check clean.wright --what"],
    [2, "verify clean.wright"],
    [2, "equations"],
    [2, "equations clean.wright --system Winch"],
    [2, "equations no-system.wright"],
    [2, "equations mixed-folder"],
    [2, "format --stdout mixed-folder"],
    [2, "format missing.wright"],
  ];

  it.each(table)("%i for bondwright %s", (code, args, stdin) => {
    const outcome = place.run(
      args.split(" ").filter((arg) => arg !== ""),
      { stdin },
    );
    expect(outcome.code, outcome.err + outcome.out).toBe(code);
    // Wrong use is said on standard error, so that a report is never mistaken for one.
    if (code === 2) {
      expect(outcome.out).toBe("");
      expect(outcome.err).not.toBe("");
      expect(outcome.err).not.toContain("internal fault, please");
    }
  });
});
