import { Link } from "react-router";
import { firstLine } from "../../components/commit-list.tsx";
import { Difference } from "../../components/difference.tsx";
import { LocalTime } from "../../components/local-time.tsx";
import type { Route } from "./+types/route.ts";

export { loader } from "./show-commit.server.ts";

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData ? firstLine(loaderData.commit.message) : "A version"} · Bondwright` },
];

/** One version: what its writer said, and the difference to the one before, file by file. */
export default function ShowCommit({ loaderData }: Route.ComponentProps) {
  const { team, set, commit, parent, changes } = loaderData;
  const base = `/sets/${team.slug}/${set.slug}`;
  const [title, ...more] = commit.message.split("\n");
  return (
    <main className="leaf" id="main">
      <p className="note">
        Version {commit.position} · <code>{commit.oid.slice(0, 7)}</code>
      </p>
      <h1>{title}</h1>
      <p className="whitespace-pre-line max-w-[66ch]">{more.join("\n").trim()}</p>
      <p className="note mt-1">
        {commit.author}, <LocalTime at={commit.time} />
      </p>
      <p className="mt-3 flex flex-wrap gap-x-6">
        {parent === null ? (
          <span className="text-faded">This is the first version.</span>
        ) : (
          <Link to={`${base}/commits/${parent}`}>The version before</Link>
        )}
        <Link to={`${base}/history`}>All versions</Link>
      </p>
      {changes.map(({ path, before, after }) => (
        <section key={path} className="mt-8" aria-label={path}>
          <div className="flex flex-wrap items-baseline gap-x-6 mb-2">
            <h2 className="font-mono text-base!">{path}</h2>
            <p className="note flex flex-wrap gap-x-6">
              {after !== null && <Link to={`${base}/files/${commit.oid}/${path}`}>Text of this version</Link>}
              {before !== null && parent !== null && (
                <Link to={`${base}/files/${parent}/${path}`}>Text of the version before</Link>
              )}
              <Link to={`${base}/history?file=${encodeURIComponent(path)}`}>History of this file</Link>
            </p>
          </div>
          <Difference path={path} before={before} after={after} />
        </section>
      ))}
    </main>
  );
}
