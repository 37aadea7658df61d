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

test("modes, gains and a frequency response stand on the right page, and another channel can be drawn", async () => {
  const page = await seat(browser, server.origin);
  await open(page, HOIST);
  const part = page.getByRole("region", { name: /^Behaviour/ });
  const modes = part.getByRole("table", { name: "Modes" });
  await modes.waitFor();
  expect(await modes.getByRole("row").nth(1).textContent()).toMatch(/−5\.4106 ± 10\.146j1\.830\.4706/);
  const gains = part.getByRole("table", { name: "Gains at zero frequency" });
  expect(await gains.getByRole("row", { name: /boat_speed/ }).textContent()).toContain("m/s per V");
  await part.getByRole("img", { name: /from u to boat_speed/ }).waitFor();
  await part.getByRole("combobox").selectOption("u to current");
  await part.getByRole("img", { name: /from u to current/ }).waitFor();
});
