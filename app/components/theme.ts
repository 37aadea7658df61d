export type Theme = "light" | "dark" | "system";

/** The setting chosen by the reader, from the `theme` cookie: the server draws the page in it from the first byte. */
export function themeOf(request: Request): Theme {
  const found = /(?:^|;\s*)theme=(light|dark)(?:;|$)/.exec(request.headers.get("cookie") ?? "");
  return found === null ? "system" : (found[1] as Theme);
}

/** Sets the page in the chosen setting now, and in the cookie for the next visits. */
export function chooseTheme(theme: Theme): void {
  if (theme === "system") delete document.documentElement.dataset.theme;
  else document.documentElement.dataset.theme = theme;
  const age = theme === "system" ? 0 : 31_536_000;
  // biome-ignore lint/suspicious/noDocumentCookie: the Cookie Store API needs https, a loopback start has none
  document.cookie = `theme=${theme}; path=/; max-age=${age}; samesite=lax`;
}
