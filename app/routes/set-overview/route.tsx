import { Link } from "react-router";
import { CommitList } from "../../components/commit-list.tsx";
import type { Route } from "./+types/route.ts";

export { loader } from "./set-overview.server.ts";

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData?.set.name ?? "Model set"} · Bondwright` },
];

export default function SetOverview({ loaderData }: Route.ComponentProps) {
  const { team, set, role, may, files, recent } = loaderData;
  const base = `/sets/${team.slug}/${set.slug}`;
  const models = files.filter(({ path }) => path.endsWith(".wright"));
  return (
    <main className="leaf" id="main">
      <h1>{set.name}</h1>
      {set.description !== "" && <p className="mt-1 max-w-[66ch] text-faded">{set.description}</p>}
      <p className="note mt-1">
        {team.name} · your role: {role.replace("_", " ")}
      </p>
      <section className="mt-8" aria-labelledby="files">
        <h2 id="files" className="mb-2">
          Files
        </h2>
        {files.length === 0 ? (
          <p>
            Nothing is saved in this set yet.{" "}
            {may.includes("set.write") && <Link to={`${base}/edit/model.wright`}>Begin its first file</Link>}
          </p>
        ) : (
          <table className="ruled">
            <thead>
              <tr>
                <th scope="col">File</th>
                <th scope="col" className="figure">
                  Bytes
                </th>
                <th scope="col">History</th>
              </tr>
            </thead>
            <tbody>
              {files.map(({ path, size }) => (
                <tr key={path}>
                  <th scope="row" className="font-normal">
                    <Link className="font-mono" to={`${base}/edit/${path}`}>
                      {path}
                    </Link>
                  </th>
                  <td className="figure">{size}</td>
                  <td>
                    <Link
                      to={`${base}/history?file=${encodeURIComponent(path)}`}
                      aria-label={`Versions of ${path}`}
                    >
                      Versions
                    </Link>
                  </td>
                </tr>
              ))}
            </tbody>
          </table>
        )}
        {models.length > 0 && (
          <p className="mt-4">
            <Link className="button button-ink" to={`${base}/edit/${models[0].path}`}>
              Open {models[0].path}
            </Link>
          </p>
        )}
      </section>
      {recent.length > 0 && (
        <section className="mt-10" aria-labelledby="recent">
          <h2 id="recent" className="mb-2">
            Newest versions
          </h2>
          <CommitList base={base} commits={recent} />
          <p className="mt-2">
            <Link to={`${base}/history`}>All versions</Link>
          </p>
        </section>
      )}
    </main>
  );
}
