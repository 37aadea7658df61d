import { execFileSync } from "node:child_process";
import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import type { Browser } from "playwright-core";
import { afterAll, beforeAll, expect, test } from "vitest";
import { exportSet } from "../../app/operations/export-set.server.ts";
import { User } from "../../db/models/index.ts";
import { openBrowser } from "../support/browser.ts";
import { type RunningServer, startServer } from "../support/server.ts";
import { changedEquation, equation, goBefore, signIn } from "./reader.ts";

let server: RunningServer;
let browser: Browser;

beforeAll(async () => {
  server = await startServer();
  browser = await openBrowser();
});
afterAll(async () => {
  await browser?.close();
  await server?.stop();
});

test("sign in, open a model, change a sign, see the equation change, save, find both versions", async () => {
  const page = await browser.newPage({ baseURL: server.origin });
  const faults: string[] = [];
  page.on("pageerror", (fault) => faults.push(fault.message));
  page.on("console", (line) => line.type() === "error" && faults.push(line.text()));

  await page.goto("/");
  await expect.poll(() => page.url()).toContain("/sign-in");
  await signIn(page, "modeller");
  await page.getByRole("link", { name: "Boat hoist" }).click();
  await page.getByRole("link", { name: "Open hoist.wright" }).click();

  const before = await equation(page, "d hull.p/dt");
  expect(before).toContain(" - g0*m_b");
  await goBefore(page, "m_b*g0");
  await page.keyboard.type("-");
  const after = await changedEquation(page, "d hull.p/dt", before);
  expect(after).toMatch(/[=+] g0\*m_b /);
  expect(after).not.toContain("- g0*m_b");

  await page.keyboard.press("ControlOrMeta+S");
  await page.keyboard.type("Turn the weight round");
  await page.keyboard.press("Enter");
  await page.getByText(/Saved as version [0-9a-f]{7}/).waitFor();

  await page.getByRole("link", { name: "History of this file" }).click();
  const versions = page.locator("ol li");
  await expect.poll(() => versions.first().textContent()).toContain("Turn the weight round");
  expect(await versions.count()).toBeGreaterThanOrEqual(2);
  expect(await versions.first().textContent()).toContain("Maren Tolvik");

  await page.getByRole("link", { name: "Turn the weight round" }).click();
  const difference = page.getByRole("region", { name: "Difference in hoist.wright" });
  await expect.poll(() => difference.textContent()).toContain("1 line added, 1 line removed");
  expect(await difference.locator("tr", { hasText: "removed" }).last().textContent()).toMatch(
    /Se +weight +e = m_b\*g0/,
  );
  expect(await difference.locator("tr", { hasText: "added" }).last().textContent()).toMatch(
    /Se +weight +e = -m_b\*g0/,
  );

  await page.getByRole("link", { name: "Text of the version before" }).click();
  const text = page.getByRole("region", { name: "Text of hoist.wright" });
  await expect.poll(() => text.textContent()).toMatch(/Se +weight +e = m_b\*g0/);
  expect(faults).toEqual([]);
  await page.close();
  await expectSoundRepository("Turn the weight round");
});

/** What the browser saved is a git repository without a fault, seen by git itself. */
async function expectSoundRepository(newest: string): Promise<void> {
  const maren = await User.findOne({ where: { email: "maren@varnsund.example" }, rejectOnEmpty: true });
  const folder = mkdtempSync(join(tmpdir(), "bondwright-"));
  try {
    await exportSet({ userId: maren.id }, { team: "varnsund", set: "boat-hoist" }, folder);
    const git = (...args: string[]) =>
      execFileSync("git", ["-C", folder, ...args], { encoding: "utf8", stdio: "pipe" });
    expect(git("fsck", "--strict", "--full")).toBe("");
    expect(git("log", "-1", "--format=%s %an", "main")).toBe(`${newest} Maren Tolvik\n`);
    expect(git("cat-file", "blob", "main:hoist.wright")).toContain("e = -m_b*g0");
  } finally {
    rmSync(folder, { recursive: true });
  }
}
