import { readdirSync, readFileSync, statSync, symlinkSync } from "node:fs";
import path from "node:path";
import { afterAll, expect, it } from "vitest";
import { CLEAN, SYNTAX_ERROR, Workplace } from "./run.ts";

const place = new Workplace();
const UNTIDY = CLEAN.replace("param m =", "param  m=");
const read = (name: string) => readFileSync(path.join(place.folder, name), "utf8");

afterAll(() => place.remove());

it("rewrites what is untidy, and leaves alone what is not", () => {
  place.write("a/untidy.wright", UNTIDY).write("a/clean.wright", CLEAN);
  const before = statSync(path.join(place.folder, "a/clean.wright")).mtimeMs;
  const { code, out } = place.run(["format", "a"]);
  expect([code, out]).toEqual([0, "formatted a/untidy.wright\n"]);
  expect(read("a/untidy.wright")).toBe(CLEAN);
  expect(statSync(path.join(place.folder, "a/clean.wright")).mtimeMs).toBe(before);
  expect(readdirSync(path.join(place.folder, "a")).sort()).toEqual(["clean.wright", "untidy.wright"]);
});

it("only looks with --check", () => {
  place.write("b.wright", UNTIDY);
  expect(place.run(["format", "--check", "b.wright"])).toMatchObject({
    code: 1,
    out: "would format b.wright\n",
  });
  expect(read("b.wright")).toBe(UNTIDY);
});

it("leaves a file with a syntax error as it is, and goes on with the others", () => {
  place.write("c/broken.wright", SYNTAX_ERROR).write("c/untidy.wright", UNTIDY);
  const { code, err } = place.run(["format", "c"]);
  expect(code).toBe(1);
  expect(err).toContain("c/broken.wright:");
  expect(read("c/broken.wright")).toBe(SYNTAX_ERROR);
  expect(read("c/untidy.wright")).toBe(CLEAN);
});

it("writes standard input to standard output", () => {
  expect(place.run(["format", "-"], { stdin: UNTIDY }).out).toBe(CLEAN);
});

it("writes through a link instead of replacing it", () => {
  place.write("d/real.wright", UNTIDY);
  symlinkSync("real.wright", path.join(place.folder, "d/link.wright"));
  place.run(["format", "d/link.wright"]);
  expect(read("d/real.wright")).toBe(CLEAN);
});
