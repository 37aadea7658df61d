import { AxeBuilder } from "@axe-core/playwright";
import type { Browser, Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
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

async function violations(page: Page): Promise<string[]> {
  const { violations } = await new AxeBuilder({ page })
    .options({ rules: { "target-size": { enabled: true } } })
    .analyze();
  return violations.flatMap(({ id, nodes }) =>
    nodes.map(({ target, failureSummary }) => `${id}: ${target} ${failureSummary}`),
  );
}

const SET = "/sets/varnsund/boat-hoist";

describe.each(["light", "dark"] as const)("in the %s setting", (colorScheme) => {
  let page: Page;
  beforeAll(async () => {
    page = await seat(browser, server.origin, "modeller", { colorScheme });
  });
  afterAll(() => page?.context().close());

  test.each([
    "/",
    SET,
    `${SET}/history`,
    `${SET}/history?file=hoist.wright`,
    "/nothing-here",
    "/reference",
    "/reference/findings/stiff",
  ])("%s", async (address) => {
    await page.goto(address);
    expect(await violations(page)).toEqual([]);
  });

  test("a version and a file of it", async () => {
    await page.goto(`${SET}/history`);
    await page.locator("ol li a").first().click();
    await page
      .getByRole("region", { name: /^Difference/ })
      .first()
      .waitFor();
    expect(await violations(page)).toEqual([]);
    await page.getByRole("link", { name: "Text of this version" }).first().click();
    await page.getByRole("region", { name: /^Text of/ }).waitFor();
    expect(await violations(page)).toEqual([]);
  });

  test("the facing pages, whole, with something lit, and with errors", async () => {
    await open(page, HOIST);
    await page.locator("li.equation").first().waitFor();
    expect(await violations(page)).toEqual([]);
    await page.locator(".term").first().focus();
    await page.getByText("How it comes about").first().click();
    await page.locator(".step").first().waitFor();
    await page.locator('[data-part="bond"]').first().focus();
    await page.keyboard.press("Enter");
    await page.getByText("Why the stroke stands").waitFor();
    expect(await violations(page)).toEqual([]);
    await goBefore(page, "weight   e");
    await page.keyboard.type("?");
    await page.getByText("from the last text without errors").waitFor();
    expect(await violations(page)).toEqual([]);
  });

  test("two versions of a file that two people changed", async () => {
    const rope = `${SET}/edit/parts/rope.wright`;
    const other = await seat(browser, server.origin, "release_keeper");
    const mine = await seat(browser, server.origin, "modeller", { colorScheme });
    await open(mine, rope);
    await open(other, rope);
    for (const [writer, word] of [
      [other, "free "],
      [mine, "held "],
    ] as const) {
      await goBefore(writer, "upper end");
      await writer.keyboard.type(`${word}${colorScheme} `);
      await writer.getByText("1 file unsaved").waitFor();
      await save(writer, `Say which end: ${word}`);
    }
    await mine.getByRole("heading", { name: /before you$/ }).waitFor();
    expect(await violations(mine)).toEqual([]);
    await mine.context().close();
    await other.context().close();
  });

  test("sign-in, before and after a wrong password", async () => {
    const stranger = await (await browser.newContext({ colorScheme, baseURL: server.origin })).newPage();
    await stranger.goto("/sign-in");
    expect(await violations(stranger)).toEqual([]);
    await stranger.getByLabel("E-mail address").fill("nobody@varnsund.example");
    await stranger.getByLabel("Password").fill("wrong password here");
    await stranger.getByRole("button", { name: "Sign in" }).click();
    await stranger.getByRole("alert").waitFor();
    expect(await violations(stranger)).toEqual([]);
    await stranger.context().close();
  });
});

test("at 320 pixels no page scrolls sideways, and both pages of the book can be turned to", async () => {
  const page = await seat(browser, server.origin, "modeller", { viewport: { width: 320, height: 640 } });
  const sideways = () => page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
  for (const address of ["/", SET, `${SET}/history`, "/reference", "/reference/findings/stroke-refused"]) {
    await page.goto(address);
    expect(await sideways(), address).toBeLessThanOrEqual(0);
  }
  await page.goto(HOIST);
  await page.locator(".monaco-editor .view-line").first().waitFor();
  expect(await sideways()).toBeLessThanOrEqual(0);
  await page.getByRole("button", { name: "What follows" }).click();
  await page.locator("li.equation").first().waitFor();
  expect(
    await page.locator(".right-page").evaluate((element) => element.scrollWidth - element.clientWidth),
  ).toBeLessThanOrEqual(0);
  await page.context().close();
});
