import { type RouterContextProvider, redirect } from "react-router";
import { databaseUnavailable } from "../../db/unavailable.ts";
import { DamagedObject } from "../storage/object-shelf.server.ts";
import { currentUser } from "./current-user.server.ts";
import { log } from "./log.server.ts";
import { requestIdContext } from "./nonce.server.ts";
import { refuse } from "./refusal.server.ts";
import type { SignedIn } from "./token.server.ts";

/** What every loader and action is given. */
interface Asked {
  request: Request;
  url: URL;
  context: Readonly<RouterContextProvider>;
}

/** Who passes. A loader or action that has no door fails a test. */
export type Door = "signed-in" | "anyone";

const doors = new WeakMap<object, Door>();

/** The door of a loader or action, if it has one. */
export function doorOf(route: object): Door | undefined {
  return doors.get(route);
}

/** A loader or action for people who are signed in; others are sent to sign in, or refused where they change something. */
export function signedIn<A extends Asked, R>(
  answer: (actor: SignedIn, asked: A) => Promise<R>,
): (asked: A) => Promise<R> {
  return withDoor("signed-in", async (asked: A) => {
    const actor = await currentUser(asked);
    if (actor) return answer(actor, asked);
    if (asked.request.method === "GET" || asked.request.method === "HEAD")
      throw redirect(`/sign-in?next=${encodeURIComponent(asked.url.pathname + asked.url.search)}`);
    refuse(
      401,
      "You are no longer signed in. Sign in again in another window; nothing here is lost meanwhile.",
    );
  });
}

/** A loader or action for everyone. */
export function anyone<A extends Asked, R>(answer: (asked: A) => Promise<R>): (asked: A) => Promise<R> {
  return withDoor("anyone", answer);
}

function withDoor<A extends Asked, R>(
  door: Door,
  answer: (asked: A) => Promise<R>,
): (asked: A) => Promise<R> {
  const guarded = async (asked: A) => {
    try {
      return await answer(asked);
    } catch (fault) {
      if (fault instanceof Error) explain(fault, asked);
      throw fault;
    }
  };
  doors.set(guarded, door);
  return guarded;
}

/** Faults of the place where the data lies have their own words; the rest is answered as a fault of ours. */
function explain(fault: Error, { request, url, context }: Asked): void {
  const event = { requestId: context.get(requestIdContext), method: request.method, path: url.pathname };
  const { name, message, stack } = fault;
  if (databaseUnavailable(fault)) {
    log.warn({ ...event, name, message }, "database unavailable");
    const away = "The database cannot be reached at the moment.";
    if (request.method === "GET" || request.method === "HEAD") refuse(503, `${away} Try again in a minute.`);
    // When the last word of a transaction is lost, nobody knows on which side of it the line broke.
    refuse(
      503,
      `${away} What you sent may not be stored; send it again in a minute. It is not stored twice.`,
    );
  }
  log.error({ ...event, name, message, stack }, "request failed");
  if (fault instanceof DamagedObject)
    refuse(
      500,
      "A stored part of this version is damaged, so it is not shown. Tell the administrator of your team.",
    );
}
