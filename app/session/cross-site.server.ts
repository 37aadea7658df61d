const safeMethods = new Set(["GET", "HEAD", "OPTIONS"]);

/**
 * True for a request that would change something and that a page of another site may have made. A browser names
 * the origin of every such request; one that hides it (`null`) is not believed. Without an `Origin` the browser's
 * own `Sec-Fetch-Site` decides; programs that are no browser send neither, and no cookie of a user either.
 */
export function isForeignMutation(request: Request): boolean {
  if (safeMethods.has(request.method)) return false;
  const origin = request.headers.get("Origin");
  if (origin !== null) return !URL.canParse(origin) || new URL(origin).host !== new URL(request.url).host;
  const site = request.headers.get("Sec-Fetch-Site");
  return site !== null && site !== "same-origin" && site !== "none";
}

/** The largest body that a request may bring. */
const largestBody = 32 * 1024 * 1024;

/** Why the body of a request is not even read, as a status; null when it is. */
export function bodyRefusal(request: Request): 411 | 413 | null {
  if (safeMethods.has(request.method) || request.body === null) return null;
  const length = request.headers.get("Content-Length");
  if (length === null) return 411;
  return Number(length) <= largestBody ? null : 413;
}
