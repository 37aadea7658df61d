import { data, redirect } from "react-router";
import { signOut } from "../../operations/sign-out.server.ts";
import { keepToken, readToken } from "../../session/cookie.server.ts";
import { currentUser } from "../../session/current-user.server.ts";
import { anyone } from "../../session/door.server.ts";
import type { Route } from "./+types/route.ts";
import { authenticator } from "./authenticator.server.ts";

export const loader = anyone(async (asked: Route.LoaderArgs) => {
  if (await currentUser(asked)) throw redirect(whereNext(asked.url));
  return null;
});

export const action = anyone(async ({ request, url }: Route.ActionArgs) => {
  const result = await authenticator.authenticate("form", request);
  if (result.kind === "too-many-tries") return data({ message: result.message }, { status: 429 });
  if (result.kind === "refused") return data({ message: result.message }, { status: 401 });
  // Whatever session this browser was in before, its own or one slipped to it, ends here.
  const before = await readToken(request);
  if (before !== null) await signOut(before);
  throw redirect(whereNext(url), { headers: { "Set-Cookie": await keepToken(request, result.token) } });
});

/** The page to go on to, `?next=`, if it is one of ours; else the first. */
function whereNext(url: URL): string {
  const next = url.searchParams.get("next") ?? "/";
  const target = URL.canParse(next, url.origin) ? new URL(next, url.origin) : url;
  if (!next.startsWith("/") || target.origin !== url.origin || target.pathname.startsWith("//")) return "/";
  return target.pathname + target.search;
}
