import { readCommit } from "../../operations/read-commit.server.ts";
import { signedIn } from "../../session/door.server.ts";
import type { Route } from "./+types/route.ts";

export const loader = signedIn((actor, { params }: Route.LoaderArgs) => readCommit(actor, params));
