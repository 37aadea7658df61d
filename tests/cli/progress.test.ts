import { expect, it } from "vitest";
import { Progress } from "../../cli/output/progress.ts";

/** A terminal that keeps what it is told, and a clock that stands where it is put. */
function watched(isTTY: boolean) {
  const said: string[] = [];
  const clock = { now: 0 };
  const write = (text: string | Uint8Array) => said.push(String(text)) > 0;
  const progress = new Progress({ isTTY, columns: 40, write }, () => clock.now);
  return { said, clock, progress };
}

it("says nothing in the first second, then rewrites one line ten times a second, and takes it away", () => {
  const { said, clock, progress } = watched(true);
  for (let file = 0; file < 400; file++) {
    clock.now = file * 5;
    progress.say(file, 400, `models/${"deep/".repeat(20)}${file}\u001b[2J.wright`);
  }
  progress.end();
  expect(said).toHaveLength(11);
  const clear = "\r\u001b[2K";
  expect(said[0]).toBe(`${clear}checking 201 of 400: models/deep/deep/d`);
  for (const line of said) {
    expect(line.startsWith(clear)).toBe(true);
    expect(line.slice(clear.length)).not.toContain("\u001b");
    expect(line.length - clear.length).toBeLessThan(40);
  }
  expect(said.at(-1)).toBe(clear);
});

it("says nothing where nobody looks, and takes nothing away that it has not said", () => {
  const { said, clock, progress } = watched(false);
  clock.now = 5000;
  progress.say(1, 2, "a.wright");
  progress.end();
  const quick = watched(true);
  quick.progress.end();
  expect([...said, ...quick.said]).toEqual([]);
});
