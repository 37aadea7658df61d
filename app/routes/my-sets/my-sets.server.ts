import { listSets } from "../../operations/list-sets.server.ts";
import { signedIn } from "../../session/door.server.ts";
import type { Route } from "./+types/route.ts";

export const loader = signedIn(async (actor, _: Route.LoaderArgs) => ({ teams: await listSets(actor) }));
