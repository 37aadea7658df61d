import { Form, Link, useMatches } from "react-router";
import type { Theme } from "./theme.ts";
import { ThemeSwitch } from "./theme-switch.tsx";

interface RunningHeadProps {
  readonly person: { readonly name: string } | null;
  readonly theme: Theme;
}

/** As at the head of a book's pages: the work on the left, the reader on the right, a hairline below. */
export function RunningHead({ person, theme }: RunningHeadProps) {
  return (
    <header className="running-head">
      <a className="skip" href="#main">
        Go to the text
      </a>
      <nav aria-label="Where you are" className="where">
        <Link to="/" className="wordmark">
          Bondwright
        </Link>
        <Where />
      </nav>
      <div className="reader">
        {person !== null && <Link to="/reference">Reference</Link>}
        <ThemeSwitch initial={theme} />
        {person !== null && (
          <Form method="post" action="/sign-out" className="contents">
            <span className="name">{person.name}</span>
            <button type="submit" className="word">
              Sign out
            </button>
          </Form>
        )}
      </div>
    </header>
  );
}

interface Heading {
  readonly team: { readonly slug: string; readonly name: string };
  readonly set: { readonly slug: string; readonly name: string };
}

function isHeading(data: unknown): data is Heading {
  return typeof data === "object" && data !== null && "team" in data && "set" in data;
}

/** The set that the page is about, as every page of a set is given it. */
function Where() {
  const heading = useMatches()
    .map(({ loaderData }) => loaderData)
    .find(isHeading);
  if (heading === undefined) return null;
  const { team, set } = heading;
  return (
    <>
      <span className="team">{team.name}</span>
      <Link to={`/sets/${team.slug}/${set.slug}`}>{set.name}</Link>
      <Link to={`/sets/${team.slug}/${set.slug}/history`}>History</Link>
    </>
  );
}
