import { Link } from "react-router";
import { LocalTime } from "./local-time.tsx";

export interface CommitEntry {
  readonly oid: string;
  readonly position: number;
  readonly author: string;
  readonly time: string;
  readonly message: string;
  readonly paths: readonly string[];
}

/** Versions, newest first: what each changed in its writer's words, who, when, and which files. */
export function CommitList({ base, commits }: { base: string; commits: readonly CommitEntry[] }) {
  return (
    <ol className="ruled-list">
      {commits.map((commit) => (
        <li key={commit.oid} className="version">
          <span className="figure text-faded" title={`Version ${commit.position}`}>
            {commit.position}
          </span>
          <div className="min-w-0">
            <p>
              <Link to={`${base}/commits/${commit.oid}`}>{firstLine(commit.message)}</Link>
            </p>
            <p className="note">
              {commit.author}, <LocalTime at={commit.time} /> · <code>{commit.oid.slice(0, 7)}</code> ·{" "}
              <span className="font-mono">{shortened(commit.paths)}</span>
            </p>
          </div>
        </li>
      ))}
    </ol>
  );
}

export function firstLine(message: string): string {
  return message.split("\n", 1)[0];
}

function shortened(paths: readonly string[]): string {
  const shown = paths.slice(0, 3).join(", ");
  return paths.length > 3 ? `${shown} and ${paths.length - 3} more` : shown;
}
