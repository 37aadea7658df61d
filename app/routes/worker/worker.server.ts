import { readFile } from "node:fs/promises";
import { join, resolve } from "node:path";
import { anyone } from "../../session/door.server.ts";
import { refuse } from "../../session/refusal.server.ts";
import type { Route } from "./+types/route.ts";

/** A worker obeys the policy of its own response alone: it may compile WebAssembly and do nothing else. */
const policy = "default-src 'none'; script-src 'self' 'wasm-unsafe-eval'";

/** The built scripts of workers, and what they import. */
export const loader = anyone(async ({ params: { name } }: Route.LoaderArgs) => {
  const script = /^[\w-][\w.-]*\.js$/.test(name) ? await readAsset(name) : null;
  if (script === null) refuse(404, "There is no such script.");
  return new Response(script, {
    headers: {
      "Content-Type": "text/javascript; charset=utf-8",
      "Content-Security-Policy": policy,
      // The name holds the hash of the content.
      "Cache-Control": "public, max-age=31536000, immutable",
    },
  });
});

async function readAsset(name: string): Promise<Uint8Array<ArrayBuffer> | null> {
  // The build knows where it put them, from the project's folder, where the server is started.
  const { assetsBuildDirectory } = await import("virtual:react-router/server-build");
  return readFile(join(resolve(assetsBuildDirectory), "assets", name)).catch(() => null);
}
