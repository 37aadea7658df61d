import { Form, useNavigation } from "react-router";
import type { Route } from "./+types/route.ts";

export { action, loader } from "./sign-in.server.ts";

export const meta: Route.MetaFunction = () => [{ title: "Sign in · Bondwright" }];

/** A plain form that works without scripts. What it answers never tells who has an account. */
export default function SignIn({ actionData }: Route.ComponentProps) {
  const busy = useNavigation().formAction?.startsWith("/sign-in") ?? false;
  const refused = actionData?.message ?? null;
  return (
    <main className="leaf" id="main">
      <div className="max-w-[24rem] mx-auto mt-[8vh]">
        <h1>Sign in</h1>
        <p className="mt-2 text-faded">
          Bond graphs as text, the equations that follow from them, and every version your team has kept.
        </p>
        <Form method="post" className="mt-6 grid gap-4">
          {refused !== null && (
            <p id="refused" role="alert" className="text-mistake border-l-2 border-mistake pl-3">
              <span aria-hidden="true">✕ </span>
              {refused}
            </p>
          )}
          <label className="grid gap-1">
            E-mail address
            <input
              className="field"
              type="email"
              name="email"
              autoComplete="username"
              required
              aria-invalid={refused !== null}
              aria-describedby={refused === null ? undefined : "refused"}
            />
          </label>
          <label className="grid gap-1">
            Password
            <input
              className="field"
              type="password"
              name="password"
              autoComplete="current-password"
              required
              aria-invalid={refused !== null}
              aria-describedby={refused === null ? undefined : "refused"}
            />
          </label>
          <button type="submit" className="button button-ink justify-self-start" disabled={busy}>
            {busy ? "Signing in …" : "Sign in"}
          </button>
        </Form>
        <p className="note mt-6">
          No account, or the password is lost? The administrator of your team can help.
        </p>
      </div>
    </main>
  );
}
