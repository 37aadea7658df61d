import type { Browser } from "playwright-core";
import { afterAll, beforeAll, expect, test } from "vitest";
import { openBrowser } from "../support/browser.ts";
import { type RunningServer, startServer } from "../support/server.ts";
import { goBefore, HOIST, open, save, seat } from "./reader.ts";

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

test("unsaved text survives a closed tab, is said to be unsaved, and can be discarded", async () => {
  const page = await seat(browser, server.origin);
  await open(page, HOIST);
  await goBefore(page, "boat with crew");
  await page.keyboard.type("laden ");
  await page.locator(".file-list", { hasText: "unsaved" }).waitFor();
  await page.close();

  const again = await page.context().newPage();
  await open(again, HOIST);
  await again.locator(".view-line", { hasText: "laden boat with crew" }).waitFor();
  await again.getByText(/was kept in this browser/).waitFor();
  await again.getByText("1 file unsaved").waitFor();

  await again.getByRole("button", { name: "Discard it" }).click();
  await again.getByText("All saved.").waitFor();
  expect(await again.locator(".view-line", { hasText: "laden" }).count()).toBe(0);
  await again.reload();
  await again.getByText("All saved.").waitFor();
  await page.context().close();
});

test("a draft outlives the session, and is gone once it is saved", async () => {
  const page = await seat(browser, server.origin);
  await open(page, HOIST);
  await goBefore(page, "drum radius");
  await page.keyboard.type("effective ");
  await page.getByText("1 file unsaved").waitFor();
  await page.context().clearCookies();
  await save(page, "Name the radius");
  await page.getByRole("heading", { name: "You are signed out" }).waitFor();
  await page.getByText(/Unsaved text of this set is kept/).waitFor();

  await page.getByRole("link", { name: "Sign in again" }).click();
  await page.getByLabel("E-mail address").fill("maren@varnsund.example");
  await page.getByLabel("Password").fill("drum brake holds the boat");
  await page.getByRole("button", { name: "Sign in" }).click();
  await page.locator(".view-line", { hasText: "effective drum radius" }).waitFor();
  await save(page, "Name the radius");
  await page.getByText(/Saved as version/).waitFor();
  await page.reload();
  await page.getByText("All saved.").waitFor();
  await page.locator(".view-line", { hasText: "effective drum radius" }).waitFor();
  await page.context().close();
});

test("two tabs on one file keep a draft each, tell of each other, and neither is lost", async () => {
  const first = await seat(browser, server.origin);
  await open(first, HOIST);
  const second = await first.context().newPage();
  await open(second, HOIST);
  await goBefore(first, "boat with crew");
  await first.keyboard.type("full ");
  await first.getByText("1 file unsaved").waitFor();
  await goBefore(second, "boat with crew");
  await second.keyboard.type("empty ");
  await second.getByText("1 file unsaved").waitFor();
  await first.getByText(/Another tab/).waitFor();
  await first.close();
  await second.close();

  const later = await second.context().newPage();
  await open(later, HOIST);
  await later.locator(".view-line", { hasText: "empty boat with crew" }).waitFor();
  await later.getByText(/A different unsaved text/).waitFor();
  await later.getByRole("button", { name: "Show it instead" }).click();
  await later.locator(".view-line", { hasText: "full boat with crew" }).waitFor();
  await later.getByRole("button", { name: "Throw it away" }).click();
  await later.getByRole("button", { name: "Discard it" }).click();
  await later.getByText("All saved.").waitFor();
  await later.reload();
  await later.getByText("All saved.").waitFor();
  expect(await later.getByText(/unsaved text/i).count()).toBe(0);
  await later.context().close();
});
