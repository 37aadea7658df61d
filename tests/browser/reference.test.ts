import type { Browser } from "playwright-core";
import { afterAll, beforeAll, expect, test } from "vitest";
import { openBrowser } from "../support/browser.ts";
import { type RunningServer, startServer } from "../support/server.ts";
import { goBefore, HOIST, open, seat } from "./reader.ts";

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

test("from the head of every page to the reference, and by an anchor to a finding's page", async () => {
  const page = await seat(browser, server.origin, "reader");
  await page.getByRole("link", { name: "Reference" }).click();
  await page.getByRole("heading", { name: "The notation, edition 1" }).waitFor();
  await page.getByRole("navigation", { name: "Chapters" }).getByRole("link", { name: "Findings" }).click();
  await expect.poll(() => new URL(page.url()).hash).toBe("#findings");
  await page.getByRole("link", { name: "algebraic-loop" }).click();
  await page.getByRole("heading", { name: "algebraic-loop" }).waitFor();
  const examples = page.locator("figure.example");
  expect(await examples.locator("figcaption").allTextContents()).toEqual(["Fails", "Mended"]);
  expect(await examples.first().locator("pre").textContent()).toContain("supply -> loop -> R_1, R_2");
  await page.goto("/reference/findings/no-such-finding");
  await page.getByText("There is no finding of this name").waitFor();
  await page.context().close();
});

test("a finding leads to its page from the right page and from the text", async () => {
  const page = await seat(browser, server.origin, "modeller");
  await open(page, HOIST);
  await goBefore(page, "m_b*g0");
  await page.keyboard.type("3 + ");
  const link = page.locator(".findings").getByRole("link", { name: "unit-mismatch" }).first();
  const [beside] = await Promise.all([page.waitForEvent("popup"), link.click()]);
  await beside.getByRole("heading", { name: "unit-mismatch" }).waitFor();

  await page.locator(".monaco-editor .squiggly-error").first().hover({ force: true });
  const hover = page.locator(".monaco-hover").filter({ hasText: "More about unit-mismatch" });
  await hover.waitFor();
  expect(await hover.textContent()).toContain("Two quantities that must be of one unit are not");
  const more = hover.getByText("More about unit-mismatch");
  const [again] = await Promise.all([page.waitForEvent("popup"), more.click()]);
  await again.getByRole("heading", { name: "unit-mismatch" }).waitFor();
  await page.context().close();
});
