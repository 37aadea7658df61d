import { listHistory } from "../../operations/list-history.server.ts";
import { signedIn } from "../../session/door.server.ts";
import type { Route } from "./+types/route.ts";

const commitsOnAPage = 50;

/** `?file=` for the history of one file, `?before=` for the commits older than one. */
export const loader = signedIn(async (actor, { params, url }: Route.LoaderArgs) => {
  const path = url.searchParams.get("file") ?? undefined;
  const before = url.searchParams.get("before") ?? undefined;
  const page = await listHistory(actor, { ...params, path, before, limit: commitsOnAPage });
  return { ...page, file: path ?? null };
});
