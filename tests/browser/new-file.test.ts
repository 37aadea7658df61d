import type { Browser } from "playwright-core";
import { afterAll, beforeAll, expect, test } from "vitest";
import { openBrowser } from "../support/browser.ts";
import { type RunningServer, startServer } from "../support/server.ts";
import { HOIST, open, save, seat } from "./reader.ts";

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

test("a new file is begun, written and saved, and a name that cannot be is refused with the reason", async () => {
  const page = await seat(browser, server.origin);
  await open(page, HOIST);
  await page.getByRole("button", { name: "New file" }).click();
  const path = page.getByLabel("Path of the new file");
  await path.fill("hoist.wright");
  await path.press("Enter");
  await page.getByText("The set has a file of this name").waitFor();
  await path.fill("parts/brake.wright");
  await path.press("Enter");

  await expect.poll(() => page.url()).toMatch(/edit\/parts\/brake\.wright$/);
  await page.getByText("This file declares no system").waitFor();
  await page
    .locator(".monaco-editor .native-edit-context, .monaco-editor textarea.inputarea")
    .first()
    .focus();
  await page.keyboard.press("ControlOrMeta+End");
  await page.keyboard.type("## Holds the drum.\nsystem Brake {\n");
  await page.getByRole("heading", { name: "Brake" }).waitFor();
  await save(page, "Begin the brake");
  await page.getByText(/Saved as version/).waitFor();
  await page.goto("/sets/varnsund/boat-hoist");
  await page.getByRole("link", { name: "parts/brake.wright", exact: true }).waitFor();
  await page.context().close();
});

test("a reader sees what follows, and has nothing to save with", async () => {
  const page = await seat(browser, server.origin, "reader");
  await open(page, HOIST);
  await page.locator("li.equation").first().waitFor();
  expect(await page.getByRole("button", { name: "Save", exact: true }).count()).toBe(0);
  expect(await page.getByRole("button", { name: "New file" }).count()).toBe(0);
  await page
    .locator(".monaco-editor .native-edit-context, .monaco-editor textarea.inputarea")
    .first()
    .focus();
  await page.keyboard.type("x");
  expect(await page.locator(".unsaved").count()).toBe(0);
  await page.goto("/sets/varnsund/boat-hoist/edit/parts/none.wright");
  await page.getByRole("heading", { name: "Not found" }).waitFor();
  await page.context().close();
});
