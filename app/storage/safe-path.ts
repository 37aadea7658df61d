/**
 * Which paths a model set may hold: those that every engineer's machine can check out, and that mean the same
 * file on all of them. Stricter than git's own check, which lets through several of these.
 */

/** Bytes of one name; file systems commonly stop at 255. */
const longestName = 200;
const longestPath = 1_000;
const deepest = 12;

/** Names that Windows keeps for devices, whatever the ending. */
const deviceName = /^(con|prn|aux|nul|com[0-9¹²³]|lpt[0-9¹²³])(\..*)?$/i;
/** Invisible, or turning the direction of what follows: one name could be read as another. */
const misleading = /[\p{Cc}\p{Cf}\p{Zl}\p{Zp}\p{Co}\p{Cn}\u115F\u1160\u3164\uFFA0]/u;
/** Characters that Windows does not allow in a name; the backslash is its separator. */
const forbidden = /[\\:*?"<>|]/;

/** What is wrong with a path, in one sentence, or null. */
export function pathProblem(path: string): string | null {
  if (/\p{Surrogate}/u.test(path)) return "The name is not well-formed Unicode.";
  if (bytes(path) > longestPath) return `The path is longer than ${longestPath} bytes.`;
  if (path !== path.normalize("NFC")) return "The name must be written in composed characters (NFC).";
  const names = path.split("/");
  if (names.length > deepest) return `Folders are nested more than ${deepest} deep.`;
  for (const name of names) {
    const problem = nameProblem(name);
    if (problem) return problem;
  }
  return null;
}

function nameProblem(name: string): string | null {
  if (name === "") return "A path needs a name between and after its slashes.";
  if (name === "." || name === "..") return "A path must not step to “.” or “..”.";
  if (bytes(name) > longestName) return `A name is longer than ${longestName} bytes.`;
  if (misleading.test(name)) return "The name holds a control or invisible character.";
  if (forbidden.test(name)) return 'A name must not hold any of \\ : * ? " < > |.';
  if (/^\s|[\s.]$/u.test(name)) return "A name must not begin with a blank or end with a blank or a dot.";
  if (deviceName.test(name)) return `“${name}” is the name of a device on some systems.`;
  // `git~1` and its like are the short names that Windows gives to `.git`.
  if (/^(\.git|git~\d+)$/i.test(name)) return `“${name}” is kept for git itself.`;
  if (/^\.git(modules|attributes|ignore)$/i.test(name)) return `“${name}” would steer git itself.`;
  return null;
}

/**
 * Among these paths, those that cannot stand beside another: the same name but for upper and lower case or
 * composition, or a file where another has a folder. Each with a sentence.
 */
export function clashes(paths: Iterable<string>): Map<string, string> {
  const found = new Map<string, string>();
  /** Folded path of each file and folder → how it was written first, and whether as a file. */
  const seen = new Map<string, { written: string; file: boolean }>();
  for (const path of paths) {
    const names = path.split("/");
    for (let depth = 1; depth <= names.length; depth++) {
      const written = names.slice(0, depth).join("/");
      const file = depth === names.length;
      const other = seen.get(fold(written));
      if (!other) seen.set(fold(written), { written, file });
      else if (other.written !== written)
        found.set(path, `“${written}” and “${other.written}” are one name on many systems.`);
      else if (file || other.file) found.set(path, `“${written}” would be both a file and a folder.`);
    }
  }
  return found;
}

function bytes(text: string): number {
  return new TextEncoder().encode(text).length;
}

function fold(path: string): string {
  return path.normalize("NFKC").toUpperCase().toLowerCase().normalize("NFC");
}
