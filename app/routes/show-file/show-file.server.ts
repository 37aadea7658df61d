import { readFile } from "../../operations/read-file.server.ts";
import { signedIn } from "../../session/door.server.ts";
import type { Route } from "./+types/route.ts";

export const loader = signedIn((actor, { params }: Route.LoaderArgs) =>
  readFile(actor, { ...params, path: params["*"] }),
);
