import "../../reference/reference.css";
import { Caution } from "../../reference/caution.tsx";
import type { Route } from "./+types/route.ts";

export { loader } from "./reference.server.ts";

export const meta: Route.MetaFunction = () => [{ title: "The notation · Bondwright" }];

/** The notation from its text to what the core makes of it; the chapters stand at the margin. */
export default function Reference({ loaderData: { html, headings } }: Route.ComponentProps) {
  const chapters = headings.filter(({ depth }) => depth === 2);
  return (
    <main className="leaf reference" id="main">
      <h1>The notation, edition 1</h1>
      <nav aria-label="Chapters" className="chapters no-print">
        <ol>
          {chapters.map(({ id, title }) => (
            <li key={id}>
              <a href={`#${id}`}>{title}</a>
            </li>
          ))}
        </ol>
      </nav>
      <div className="reading">
        <p className="lead">
          Plain text in which an engineer writes the bond graph of a physical system, the laws of its
          elements, the requirements it must meet and the trials that show it.
        </p>
        <Caution />
        {/* biome-ignore lint/security/noDangerouslySetInnerHtml: rendered from texts of our own */}
        <div dangerouslySetInnerHTML={{ __html: html }} />
      </div>
    </main>
  );
}
