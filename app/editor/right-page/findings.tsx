import { useContext } from "react";
import type { FindingView } from "../view-model.ts";
import { LightingContext } from "./lighting.ts";
import { Section } from "./section.tsx";

export const SIGNS = { error: "✕", warning: "△", note: "○" } as const;
const INK = { error: "text-mistake", warning: "text-warning", note: "text-faded" } as const;

interface FindingsProps {
  readonly path: string;
  readonly findings: readonly FindingView[];
  readonly mayFix: boolean;
  onFix(finding: FindingView): void;
  onOpen(place: { readonly file: string; readonly line: number; readonly column: number }): void;
}

export function Findings({ path, findings, mayFix, onFix, onOpen }: FindingsProps) {
  return (
    <Section title="Findings" count={findings.length}>
      {findings.length === 0 ? (
        <p className="note">Nothing to find fault with.</p>
      ) : (
        <ol className="findings">
          {findings.map((found) => (
            <li
              key={`${found.name}:${found.place.file}:${found.place.line}:${found.place.column}:${found.message}`}
            >
              <Where path={path} place={found.place} onOpen={onOpen} />
              <div>
                <p>
                  <span className={`font-semibold ${INK[found.severity]}`}>
                    <span aria-hidden="true">{SIGNS[found.severity]} </span>
                    {found.severity}
                  </span>{" "}
                  {found.message} <code className="text-faded">{found.name}</code>
                </p>
                {found.facts.length > 0 && (
                  <ul className="facts">
                    {found.facts.map((fact) => (
                      <li key={`${fact.message}:${fact.place?.line}`}>
                        {fact.message}{" "}
                        {fact.place !== null && <Where path={path} place={fact.place} onOpen={onOpen} />}
                      </li>
                    ))}
                  </ul>
                )}
                {found.fix !== null && mayFix && (
                  <button type="button" className="word no-print" onClick={() => onFix(found)}>
                    Mend: {found.fix.title}
                  </button>
                )}
              </div>
            </li>
          ))}
        </ol>
      )}
    </Section>
  );
}

interface WhereProps {
  readonly path: string;
  readonly place: FindingView["place"];
  onOpen: FindingsProps["onOpen"];
}

function Where({ path, place, onOpen }: WhereProps) {
  return (
    <button type="button" className="word whitespace-nowrap" onClick={() => onOpen(place)}>
      {place.file === path ? "" : `${place.file}, `}line {place.line}
    </button>
  );
}

/** The number of a line that goes to it. */
export function LineLink({ line }: { line: number | null }) {
  const { open } = useContext(LightingContext);
  if (line === null) return <span className="text-faded">–</span>;
  return (
    <button type="button" className="word" aria-label={`Go to line ${line}`} onClick={() => open(line)}>
      {line}
    </button>
  );
}
