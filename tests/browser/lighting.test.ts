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

test("a line, its node and its terms light up together, from either side and by keyboard", async () => {
  const page = await seat(browser, server.origin);
  await open(page, HOIST);
  const weightTerm = page.locator('.term[data-term="-g0*m_b"]').first();
  const springTerm = page
    .locator('li.equation[data-text^="d hull.p/dt"] .term', { hasText: "rope.spring" })
    .first();
  const node = page.locator('[data-part="node"][data-id="weight"]');
  const lit = (element: typeof node) => element.getAttribute("data-lit");
  await node.waitFor();

  // From the text, with the cursor.
  await goBefore(page, "m_b*g0");
  await expect.poll(() => lit(weightTerm)).toBe("true");
  await expect.poll(() => lit(node)).toBe("true");
  expect(await lit(springTerm)).toBe("false");

  // From a term, by keyboard: the line that the term comes from is marked, and threads cross the fold.
  await springTerm.focus();
  await expect.poll(() => lit(springTerm)).toBe("true");
  await expect.poll(() => page.locator(".lit-line").count()).toBeGreaterThan(0);
  await expect.poll(() => page.locator(".fold .thread").count()).toBeGreaterThan(0);
  expect(await springTerm.getAttribute("aria-label")).toMatch(/from lines? [\d, ]*19/);

  // From the diagram, by keyboard.
  await node.focus();
  await expect.poll(() => lit(weightTerm)).toBe("true");

  // Back to the text: Enter on a term goes to its line.
  await weightTerm.press("Enter");
  await expect.poll(() => page.url()).toMatch(/#line-\d+$/);
  expect(await page.locator(".monaco-editor.focused").count()).toBe(1);
  await page.context().close();
});
