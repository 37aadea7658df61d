import type { Browser } from "playwright-core";
import { afterAll, beforeAll, expect, test } from "vitest";
import { openBrowser } from "../support/browser.ts";
import { type RunningServer, startServer } from "../support/server.ts";
import { goBefore, open, save, seat } from "./reader.ts";

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

const FILE = "/sets/varnsund/boat-hoist/edit/parts/rope.wright";
const NEWEST = "/sets/varnsund/boat-hoist/history?file=parts/rope.wright";

test("the second of two who save one file is shown both texts, and loses nothing", async () => {
  const first = await seat(browser, server.origin, "modeller");
  const second = await seat(browser, server.origin, "reviewer");
  await open(first, FILE);
  await open(second, FILE);

  await goBefore(first, "stiffness");
  await first.keyboard.type("axial ");
  await save(first, "Say which stiffness");
  await first.getByText(/Saved as version/).waitFor();

  // The same line, so that the two can't be brought together without a person.
  await goBefore(second, "stiffness");
  await second.keyboard.type("measured ");
  await save(second, "Say where the stiffness is from");
  await second.getByRole("heading", { name: "Maren Tolvik saved this file before you" }).waitFor();
  const both = second.getByRole("region", { name: "Both texts side by side" });
  expect(await both.textContent()).toContain("axial stiffness");
  expect(await both.textContent()).toContain("measured stiffness");

  await second.getByLabel("your text, on top of theirs").check();
  await second.getByRole("button", { name: "Go on editing" }).click();
  await second.locator(".view-line", { hasText: "measured" }).waitFor();
  await save(second, "Say where the stiffness is from");
  await second.getByText(/Saved as version/).waitFor();

  await second.goto(NEWEST);
  const history = await second.locator("ol").textContent();
  expect(history).toContain("Say which stiffness");
  expect(history).toContain("Say where the stiffness is from");
  await first.context().close();
  await second.context().close();
});

test("changes to different lines are brought together on offer, and stand in the editor before they are saved", async () => {
  const first = await seat(browser, server.origin, "modeller");
  const second = await seat(browser, server.origin, "reviewer");
  await open(first, FILE);
  await open(second, FILE);

  await goBefore(first, "upper end");
  await first.keyboard.type("the ");
  await save(first, "The upper end");
  await first.getByText(/Saved as version/).waitFor();

  await goBefore(second, "A rope with");
  await second.keyboard.type("Laid wire. ");
  await save(second, "Say what rope it is");
  await second.getByRole("heading", { name: /saved this file before you/ }).waitFor();
  await expect.poll(() => second.getByLabel("both: your changes put into their text").isChecked()).toBe(true);
  await second.getByRole("button", { name: "Go on editing" }).click();
  await second.locator(".view-line", { hasText: "Laid wire." }).waitFor();
  await second.locator(".view-line", { hasText: "the upper end" }).waitFor();
  await first.context().close();
  await second.context().close();
});
