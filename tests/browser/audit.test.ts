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

test("an equation is followed back step by step, and each step lights its bond and its line", async () => {
  const page = await seat(browser, server.origin);
  await open(page, HOIST);
  const equation = page.locator('li.equation[data-text^="d hull.p/dt"]').first();
  const steps = equation.locator(".step");
  expect(await steps.count()).toBe(0);
  await equation.getByText("How it comes about").press("Enter");
  await steps.first().waitFor();
  const texts = await steps.evaluateAll((all) => all.map((one) => (one as HTMLElement).dataset.text));
  expect(texts[0]).toBe("hull.p' = boat->hull.e");
  expect(texts[1]).toBe("boat->hull.e = rope.line->boat.e - boat->weight.e");
  expect(texts.at(-1)).toMatch(/^hull\.p' = .*g0\*m_b/);

  const weight = steps.filter({ hasText: "law" }).first();
  await weight.getByRole("button").focus();
  const bond = page.locator('[data-part="bond"][data-id="boat->weight"]');
  await expect.poll(() => bond.getAttribute("data-lit")).toBe("true");
  await expect.poll(() => page.locator(".lit-line").count()).toBeGreaterThan(0);

  // While errors leave no equations of this text, there is nothing to follow.
  await goBefore(page, "weight   e");
  await page.keyboard.type("?");
  await page.getByText("from the last text without errors").waitFor();
  await expect.poll(() => page.getByText("How it comes about").count()).toBe(0);
  expect(await page.locator(".fold .tick").count()).toBeGreaterThan(4);
  await page.context().close();
});

test("a bond is audited by keyboard: power, domain, effort and flow, and why its stroke stands", async () => {
  const page = await seat(browser, server.origin);
  await open(page, HOIST);
  const bond = page.locator('[data-part="bond"][data-id="boat->hull"]');
  await bond.waitFor();
  await bond.focus();
  await page.keyboard.press("Enter");
  const audit = page.getByRole("region", { name: "Bond boat->hull" });
  await expect.poll(() => audit.textContent()).toContain("Power counts positive from boat to hull");
  expect(await audit.textContent()).toContain("Domain translation");
  expect(await audit.locator(".variable").last().getAttribute("data-text")).toBe("boat->hull.f = hull.p/m_b");
  expect(await audit.locator(".reasons li").first().textContent()).toContain("integrates");

  await page.getByRole("button", { name: "As a table" }).click();
  await page.getByRole("button", { name: "motor.shaft->gearbox" }).click();
  const other = page.getByRole("region", { name: "Bond motor.shaft->gearbox" });
  await other.waitFor();
  const reason = other.locator(".reasons li").first();
  await reason.getByRole("button").focus();
  await expect.poll(() => page.locator('.diagram-table [data-lit="true"]').count()).toBeGreaterThan(0);
  await other.getByRole("button", { name: "Close" }).click();
  await expect.poll(() => other.count()).toBe(0);
  await page.context().close();
});
