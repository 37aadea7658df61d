import type { Browser, Page } from "playwright-core";
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

const line = (page: Page, text: string | RegExp) => page.locator(".view-line", { hasText: text });

test("a finding is mended by its fix, and is gone", async () => {
  const page = await seat(browser, server.origin);
  await open(page, HOIST);
  await goBefore(page, "boat -> hull");
  await page.keyboard.press("Shift+End");
  await page.keyboard.type("boat\nhull -> boat");
  const finding = page.locator(".findings li", { hasText: "reversed-passive" });
  await finding.waitFor();
  await finding.getByRole("button", { name: /^Mend:/ }).click();
  await expect.poll(() => finding.count()).toBe(0);
  await line(page, /boat\s->\shull/).waitFor();
  await page.getByText("Nothing to find fault with.").waitFor();
  await page.context().close();
});

test("F2 renames a value wherever it is meant, and says why it will not rename what other files use", async () => {
  const page = await seat(browser, server.origin);
  await open(page, HOIST);
  await goBefore(page, "m_b*g0");
  await page.keyboard.press("F2");
  await page.locator(".rename-box input").fill("m_boat");
  await page.keyboard.press("Enter");
  await line(page, /param\sm_boat/).waitFor();
  await line(page, /weight\s+e\s=\sm_boat\*g0/).waitFor();
  await line(page, /hull\s+f\s=\sp\/m_boat/).waitFor();
  await page.locator('li.equation[data-text*="g0*m_boat"]').first().waitFor();

  await open(page, "/sets/varnsund/boat-hoist/edit/parts/rope.wright");
  await goBefore(page, "k*q");
  await page.keyboard.press("F2");
  await page.locator(".message", { hasText: "k is used in hoist.wright too" }).waitFor();
  expect(await page.locator(".rename-box input:visible").count()).toBe(0);

  await goBefore(page, "-- upper end");
  await page.keyboard.press("F2");
  await page.locator(".message", { hasText: "Only nodes and values" }).waitFor();
  await page.context().close();
});
