import { redirect } from "react-router";
import { signOut } from "../../operations/sign-out.server.ts";
import { dropToken, readToken } from "../../session/cookie.server.ts";
import { anyone } from "../../session/door.server.ts";
import type { Route } from "./+types/route.ts";

export const loader = anyone(async (_: Route.LoaderArgs) => redirect("/"));

export const action = anyone(async ({ request }: Route.ActionArgs) => {
  const token = await readToken(request);
  if (token !== null) await signOut(token);
  return redirect("/sign-in", { headers: { "Set-Cookie": await dropToken(request) } });
});
