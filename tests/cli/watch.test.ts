import { type ChildProcess, spawn } from "node:child_process";
import { once } from "node:events";
import { mkdirSync, readdirSync, renameSync, rmSync } from "node:fs";
import path from "node:path";
import { afterEach, beforeEach, expect, it } from "vitest";
import { Rechecker } from "../../cli/rechecker.ts";
import { BUILT, CLEAN, CONFLICT, Workplace } from "./run.ts";

const USES = `notation 1\nuse "parts/cart.wright"\n`;

let place: Workplace;
let child: ChildProcess | null = null;

beforeEach(() => {
  place = new Workplace().write("set/bondwright.json", "{}").write("set/parts/cart.wright", CLEAN);
  place.write("set/uses.wright", USES).write("set/alone.wright", CONFLICT);
});

afterEach(() => {
  child?.kill("SIGKILL");
  place.remove();
});

/** Starts watching the set; `next()` waits for what the next round says, and the report that came before it. */
async function started() {
  const command = [process.execPath, BUILT, "check", "set", "--watch", "--format", "annotations"];
  // Both streams as one, so that their order is that of the writing.
  const watching = spawn("sh", ["-c", 'exec "$@" 2>&1', "sh", ...command], { cwd: place.folder });
  child = watching;
  let text = "";
  watching.stdout.on("data", (data) => {
    text += data;
  });
  while (!text.includes("[causal-conflict]\n")) await once(watching.stdout, "data");
  text = "";
  const next = async () => {
    for (;;) {
      const round = /^(?:checked|bondwright:) .*\n/m.exec(text);
      if (round !== null) {
        const report = text.slice(0, round.index);
        text = text.slice(round.index + round[0].length);
        return { said: round[0].trim(), report };
      }
      await once(watching.stdout, "data");
    }
  };
  return { watching, next };
}

/** As editors save: beside it, then renamed, so that nobody sees half of it. */
function save(name: string, text: string): void {
  place.write("half-written", text);
  renameSync(path.join(place.folder, "half-written"), path.join(place.folder, name));
}

it("checks again what a saved file reaches, and nothing else; a new file and a mended one too", async () => {
  const { watching, next } = await started();

  save("set/parts/cart.wright", CLEAN.replace("damper = b", "damper = b_"));
  const broken = await next();
  expect(broken.said).toBe("checked 2 of 3 again");
  expect(broken.report).toContain("set/parts/cart.wright:13:15: error: ");

  save("set/parts/cart.wright", CLEAN);
  expect((await next()).report).not.toContain("set/parts/cart.wright");

  mkdirSync(path.join(place.folder, "set/more"));
  await next();
  save("set/more/second.wright", CONFLICT);
  expect((await next()).report).toContain("set/more/second.wright:10:3");

  save("set/bondwright.json", "{ ");
  expect((await next()).said).toContain("bondwright: set/bondwright.json: This is not JSON");
  save("set/bondwright.json", "{}");
  await next();

  rmSync(path.join(place.folder, "set/more"), { recursive: true });
  rmSync(path.join(place.folder, "set/alone.wright"));
  const ended = once(watching, "exit");
  while ((await next()).report.includes("conflict"));
  watching.kill("SIGINT");
  expect((await ended)[0]).toBe(0);
}, 60_000);

it("keeps no more after 200 saves than before", async () => {
  const { watching, next } = await started();
  const open = () => readdirSync(`/proc/${watching.pid}/fd`).length;
  const before = open();
  for (let count = 0; count < 200; count++) {
    save("set/parts/cart.wright", `${CLEAN}# save ${count}\n`);
    expect((await next()).said).toBe("checked 2 of 3 again");
  }
  expect(open()).toBe(before);
}, 120_000);

it("keeps one text a file", () => {
  const folder = path.join(place.folder, "set");
  const rechecker = new Rechecker([folder], {});
  const file = path.join(folder, "parts/cart.wright");
  for (let count = 0; count < 200; count++) {
    save("set/parts/cart.wright", `${CLEAN}# save ${count}\n`);
    expect(rechecker.recheck([file])).toBe(2);
  }
  expect(rechecker.kept).toBe(3);
  expect(rechecker.recheck([path.join(folder, "notes.txt")])).toBe(0);
});
