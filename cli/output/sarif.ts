import { existsSync } from "node:fs";
import path from "node:path";
import { pathToFileURL } from "node:url";
import type { Finding, FindingName } from "../../grammar/diagnostics/finding.ts";
import { pageOf } from "../../grammar/diagnostics/pages.ts";
import type { Span } from "../../grammar/source/span.ts";
import { findingsOf } from "../../grammar/writing/json.ts";
import { version } from "../../package.json";
import type { CheckedOnDisk, CheckRun } from "../check-run.ts";
import { inert, inertJson } from "./print.ts";
import { terminalText } from "./terminal-text.ts";

/** The report as the OASIS standard SARIF 2.1.0 has it; paths count from the root of the repository. */
export function sarifReport({ checked, startedAt }: CheckRun): string {
  const findings = findingsOf(checked) as { found: Finding; from: CheckedOnDisk }[];
  const names = [...new Set(findings.map(({ found }) => found.name))].sort();
  return inertJson({
    $schema: "https://docs.oasis-open.org/sarif/sarif/v2.1.0/os/schemas/sarif-schema-2.1.0.json",
    version: "2.1.0",
    runs: [
      {
        tool: { driver: { name: "Bondwright", version, semanticVersion: version, rules: names.map(ruleOf) } },
        invocations: [{ executionSuccessful: true, startTimeUtc: startedAt.toISOString() }],
        columnKind: "utf16CodeUnits",
        defaultEncoding: "utf-8",
        originalUriBaseIds: { [ROOT]: { description: { text: "The root of the repository." } } },
        artifacts: checked.map(({ files, report }) => ({
          location: locationOf(files.root, report.path),
          sourceLanguage: "bondwright",
        })),
        results: findings.map(({ found, from }) => resultOf(found, from, names.indexOf(found.name))),
      },
    ],
  });
}

const ROOT = "SRCROOT";

function ruleOf(name: FindingName) {
  const page = pageOf(name);
  if (page === null) throw new Error(`${name} has no page`);
  return {
    id: name,
    shortDescription: { text: oneParagraph(page.what) },
    fullDescription: { text: oneParagraph(page.what) },
    help: { text: terminalText(page.text), markdown: page.text.replace(/^```wright .*$/gm, "```wright") },
    defaultConfiguration: { level: page.severity },
  };
}

function oneParagraph(markdown: string): string {
  return markdown.replaceAll("`", "").replace(/\s+/g, " ").trim();
}

function resultOf(found: Finding, from: CheckedOnDisk, ruleIndex: number) {
  const { name, severity, message, span, facts, fix, fingerprint, accepted } = found;
  const related = facts.flatMap(({ message, span }, id) =>
    span === undefined ? [] : [{ id, message: text(message), physicalLocation: place(span, from) }],
  );
  const told = facts.filter(({ span }) => span === undefined).map(({ message }) => message);
  return {
    ruleId: name,
    ruleIndex,
    level: severity,
    message: text([message, ...told].join("\n")),
    locations: [{ physicalLocation: place(span, from) }],
    ...(related.length === 0 ? {} : { relatedLocations: related }),
    ...(fingerprint === undefined ? {} : { partialFingerprints: { "bondwrightFinding/v1": fingerprint } }),
    ...(fix === undefined ? {} : { fixes: [fixOf(fix, from)] }),
    ...(accepted === undefined
      ? {}
      : {
          suppressions: [
            {
              kind: "external",
              status: "accepted",
              justification: inert(`${accepted.reason} (${accepted.owner}, until ${accepted.until})`),
            },
          ],
        }),
  };
}

/** Brackets before a parenthesis would be read as a link; the standard takes them back with a backslash (3.11.6). */
function text(message: string): { text: string } {
  const plain = message.split("\n").map(inert).join("\n");
  return { text: plain.includes("](") ? plain.replace(/[\\[\]]/g, "\\$&") : plain };
}

function place(span: Span, { files }: CheckedOnDisk) {
  return { artifactLocation: locationOf(files.root, span.file), region: regionOf(span, files) };
}

function regionOf({ file, start, end }: Span, files: CheckedOnDisk["files"]) {
  const source = files.get(file);
  if (source === undefined) return { startLine: 1 };
  const from = source.position(start);
  const to = source.position(end);
  return { startLine: from.line, startColumn: from.column, endLine: to.line, endColumn: to.column };
}

function fixOf({ title, edits }: NonNullable<Finding["fix"]>, { files }: CheckedOnDisk) {
  const changed = [...new Set(edits.map(({ span }) => span.file))];
  return {
    description: text(title),
    artifactChanges: changed.map((file) => ({
      artifactLocation: locationOf(files.root, file),
      replacements: edits
        .filter(({ span }) => span.file === file)
        .map((edit) => ({
          deletedRegion: regionOf(edit.span, files),
          insertedContent: { text: edit.text },
        })),
    })),
  };
}

function locationOf(root: string, file: string): { uri: string; uriBaseId?: string } {
  const absolute = path.resolve(root, file);
  const relative = path.relative(repositoryOf(root), absolute).split(path.sep).join("/");
  if (relative.startsWith("../")) return { uri: pathToFileURL(absolute).href };
  return { uri: relative.split("/").map(encodeURIComponent).join("/"), uriBaseId: ROOT };
}

const REPOSITORIES = new Map<string, string>();

/** The nearest folder above that git keeps; without one the working directory. */
function repositoryOf(root: string): string {
  const known = REPOSITORIES.get(root);
  if (known !== undefined) return known;
  let folder = root;
  while (!existsSync(path.join(folder, ".git"))) {
    const above = path.dirname(folder);
    if (above === folder) break;
    folder = above;
  }
  const repository = existsSync(path.join(folder, ".git")) ? folder : process.cwd();
  REPOSITORIES.set(root, repository);
  return repository;
}
