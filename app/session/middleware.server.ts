import { randomBytes, randomUUID } from "node:crypto";
import type { MiddlewareFunction } from "react-router";
import { bodyRefusal, isForeignMutation } from "./cross-site.server.ts";
import { lookUpOnDemand } from "./current-user.server.ts";
import { nonceContext, requestIdContext } from "./nonce.server.ts";
import { isPlainLoopback } from "./plain-loopback.ts";

/** Monaco, KaTeX and the plots set styles in attributes: hence `unsafe-inline` for styles, and for styles only. */
function pagePolicy(nonce: string): string {
  return [
    "default-src 'self'",
    `script-src 'self' 'nonce-${nonce}'`,
    "style-src 'self' 'unsafe-inline'",
    "worker-src 'self'",
    "font-src 'self' data:",
    "img-src 'self' data:",
    "connect-src 'self'",
    "object-src 'none'",
    "frame-ancestors 'none'",
    "base-uri 'none'",
    "form-action 'self'",
  ].join("; ");
}

/** Gives every response its name and its security headers. */
const headers: MiddlewareFunction<Response> = async ({ request, context }, next) => {
  const nonce = randomBytes(16).toString("base64");
  const requestId = randomUUID();
  context.set(nonceContext, nonce);
  context.set(requestIdContext, requestId);
  const response = await next();
  const set = (name: string, value: string) => response.headers.set(name, value);
  const setIfAbsent = (name: string, value: string) => response.headers.has(name) || set(name, value);
  set("X-Request-Id", requestId);
  set("X-Content-Type-Options", "nosniff");
  set("Referrer-Policy", "same-origin");
  set("Cross-Origin-Opener-Policy", "same-origin");
  setIfAbsent("Content-Security-Policy", pagePolicy(nonce));
  setIfAbsent("Cache-Control", "private, no-cache");
  if (!isPlainLoopback(new URL(request.url))) set("Strict-Transport-Security", "max-age=31536000");
  return response;
};

/** Refuses what another site's page sent, and bodies too large to be ours, for every route alike. */
const gate: MiddlewareFunction<Response> = async ({ request }, next) => {
  if (isForeignMutation(request)) return plain(403, "This request came from another site and was refused.");
  const refusal = bodyRefusal(request);
  if (refusal !== null) return plain(refusal, "This request says no length, or is too large.");
  return next();
};

function plain(status: number, sentence: string): Response {
  return new Response(`${sentence}\n`, { status, headers: { "Content-Type": "text/plain; charset=utf-8" } });
}

const session: MiddlewareFunction<Response> = ({ request, context }, next) => {
  lookUpOnDemand(request, context);
  return next();
};

/** The root route's middleware: every request passes it, outermost first. */
export const middleware = [headers, gate, session];
