import { applyPatch, createPatch, diffLines } from "diff";
import { useEffect, useRef, useState } from "react";
import { LocalTime } from "../components/local-time.tsx";
import { ScrollRegion } from "../components/scroll-region.tsx";
import "./two-versions.css";
import type { Settled } from "./workspace.ts";

/** A file that two people changed since `base`; null where there is no such file. */
export interface Collision {
  readonly path: string;
  readonly base: string | null;
  readonly theirs: string | null;
  readonly yours: string | null;
}

export interface Behind {
  readonly head: string;
  readonly newest: { readonly author: string; readonly time: string; readonly message: string };
  readonly collisions: readonly Collision[];
}

type Choice = "yours" | "theirs" | "both";

/**
 * Someone else saved the same files first: both texts side by side, and what to go on with. Nothing is saved and
 * nothing is lost here; the choice only says what stands in the editor next, on top of their version.
 */
export function TwoVersions({
  behind,
  onSettled,
  onBack,
}: {
  behind: Behind;
  onSettled(files: Settled[]): void;
  onBack(): void;
}) {
  const [choices, setChoices] = useState<Record<string, Choice>>({});
  const heading = useRef<HTMLHeadingElement>(null);
  useEffect(() => heading.current?.focus(), []);
  const { author, time, message } = behind.newest;
  const choiceOf = (collision: Collision) =>
    choices[collision.path] ?? (broughtTogether(collision) === null ? "yours" : "both");

  const settle = () =>
    onSettled(behind.collisions.map((collision) => settled(collision, choiceOf(collision))));
  return (
    <main className="leaf" id="main">
      <h1 ref={heading} tabIndex={-1}>
        {author} saved {behind.collisions.length === 1 ? "this file" : "these files"} before you
      </h1>
      <p className="mt-2 max-w-[66ch]">
        Saved <LocalTime at={time} /> with the message “{message.split("\n", 1)[0]}”. Your text has not been
        saved yet, and none of it is lost. Choose what to go on with; you can still edit it before you save.
      </p>
      {behind.collisions.map((collision) => (
        <section key={collision.path} className="mt-8" aria-label={collision.path}>
          <h2 className="font-mono">{collision.path}</h2>
          <fieldset className="my-3 flex flex-wrap gap-x-6 gap-y-2">
            <legend className="note">Go on with</legend>
            {offers(collision).map(([choice, words]) => (
              <label key={choice} className="flex items-baseline gap-2">
                <input
                  type="radio"
                  name={`choice-${collision.path}`}
                  checked={choiceOf(collision) === choice}
                  onChange={() => setChoices({ ...choices, [collision.path]: choice })}
                />
                {words}
              </label>
            ))}
          </fieldset>
          <SideBySide
            left={collision.theirs ?? ""}
            leftTitle={`${author}'s text`}
            right={collision.yours ?? ""}
            rightTitle="Your text"
          />
        </section>
      ))}
      <div className="mt-6 flex gap-4">
        <button type="button" className="button button-ink" onClick={settle}>
          Go on editing
        </button>
        <button type="button" className="button" onClick={onBack}>
          Back, change nothing
        </button>
      </div>
    </main>
  );
}

function offers(collision: Collision): [Choice, string][] {
  const both: [Choice, string][] =
    broughtTogether(collision) === null ? [] : [["both", "both: your changes put into their text"]];
  return [...both, ["yours", "your text, on top of theirs"], ["theirs", "their text, leaving yours"]];
}

function settled(collision: Collision, choice: Choice): Settled {
  const { path, theirs, yours } = collision;
  const chosen = choice === "both" ? broughtTogether(collision) : choice === "theirs" ? theirs : yours;
  return { path, theirs, chosen };
}

/** Your changes since the common text, made to theirs; null where the two touch the same lines. */
export function broughtTogether({ base, theirs, yours }: Collision): string | null {
  if (base === null || theirs === null || yours === null) return null;
  const together = applyPatch(theirs, createPatch("", base, yours));
  return together === false ? null : together;
}

interface Line {
  readonly left: { readonly number: number; readonly text: string } | null;
  readonly right: { readonly number: number; readonly text: string } | null;
  readonly same: boolean;
}

/** Both texts whole, line against line. */
export function linesOf(left: string, right: string): Line[] {
  const lines: Line[] = [];
  let atLeft = 1;
  let atRight = 1;
  let pending: string[] = [];
  const flush = (added: readonly string[]) => {
    for (let row = 0; row < Math.max(pending.length, added.length); row += 1) {
      lines.push({
        left: row < pending.length ? { number: atLeft++, text: pending[row] } : null,
        right: row < added.length ? { number: atRight++, text: added[row] } : null,
        same: false,
      });
    }
    pending = [];
  };
  for (const { value, added, removed } of diffLines(left, right)) {
    const texts = value.replace(/\n$/, "").split("\n");
    if (removed) pending = texts;
    else if (added) flush(texts);
    else {
      flush([]);
      for (const text of texts) {
        lines.push({ left: { number: atLeft++, text }, right: { number: atRight++, text }, same: true });
      }
    }
  }
  flush([]);
  return lines;
}

function SideBySide(props: { left: string; leftTitle: string; right: string; rightTitle: string }) {
  const lines = linesOf(props.left, props.right);
  return (
    <ScrollRegion className="border-y border-ink" label="Both texts side by side">
      <table className="side-by-side">
        <thead>
          <tr>
            <th scope="col" colSpan={2}>
              {props.leftTitle}
            </th>
            <th scope="col" colSpan={2}>
              {props.rightTitle}
            </th>
          </tr>
        </thead>
        <tbody>
          {lines.map(({ left, right, same }) => (
            <tr key={`${left?.number ?? ""}:${right?.number ?? ""}`} data-same={same}>
              <Half side={left} same={same} sign="−" says="only in their text" />
              <Half side={right} same={same} sign="+" says="only in your text" />
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollRegion>
  );
}

function Half({ side, same, sign, says }: { side: Line["left"]; same: boolean; sign: string; says: string }) {
  return (
    <>
      <td className="number">{side?.number}</td>
      <td className={same || side === null ? "text" : sign === "+" ? "text bg-added" : "text bg-removed"}>
        {same || side === null ? (
          "  "
        ) : (
          <>
            <span aria-hidden="true">{sign} </span>
            <span className="sr-only">{says}: </span>
          </>
        )}
        {side?.text}
      </td>
    </>
  );
}
