import { clashes, pathProblem } from "../storage/safe-path.ts";

/** A file as it is to be saved; null takes it away. */
export interface FileEdit {
  path: string;
  text: string | null;
}

/** What stands against a save. `path` is empty when it is not about one file. */
export interface Problem {
  path: string;
  message: string;
}

const longestText = 2_000_000;
const mostFiles = 5_000;
const longestMessage = 10_000;

/** What stands against saving these edits, after which the set would hold these paths. */
export function problemsOfSave({
  files,
  message,
  paths,
}: {
  files: readonly FileEdit[];
  message: string;
  paths: Iterable<string>;
}): Problem[] {
  const problems: Problem[] = [];
  const note = (path: string, message: string | null) => message !== null && problems.push({ path, message });
  note("", messageProblem(message));
  for (const { path, text } of files) {
    if (text === null) continue;
    note(path, pathProblem(path) ?? textProblem(text));
  }
  const after = [...paths];
  if (after.length > mostFiles) note("", `A model set holds at most ${mostFiles} files.`);
  for (const [path, clash] of clashes(after)) note(path, clash);
  return problems;
}

function messageProblem(message: string): string | null {
  if (message === "") return "Say in a few words what this version changes.";
  if (message.length > longestMessage) return `A message has at most ${longestMessage} characters.`;
  if (/(?![\n\t])\p{Cc}|\p{Surrogate}/u.test(message)) return "The message holds a control character.";
  return null;
}

function textProblem(text: string): string | null {
  if (text.length > longestText) return "The text is larger than 2 million characters.";
  if (text.includes("\0")) return "The text holds a NUL character.";
  if (/\p{Surrogate}/u.test(text)) return "The text is not well-formed Unicode.";
  return null;
}
