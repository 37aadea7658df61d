import { anyone } from "../../session/door.server.ts";
import { refuse } from "../../session/refusal.server.ts";
import type { Route } from "./+types/route.ts";

const nothingHere = async (): Promise<null> => refuse(404, "There is nothing at this address.");

export const loader = anyone((_: Route.LoaderArgs) => nothingHere());
export const action = anyone((_: Route.ActionArgs) => nothingHere());
