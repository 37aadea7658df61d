import type { Browser, Page } from "playwright-core";
import { afterAll, beforeAll, expect, test } from "vitest";
import { openBrowser } from "../support/browser.ts";
import { type RunningServer, startServer } from "../support/server.ts";
import { changedEquation, equation } from "./reader.ts";

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

/** Presses Tab until what has the focus is called `name`. */
async function tabTo(page: Page, name: RegExp): Promise<void> {
  for (let press = 0; press < 60; press += 1) {
    await page.keyboard.press("Tab");
    const focused = await page.evaluate(() => {
      const element = document.activeElement as HTMLElement | null;
      const label = element instanceof HTMLInputElement ? element.labels?.[0]?.textContent : null;
      return label ?? element?.getAttribute("aria-label") ?? element?.textContent ?? "";
    });
    if (name.test(focused.trim())) return;
  }
  throw new Error(`Tab never reached ${name}`);
}

test("the main job without a pointer: sign in, open, change, leave the editor, save, find both versions", async () => {
  const page = await browser.newPage({ baseURL: server.origin, viewport: { width: 1440, height: 900 } });
  await page.goto("/");
  await tabTo(page, /^E-mail address/);
  await page.keyboard.type("maren@varnsund.example");
  await tabTo(page, /^Password/);
  await page.keyboard.type("drum brake holds the boat");
  await page.keyboard.press("Enter");
  await page.getByRole("heading", { name: "Model sets" }).waitFor();
  await tabTo(page, /^Boat hoist$/);
  await page.keyboard.press("Enter");
  await page.getByRole("heading", { name: "Boat hoist" }).waitFor();
  await tabTo(page, /^Open hoist\.wright$/);
  await page.keyboard.press("Enter");

  const before = await equation(page, "d hull.p/dt");
  await tabTo(page, /^Text of the file|Press Escape, then Tab/);
  await page.keyboard.press("ControlOrMeta+Home");
  for (let line = 1; line < 22; line += 1) await page.keyboard.press("ArrowDown");
  await page.keyboard.press("End");
  for (const _ of "m_b*g0") await page.keyboard.press("ArrowLeft");
  await page.keyboard.type("-");
  await changedEquation(page, "d hull.p/dt", before);

  // A tab within the text indents; Escape, then Tab, leaves it for the message.
  await page.keyboard.press("Escape");
  await page.keyboard.press("Tab");
  await expect.poll(() => page.evaluate(() => document.activeElement?.id)).toBe("save-message");
  await page.keyboard.type("Turn the weight round");
  await page.keyboard.press("Enter");
  await page.getByText(/Saved as version/).waitFor();
  await tabTo(page, /^History of this file$/);
  await page.keyboard.press("Enter");
  await page.getByRole("heading", { name: /History of/ }).waitFor();
  await tabTo(page, /^Turn the weight round$/);
  await page.keyboard.press("Enter");
  await page.getByRole("region", { name: "Difference in hoist.wright" }).waitFor();
  await page.close();
});
