import { type Browser, chromium } from "playwright-core";
import { chromiumProgram } from "../../db/bring-up/debian.mjs";

/** Debian's Chromium, headless, asking for nothing outside the machine. The caller closes it. */
export function openBrowser(): Promise<Browser> {
  return chromium.launch({
    executablePath: chromiumProgram() ?? "/usr/bin/chromium",
    args: [
      "--headless",
      "--no-sandbox",
      "--disable-gpu",
      "--disable-quic",
      "--no-first-run",
      "--disable-background-networking",
      "--disable-component-update",
      "--disable-sync",
    ],
  });
}
