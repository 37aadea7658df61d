import { isRouteErrorResponse, Link, useLocation } from "react-router";

/** What went wrong, where, and how to mend it: the page in place of one that could not be shown. */
export function Fault({ error, children }: { error: unknown; children?: React.ReactNode }) {
  const { pathname, search } = useLocation();
  const { title, sentence, mend } = wordsFor(error);
  return (
    <main className="leaf" id="main">
      <h1>{title}</h1>
      <p className="mt-3 max-w-[66ch]">{sentence}</p>
      {children}
      <p className="note mt-2">
        at <code>{pathname}</code>
      </p>
      <p className="mt-6 flex flex-wrap gap-x-6 gap-y-2">
        {mend === "sign-in" && (
          <Link to={`/sign-in?next=${encodeURIComponent(pathname + search)}`}>Sign in again</Link>
        )}
        {mend === "again" && <a href={pathname + search}>Try again</a>}
        <Link to="/">All model sets</Link>
      </p>
    </main>
  );
}

function wordsFor(error: unknown): { title: string; sentence: string; mend: "sign-in" | "again" | null } {
  if (isRouteErrorResponse(error)) {
    const said = (error.data as { message?: string } | null)?.message;
    switch (error.status) {
      case 401:
        return { title: "You are signed out", sentence: said ?? "Sign in again to go on.", mend: "sign-in" };
      case 403:
        return { title: "Not allowed", sentence: said ?? "Your role does not allow this.", mend: null };
      case 404:
        return { title: "Not found", sentence: said ?? "There is nothing at this address.", mend: null };
      case 409:
        return { title: "Someone was faster", sentence: said ?? "Try again.", mend: "again" };
      case 503:
        return { title: "Out of reach for now", sentence: said ?? "Try again in a minute.", mend: "again" };
      default:
        if (said !== undefined) return { title: "That did not work", sentence: said, mend: "again" };
    }
  }
  return {
    title: "Something broke on our side",
    sentence: "This page could not be shown. It is not your doing, and nothing that was saved is lost.",
    mend: "again",
  };
}
