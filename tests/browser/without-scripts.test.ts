import type { Browser } from "playwright-core";
import { afterAll, beforeAll, expect, test } from "vitest";
import { openBrowser } from "../support/browser.ts";
import { type RunningServer, startServer } from "../support/server.ts";
import { HOIST, seat } from "./reader.ts";

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

test("without scripts one signs in, browses, reads versions, saves, and is told who was faster", async () => {
  const page = await seat(browser, server.origin, "modeller", { javaScriptEnabled: false });
  await page.getByRole("link", { name: "Boat hoist" }).click();
  await page.getByRole("link", { name: "Open hoist.wright" }).click();
  const text = page.getByLabel("Text of hoist.wright");
  const message = page.getByLabel("What this version changes");
  const before = await text.inputValue();
  const late = await page.context().newPage();
  await late.goto(HOIST);

  await text.fill(before.replace("drum radius", "effective drum radius"));
  await message.fill("Name the radius");
  await page.getByRole("button", { name: "Save" }).click();
  await page.getByText(/Saved as version/).waitFor();
  expect(await text.inputValue()).toContain("effective drum radius");

  const yours = before.replace("drum radius", "radius of the bare drum");
  await late.getByLabel("Text of hoist.wright").fill(yours);
  await late.getByLabel("What this version changes").fill("Say which drum");
  await late.getByRole("button", { name: "Save" }).click();
  await late.getByText("Maren Tolvik saved this file before you").waitFor();
  expect(await late.getByLabel("Text of hoist.wright").inputValue()).toBe(yours);
  await late.getByLabel("What this version changes").fill("Say which drum");
  await late.getByRole("button", { name: "Save" }).click();
  await late.getByText(/Saved as version/).waitFor();

  await late.getByRole("link", { name: "History of this file" }).click();
  await late.getByRole("link", { name: "Say which drum" }).click();
  const difference = late.getByRole("region", { name: "Difference in hoist.wright" });
  expect(await difference.textContent()).toContain("radius of the bare drum");
  await page.context().close();
});
