import type { Browser, BrowserContextOptions, Page } from "playwright-core";
import { demoPeople } from "../../db/seed/people.ts";

/** Someone of the demo's team in front of a browser of their own, signed in. */
export async function seat(
  browser: Browser,
  origin: string,
  role: (typeof demoPeople)[number]["role"] = "modeller",
  options: BrowserContextOptions = {},
): Promise<Page> {
  const context = await browser.newContext({
    viewport: { width: 1440, height: 900 },
    ...options,
    baseURL: origin,
  });
  const page = await context.newPage();
  await page.goto("/sign-in");
  await signIn(page, role);
  return page;
}

export async function signIn(page: Page, role: string): Promise<void> {
  const person = demoPeople.find((one) => one.role === role);
  if (person === undefined) throw new Error(`the demo has no ${role}`);
  await page.getByLabel("E-mail address").fill(person.email);
  await page.getByLabel("Password").fill(person.password);
  await page.getByRole("button", { name: "Sign in" }).click();
  await page.getByRole("button", { name: "Sign out" }).waitFor();
}

export const HOIST = "/sets/varnsund/boat-hoist/edit/hoist.wright";

/** Opens a file and waits until its text can be edited and what follows from it stands beside it. */
export async function open(page: Page, address: string): Promise<void> {
  await page.goto(address);
  await page.locator(".monaco-editor .view-line").first().waitFor();
  await page.getByRole("heading", { name: /^Findings/ }).waitFor();
}

/** Puts the cursor before `mark`, which stands once in the text, by the editor's own search. */
export async function goBefore(page: Page, mark: string): Promise<void> {
  await page
    .locator(".monaco-editor .native-edit-context, .monaco-editor textarea.inputarea")
    .first()
    .focus();
  await page.keyboard.press("ControlOrMeta+F");
  const field = page.locator(".find-widget textarea").first();
  await field.fill(mark);
  await field.press("Enter");
  await page.keyboard.press("Escape");
  await page.keyboard.press("ArrowLeft");
}

/** An equation of the right page as text: `d hull.p/dt = …`. */
export async function equation(page: Page, left: string): Promise<string> {
  const found = page.locator(`li.equation[data-text^="${left} ="]`).first();
  await found.waitFor();
  return (await found.getAttribute("data-text")) ?? "";
}

/** Waits until the equation is another one, and returns it. */
export async function changedEquation(page: Page, left: string, before: string): Promise<string> {
  await page.locator(`li.equation[data-text^="${left} ="]:not([data-text="${before}"])`).first().waitFor();
  return equation(page, left);
}

export async function save(page: Page, message: string): Promise<void> {
  await page.getByLabel("What this version changes").fill(message);
  await page.getByRole("button", { name: "Save", exact: true }).click();
}
