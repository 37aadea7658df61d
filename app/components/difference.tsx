import { structuredPatch } from "diff";
import { Fragment, useMemo } from "react";
import { ScrollRegion } from "./scroll-region.tsx";

interface Row {
  readonly sign: "+" | "−" | " ";
  readonly before: number | null;
  readonly after: number | null;
  readonly text: string;
}

interface Passage {
  readonly rows: readonly Row[];
}

/** The lines that differ, each passage with three lines around it. */
export function passagesOf(before: string, after: string): Passage[] {
  const { hunks } = structuredPatch("", "", before, after, "", "", { context: 3 });
  return hunks.map(({ oldStart, newStart, lines }) => {
    let atBefore = oldStart;
    let atAfter = newStart;
    const rows = lines
      .filter((line) => !line.startsWith("\\"))
      .map((line): Row => {
        const text = line.slice(1);
        if (line[0] === "+") return { sign: "+", before: null, after: atAfter++, text };
        if (line[0] === "-") return { sign: "−", before: atBefore++, after: null, text };
        return { sign: " ", before: atBefore++, after: atAfter++, text };
      });
    return { rows };
  });
}

const SAYS = { "+": "added", "−": "removed", " ": "" } as const;
const PAPER = { "+": "bg-added", "−": "bg-removed", " ": "" } as const;

/** Two versions of one text: line numbers of both, `+` and `−` beside the lines, colour only underneath. */
export function Difference({
  path,
  before,
  after,
}: {
  path: string;
  before: string | null;
  after: string | null;
}) {
  const passages = useMemo(() => passagesOf(before ?? "", after ?? ""), [before, after]);
  const added = passages.flatMap(({ rows }) => rows).filter(({ sign }) => sign === "+").length;
  const removed = passages.flatMap(({ rows }) => rows).filter(({ sign }) => sign === "−").length;
  if (passages.length === 0) return <p className="note">The text of {path} is the same in both versions.</p>;
  return (
    <ScrollRegion
      className="border-y border-rule font-mono text-[0.8125rem] leading-5"
      label={`Difference in ${path}`}
    >
      <table className="border-collapse min-w-full">
        <caption className="text-left py-1 font-sans note">
          {counted(added, "line")} added, {counted(removed, "line")} removed
          {before === null && "; the file is new"}
          {after === null && "; the file was taken out"}
        </caption>
        <thead className="sr-only">
          <tr>
            <th scope="col">Line before</th>
            <th scope="col">Line after</th>
            <th scope="col">Change</th>
            <th scope="col">Text</th>
          </tr>
        </thead>
        <tbody>
          {passages.map((passage, index) => (
            <Fragment key={passage.rows[0]?.before ?? `+${passage.rows[0]?.after}`}>
              {index > 0 && (
                <tr>
                  <td colSpan={4} className="text-faded border-y border-rule px-2 select-none">
                    ⋮<span className="sr-only"> lines that did not change are left out</span>
                  </td>
                </tr>
              )}
              {passage.rows.map((row) => (
                <tr key={`${row.before ?? ""}:${row.after ?? ""}`} className={PAPER[row.sign]}>
                  <td className="text-faded text-right px-2 select-none w-px">{row.before}</td>
                  <td className="text-faded text-right px-2 select-none w-px">{row.after}</td>
                  <td className="px-1 font-semibold w-px">
                    <span aria-hidden="true">{row.sign}</span>
                    <span className="sr-only">{SAYS[row.sign]}</span>
                  </td>
                  <td className="whitespace-pre pr-3">{row.text}</td>
                </tr>
              ))}
            </Fragment>
          ))}
        </tbody>
      </table>
    </ScrollRegion>
  );
}

function counted(count: number, noun: string): string {
  return `${count} ${noun}${count === 1 ? "" : "s"}`;
}
