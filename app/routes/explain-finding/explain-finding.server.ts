import { readFindingPage } from "../../reference/read-reference.server.ts";
import { signedIn } from "../../session/door.server.ts";
import type { Route } from "./+types/route.ts";

export const loader = signedIn(async (_actor, { params }: Route.LoaderArgs) => readFindingPage(params.name));
