import type { Route } from "./+types/root.ts";
import { themeOf } from "./components/theme.ts";
import { currentUser } from "./session/current-user.server.ts";
import { anyone } from "./session/door.server.ts";

export { middleware } from "./session/middleware.server.ts";

/** What every page shows at its head. */
export const loader = anyone(async (asked: Route.LoaderArgs) => {
  const user = await currentUser(asked);
  return {
    person: user === null ? null : { id: user.userId, name: user.name },
    theme: themeOf(asked.request),
  };
});
