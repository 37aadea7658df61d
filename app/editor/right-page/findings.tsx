import { useContext } from "react";
import { SeverityWord } from "../../components/severity-word.tsx";
import type { FindingView, Place } from "../view-model.ts";
import { LightingContext } from "./lighting.ts";
import { Section } from "./section.tsx";

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
                  <SeverityWord severity={found.severity} /> <Prose text={found.message} />{" "}
                  <a
                    href={`/reference/findings/${found.name}`}
                    target="_blank"
                    title="What this finding means, on a page of its own"
                    className="font-mono text-note whitespace-nowrap"
                    rel="noopener"
                  >
                    {found.name}
                  </a>
                </p>
                {found.facts.length > 0 && (
                  <ul className="facts">
                    {found.facts.map((fact) => (
                      <li key={`${fact.message}:${fact.place?.line}`}>
                        <Prose text={fact.message} />{" "}
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

/** A sentence of the core, with the names of the text between backquotes. */
export function Prose({ text }: { text: string }) {
  return text.split("`").map((part, index) =>
    // biome-ignore lint/suspicious/noArrayIndexKey: the parts of one sentence have no other identity
    index % 2 === 1 ? <code key={index}>{part}</code> : part,
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

/** The line that something stands on, with its file where that is another one; it goes there. */
export function PlaceLink({ place, spelled = false }: { place: Place; spelled?: boolean }) {
  const { path, open } = useContext(LightingContext);
  const { file, line } = place;
  const name = file === path ? `line ${line}` : `line ${line} of ${file}`;
  return (
    <button type="button" className="word" aria-label={`Go to ${name}`} onClick={() => open(place)}>
      {file !== path && <span className="font-mono text-note">{file.slice(file.lastIndexOf("/") + 1)} </span>}
      {spelled && "line "}
      {line}
    </button>
  );
}
