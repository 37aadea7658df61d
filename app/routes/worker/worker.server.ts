import { readFile } from "node:fs/promises";
import { join } from "node:path";
import { anyone } from "../../session/door.server.ts";
import { refuse } from "../../session/refusal.server.ts";
import type { Route } from "./+types/route.ts";

/** A worker obeys the policy of its own response alone: it may compile WebAssembly and do nothing else. */
const policy = "default-src 'none'; script-src 'self' 'wasm-unsafe-eval'";

/** The built scripts of workers and what they import. The server is started in the project's folder. */
const assets = join(process.cwd(), "build", "client", "assets");

export const loader = anyone(async ({ params }: Route.LoaderArgs) => {
  if (!/^[\w-][\w.-]*\.js$/.test(params.name)) refuse(404, "There is no such script.");
  const script = await readFile(join(assets, params.name)).catch(() =>
    refuse(404, "There is no such script."),
  );
  return new Response(script, {
    headers: {
      "Content-Type": "text/javascript; charset=utf-8",
      "Content-Security-Policy": policy,
      // The name holds the hash of the content.
      "Cache-Control": "public, max-age=31536000, immutable",
    },
  });
});
