import { Link } from "react-router";
import { firstLine } from "../../components/commit-list.tsx";
import { LocalTime } from "../../components/local-time.tsx";
import { ScrollRegion } from "../../components/scroll-region.tsx";
import type { Route } from "./+types/route.ts";

export { loader } from "./show-file.server.ts";

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData?.path ?? "A file"} at ${loaderData?.commit.oid.slice(0, 7) ?? ""} · Bondwright` },
];

/** The text of one file as a version has it, line by line. */
export default function ShowFile({ loaderData }: Route.ComponentProps) {
  const { team, set, commit, path, text } = loaderData;
  const base = `/sets/${team.slug}/${set.slug}`;
  const lines = text.replace(/\n$/, "").split("\n");
  return (
    <main className="leaf" id="main">
      <p className="note">
        Version {commit.position} · <code>{commit.oid.slice(0, 7)}</code> · {commit.author},{" "}
        <LocalTime at={commit.time} />
      </p>
      <h1 className="font-mono text-[1.375rem]!">{path}</h1>
      <p className="mt-2 flex flex-wrap gap-x-6">
        <Link to={`${base}/commits/${commit.oid}`}>{firstLine(commit.message)}: the difference</Link>
        <Link to={`${base}/history?file=${encodeURIComponent(path)}`}>History of this file</Link>
        <Link to={`${base}/edit/${path}`}>Open the newest</Link>
      </p>
      <ScrollRegion className="version-text" label={`Text of ${path}`}>
        <table>
          <tbody>
            {lines.map((line, index) => (
              // biome-ignore lint/suspicious/noArrayIndexKey: a line of a kept version is its number
              <tr key={index} id={`line-${index + 1}`}>
                <td className="number">{index + 1}</td>
                <td className="text">{line}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </ScrollRegion>
    </main>
  );
}
