import { type Acceptance, FINDINGS, type FindingName, type Severity } from "./finding.ts";
import { nearest } from "./nearest.ts";

/** The settings of a model set, from the file of this name at its root. */
export const SETTINGS_FILE = "bondwright.json";

export interface Settings {
  readonly severities: ReadonlyMap<FindingName, { readonly severity: Severity; readonly reason: string }>;
  readonly accepted: readonly AcceptedFinding[];
}

export interface AcceptedFinding extends Acceptance {
  readonly finding: FindingName;
  /** From the set's root. */
  readonly file: string;
  readonly fingerprint: string;
}

/** Everything that is wrong with a settings file, each in one sentence that begins with the place in it. */
export class SettingsMistakes extends Error {
  readonly mistakes: readonly string[];

  constructor(mistakes: readonly string[]) {
    super(mistakes.join("\n"));
    this.mistakes = mistakes;
  }
}

type Say = (where: string, what: string) => void;

/**
 * Reads the text of a settings file.
 * @throws {SettingsMistakes} where it is no JSON, has keys that nobody reads, or values that say nothing.
 */
export function readSettings(text: string): Settings {
  const mistakes: string[] = [];
  const say: Say = (where, what) => mistakes.push(where === "" ? what : `${where}: ${what}`);
  const document = entries(parsed(text), "", ["$schema", "severities", "accepted"], say);
  const severities = severitiesOf(document.get("severities"), say);
  const accepted = acceptedOf(document.get("accepted"), say);
  if (mistakes.length > 0) throw new SettingsMistakes(mistakes);
  return { severities, accepted };
}

function parsed(text: string): unknown {
  try {
    return JSON.parse(text.replace(/^\ufeff/, ""));
  } catch (error) {
    throw new SettingsMistakes([`This is not JSON: ${error instanceof Error ? error.message : error}`]);
  }
}

/** The entries of an object; a Map, so that a key called `constructor` is a key like any other. */
function entries(
  value: unknown,
  where: string,
  known: readonly string[] | null,
  say: Say,
): Map<string, unknown> {
  if (typeof value !== "object" || value === null || Array.isArray(value)) {
    say(where, "an object `{ … }` is wanted here.");
    return new Map();
  }
  const found = new Map(Object.entries(value));
  for (const key of found.keys()) {
    if (known === null || known.includes(key)) continue;
    const close = nearest(key, known);
    const offer = close === null ? `The keys are ${known.join(", ")}.` : `Is ${close} meant?`;
    say(where, `there is no setting ${key}. ${offer}`);
  }
  return found;
}

const SEVERITIES: readonly Severity[] = ["error", "warning", "note"];

function severitiesOf(value: unknown, say: Say): Settings["severities"] {
  const settled = new Map<FindingName, { severity: Severity; reason: string }>();
  if (value === undefined) return settled;
  for (const [key, entry] of entries(value, "severities", null, say)) {
    const where = `severities.${key}`;
    const name = findingName(key, where, say);
    const fields = entries(entry, where, ["severity", "reason"], say);
    const severity = SEVERITIES.find((each) => each === fields.get("severity"));
    const reason = words(fields, "reason", where, say);
    if (severity === undefined) say(`${where}.severity`, "one of error, warning, note is wanted.");
    if (name === null || severity === undefined || reason === null) continue;
    if (FINDINGS[name] === "error" && severity !== "error")
      say(where, `an error cannot be made a ${severity}: nothing is derived from a model that has one.`);
    else settled.set(name, { severity, reason });
  }
  return settled;
}

function acceptedOf(value: unknown, say: Say): AcceptedFinding[] {
  if (value === undefined) return [];
  if (!Array.isArray(value)) {
    say("accepted", "a list `[ … ]` is wanted here.");
    return [];
  }
  const seen = new Map<string, number>();
  return value.flatMap((entry, index) => {
    const where = `accepted[${index}]`;
    const one = acceptedFinding(entry, where, say);
    if (one === null) return [];
    const key = `${one.file}\n${one.fingerprint}`;
    const before = seen.get(key);
    if (before !== undefined) say(where, `accepted[${before}] accepts the same finding.`);
    seen.set(key, index);
    return [one];
  });
}

function acceptedFinding(entry: unknown, where: string, say: Say): AcceptedFinding | null {
  const fields = entries(entry, where, ["finding", "file", "fingerprint", "owner", "reason", "until"], say);
  const named = words(fields, "finding", where, say);
  const finding = named === null ? null : findingName(named, `${where}.finding`, say);
  const file = words(fields, "file", where, say);
  const fingerprint = words(fields, "fingerprint", where, say);
  const owner = words(fields, "owner", where, say);
  const reason = words(fields, "reason", where, say);
  const until = words(fields, "until", where, say);
  if (fingerprint !== null && !/^[0-9a-f]{16}$/.test(fingerprint))
    say(`${where}.fingerprint`, "16 hexadecimal digits are wanted, as `check --fingerprints` prints them.");
  if (until !== null && !isDay(until)) say(`${where}.until`, "a day is wanted, as 2027-03-31.");
  if (finding !== null && FINDINGS[finding] === "error")
    say(`${where}.finding`, `${finding} is an error, and errors cannot be accepted: mend the model.`);
  if (finding === "stale-acceptance") say(`${where}.finding`, "what is stale cannot be accepted in turn.");
  const whole = finding !== null && file !== null && fingerprint !== null;
  if (!whole || owner === null || reason === null || until === null) return null;
  return { finding, file, fingerprint, owner, reason, until };
}

function findingName(name: string, where: string, say: Say): FindingName | null {
  if (Object.hasOwn(FINDINGS, name)) return name as FindingName;
  const close = nearest(name, Object.keys(FINDINGS));
  say(where, `there is no finding ${name}.${close === null ? "" : ` Is ${close} meant?`}`);
  return null;
}

function words(fields: Map<string, unknown>, key: string, where: string, say: Say): string | null {
  const value = fields.get(key);
  if (typeof value === "string" && value.trim() !== "") return value;
  // What is no object has been said already.
  if (fields.size > 0 || value !== undefined)
    say(`${where}.${key}`, "a text is wanted, and not an empty one.");
  return null;
}

/** A day of the calendar: 30 February is none. */
function isDay(text: string): boolean {
  if (!/^\d{4}-\d{2}-\d{2}$/.test(text)) return false;
  const day = new Date(`${text}T00:00:00Z`);
  return !Number.isNaN(day.getTime()) && day.toISOString().startsWith(text);
}
