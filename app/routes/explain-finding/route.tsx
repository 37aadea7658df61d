import { Link } from "react-router";
import "../../reference/reference.css";
import { SeverityWord } from "../../components/severity-word.tsx";
import type { Route } from "./+types/route.ts";

export { loader } from "./explain-finding.server.ts";

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData?.name ?? "Finding"} · Bondwright` },
];

/** The page of one finding: what it says, why, an example that fails, and the same one mended. */
export default function ExplainFinding({ loaderData: { name, severity, html } }: Route.ComponentProps) {
  return (
    <main className="leaf reference" id="main">
      <p className="note">
        <Link to="/reference#findings">All findings</Link>
      </p>
      <h1 className="font-mono">{name}</h1>
      <p className="mt-1">
        <SeverityWord severity={severity} />
      </p>
      {/* biome-ignore lint/security/noDangerouslySetInnerHtml: rendered from texts of our own */}
      <div className="reading" dangerouslySetInnerHTML={{ __html: html }} />
    </main>
  );
}
