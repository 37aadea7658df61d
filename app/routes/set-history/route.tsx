import { Link } from "react-router";
import { CommitList } from "../../components/commit-list.tsx";
import type { Route } from "./+types/route.ts";

export { loader } from "./set-history.server.ts";

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `History of ${loaderData?.file ?? loaderData?.set.name ?? "a set"} · Bondwright` },
];

export default function SetHistory({ loaderData }: Route.ComponentProps) {
  const { team, set, file, commits, next } = loaderData;
  const base = `/sets/${team.slug}/${set.slug}`;
  const older = new URLSearchParams({ ...(file === null ? {} : { file }), before: next ?? "" });
  return (
    <main className="leaf" id="main">
      <h1>History of {file === null ? set.name : <span className="font-mono text-[0.9em]">{file}</span>}</h1>
      {file !== null && (
        <p className="mt-1 flex flex-wrap gap-x-6">
          <Link to={`${base}/edit/${file}`}>Open the file</Link>
          <Link to={`${base}/history`}>History of the whole set</Link>
        </p>
      )}
      <div className="mt-6">
        {commits.length === 0 ? (
          <p>
            No version is kept here yet. <Link to={base}>Open the set</Link> and save one.
          </p>
        ) : (
          <CommitList base={base} commits={commits} />
        )}
      </div>
      {next !== null && (
        <p className="mt-4">
          <Link to={`${base}/history?${older}`}>Older versions</Link>
        </p>
      )}
    </main>
  );
}
