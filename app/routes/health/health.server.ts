import { checkHealth } from "../../operations/check-health.server.ts";
import { anyone } from "../../session/door.server.ts";
import type { Route } from "./+types/route.ts";

/** For those who watch the server: 200 when it can do its work, 503 when the database is away. */
export const loader = anyone(async (_: Route.LoaderArgs) => {
  await checkHealth();
  return new Response("ok\n", { headers: { "Content-Type": "text/plain", "Cache-Control": "no-store" } });
});
