import { type Finding, finding } from "../diagnostics/finding.ts";
import { nearest } from "../diagnostics/nearest.ts";
import { pathFrom, pathInRelease, releaseOf } from "../source/released.ts";
import type { Span } from "../source/span.ts";
import type { FileSet } from "../source/text.ts";

/** A file that a `use` or a curve names at `span` and that is not there; `path` as written, `from` the file it is written in. */
export function missingFile(files: FileSet, from: string, path: string, span: Span): Finding {
  const wanted = pathFrom(from, path);
  const release = releaseOf(wanted);
  if (release === null && /^[^/]*@/.test(path)) {
    return finding(
      "file-missing",
      span,
      `\`${path}\` names no file of a release: that is written \`name@version/path\`, such as \`drives@1.4.0/motor.wright\`.`,
    );
  }
  const paths = [...files.keys()].filter((key) => releaseOf(key) === release);
  if (release !== null && paths.length === 0)
    return finding("file-missing", span, `No release \`${release}\` is at hand.`);
  const meant = nearest(
    pathInRelease(wanted),
    paths.map((key) => pathInRelease(key)),
  );
  const where = release === null ? "in this set" : `in release \`${release}\``;
  const message = `There is no file \`${pathInRelease(wanted)}\` ${where}.`;
  if (meant === null) return finding("file-missing", span, message);
  const written = release !== null && release !== releaseOf(from) ? `${release}/${meant}` : meant;
  return finding("file-missing", span, `${message} Is \`${written}\` meant?`, {
    fix: { title: `Use ${written}`, edits: [{ span, text: JSON.stringify(written) }] },
  });
}
