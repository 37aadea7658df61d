import { PassThrough } from "node:stream";
import { createReadableStreamFromReadable } from "@react-router/node";
import { isbot } from "isbot";
import { renderToPipeableStream } from "react-dom/server";
import { type EntryContext, type RouterContextProvider, ServerRouter } from "react-router";
import { log } from "./session/log.server.ts";
import { nonceContext, requestIdContext } from "./session/nonce.server.ts";

export const streamTimeout = 5_000;

/** Streams a page, its scripts marked with the nonce that its policy names. */
export default function handleRequest(
  request: Request,
  status: number,
  headers: Headers,
  routerContext: EntryContext,
  context: RouterContextProvider,
): Promise<Response> {
  const nonce = context.get(nonceContext);
  const requestId = context.get(requestIdContext);
  const url = new URL(request.url);
  const ready = isbot(request.headers.get("user-agent") ?? "") ? "onAllReady" : "onShellReady";

  return new Promise((resolve, reject) => {
    let finalStatus = status;
    const { pipe, abort } = renderToPipeableStream(
      <ServerRouter context={routerContext} url={url} nonce={nonce} />,
      {
        nonce,
        [ready]() {
          headers.set("Content-Type", "text/html; charset=utf-8");
          if (request.method === "HEAD") {
            abort();
            resolve(new Response(null, { status: finalStatus, headers }));
            return;
          }
          const body = new PassThrough({
            final(done) {
              clearTimeout(tooLong);
              done();
            },
          });
          resolve(new Response(createReadableStreamFromReadable(body), { status: finalStatus, headers }));
          pipe(body);
        },
        onShellError: reject,
        onError(error) {
          if (request.method === "HEAD") return;
          finalStatus = 500;
          log.error({ requestId, path: url.pathname, err: error }, "rendering failed");
        },
      },
    );
    const tooLong = setTimeout(abort, streamTimeout + 1_000);
  });
}
