import { Link } from "react-router";
import { LocalTime } from "../../components/local-time.tsx";
import type { Route } from "./+types/route.ts";

export { loader } from "./my-sets.server.ts";

export const meta: Route.MetaFunction = () => [{ title: "Model sets · Bondwright" }];

/** The table of contents: every model set of the reader's teams. */
export default function MySets({ loaderData: { teams } }: Route.ComponentProps) {
  return (
    <main className="leaf" id="main">
      <h1>Model sets</h1>
      {teams.length === 0 && (
        <p className="mt-4 max-w-[66ch]">
          You are in no team yet. Ask the administrator of your team to take you in; its sets then stand here.
        </p>
      )}
      {teams.map(({ team, role, sets }) => (
        <section key={team.slug} className="mt-8" aria-labelledby={`team-${team.slug}`}>
          <div className="flex flex-wrap items-baseline gap-x-4 mb-2">
            <h2 id={`team-${team.slug}`}>{team.name}</h2>
            <p className="note">your role: {role.replace("_", " ")}</p>
          </div>
          {sets.length === 0 ? (
            <p>This team has no model sets yet. Its administrator can begin one.</p>
          ) : (
            <ol className="contents-list">
              {sets.map((set) => (
                <li key={set.slug}>
                  <p className="entry">
                    <Link to={`/sets/${team.slug}/${set.slug}`}>{set.name}</Link>
                    <span className="leader" aria-hidden="true" />
                    <span className="note">
                      {set.updatedAt === null ? (
                        "nothing saved yet"
                      ) : (
                        <>
                          {set.updatedBy}, <LocalTime at={set.updatedAt} />
                        </>
                      )}
                    </span>
                  </p>
                  <p className="text-faded max-w-[66ch]">
                    {set.description}{" "}
                    <span className="note whitespace-nowrap">
                      {set.files} {set.files === 1 ? "file" : "files"}
                    </span>
                  </p>
                </li>
              ))}
            </ol>
          )}
        </section>
      ))}
    </main>
  );
}
