import { createCookie } from "react-router";
import { isPlainLoopback } from "./plain-loopback.ts";
import { sessionDays } from "./token.server.ts";

const attributes = { path: "/", httpOnly: true, sameSite: "lax", maxAge: sessionDays * 86_400 } as const;
const secure = createCookie("__Host-bondwright", { ...attributes, secure: true });
const onLoopback = createCookie("bondwright", attributes);

function cookieFor(url: URL) {
  return isPlainLoopback(url) ? onLoopback : secure;
}

/** The session token that a request carries, or null. */
export async function readToken(request: Request): Promise<string | null> {
  const token: unknown = await cookieFor(new URL(request.url)).parse(request.headers.get("Cookie"));
  return typeof token === "string" && token !== "" ? token : null;
}

/** The header that gives the browser its token. */
export function keepToken(request: Request, token: string): Promise<string> {
  return cookieFor(new URL(request.url)).serialize(token);
}

/** The header that takes it away. */
export function dropToken(request: Request): Promise<string> {
  return cookieFor(new URL(request.url)).serialize("", { maxAge: 0 });
}
