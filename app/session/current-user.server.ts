import { createContext, type RouterContextProvider } from "react-router";
import { readToken } from "./cookie.server.ts";
import { holderOf, type SignedIn } from "./token.server.ts";

type Find = () => Promise<SignedIn | null>;

const finder = createContext<Find>(async () => null);

/** Puts the signed-in person within reach of the routes. The database is asked once, and only if someone asks. */
export function lookUpOnDemand(request: Request, context: Readonly<RouterContextProvider>): void {
  let found: Promise<SignedIn | null> | undefined;
  context.set(finder, () => {
    found ??= readToken(request).then((token) => (token === null ? null : holderOf(token)));
    return found;
  });
}

/** The person who made this request, or null when nobody is signed in. */
export function currentUser({
  context,
}: {
  context: Readonly<RouterContextProvider>;
}): Promise<SignedIn | null> {
  return context.get(finder)();
}
