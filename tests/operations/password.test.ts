import { expect, test } from "vitest";
import { hashPassword, passwordMatches, passwordProblem } from "../../app/session/password.server.ts";

test.each([
  ["x9! y8? z7& w6", "at least 15"],
  ["🚤🚤🚤🚤abcdefghij", "at least 15"],
  ["a".repeat(15), "repeats"],
  ["a1 b2 ".repeat(43), "at most 256"],
  ["Correct Horse Battery Staple", "tried first"],
  ["123456789012345", "tried first"],
])("%j is refused as a new password", (password, why) => expect(passwordProblem(password)).toContain(why));

test.each(["x9! y8? z7& w6 ", "fünf Möwen warten", "🚤⚓🌊🪝🧵🚤⚓🌊🪝🧵🚤⚓🌊🪝🧵", "a1 b2 ".repeat(42)])(
  "%j is accepted",
  (password) => expect(passwordProblem(password)).toBeNull(),
);

test("every character counts, also the 73rd and the last", async () => {
  const password = "three grey gulls wait ".repeat(10);
  const hash = await hashPassword(password);
  expect(hash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
  expect(await passwordMatches(hash, password)).toBe(true);
  expect(await passwordMatches(hash, `${password.slice(0, 72)}X${password.slice(73)}`)).toBe(false);
  expect(await passwordMatches(hash, password.slice(0, -1))).toBe(false);
  expect(await passwordMatches(hash, `${password}${" ".repeat(200)}`)).toBe(false);
  expect(await passwordMatches(null, password)).toBe(false);
});
