import type { Browser } from "playwright-core";
import { afterAll, beforeAll, expect, test } from "vitest";
import { openBrowser } from "../support/browser.ts";
import { type RunningServer, startServer } from "../support/server.ts";
import { HOIST, open, seat } from "./reader.ts";

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

test("reload, a pasted address and Back find the same file, line and view", async () => {
  const page = await seat(browser, server.origin);
  await open(page, HOIST);
  await page.getByRole("button", { name: "co-energy f, e" }).click();
  await page.locator('li.equation[data-text^="d hull.f/dt"]').waitFor();
  await page.getByRole("button", { name: "Go to line 21" }).first().click();
  await expect.poll(() => page.url()).toMatch(/states=co-energy#line-21$/);
  const address = page.url();

  const pasted = await page.context().newPage();
  for (const visit of [() => page.reload(), () => pasted.goto(address)]) await visit();
  for (const visited of [page, pasted]) {
    await visited.locator('li.equation[data-text^="d hull.f/dt"]').waitFor();
    await expect
      .poll(() => visited.locator(".monaco-editor .line-numbers.active-line-number").textContent())
      .toBe("21");
  }

  await page.getByRole("link", { name: "parts/rope.wright" }).click();
  await page.getByRole("heading", { name: "ElasticRope" }).waitFor();
  await page.goBack();
  await page.locator('li.equation[data-text^="d hull.f/dt"]').waitFor();
  expect(page.url()).toBe(address);
  await page.context().close();
});

test("what was typed in one file is still there after turning to another, and counts in its equations", async () => {
  const page = await seat(browser, server.origin);
  await open(page, "/sets/varnsund/boat-hoist/edit/parts/rope.wright");
  await page
    .locator(".monaco-editor .native-edit-context, .monaco-editor textarea.inputarea")
    .first()
    .focus();
  await page.keyboard.press("ControlOrMeta+Home");
  for (let line = 1; line < 14; line += 1) await page.keyboard.press("ArrowDown");
  await page.keyboard.press("End");
  await page.keyboard.type("*2");
  await page.locator('li.equation[data-text*="2*"]').first().waitFor();
  await page.getByRole("link", { name: "hoist.wright", exact: true }).click();
  await page.locator('li.equation[data-text^="d hull.p/dt = 2*rope.k*rope.spring.q"]').waitFor();
  await page.getByText("1 file unsaved").waitFor();
  await page.goBack();
  await page.locator(".view-line", { hasText: "k*q*2" }).waitFor();
  await page.context().close();
});
