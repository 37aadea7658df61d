import type { FileSet } from "../source/text.ts";
import { type Finding, finding } from "./finding.ts";
import { fingerprintsOf } from "./fingerprint.ts";
import { type AcceptedFinding, SETTINGS_FILE, type Settings } from "./settings.ts";

/** Holds findings against the settings of their set: each gets its fingerprint, its severity, and by whose leave it stands. */
export class Settler {
  readonly #settings: Settings;
  readonly #files: FileSet;
  /** `2026-12-01`, in UTC. */
  readonly #today: string;
  readonly #met = new Set<AcceptedFinding>();

  constructor(settings: Settings, files: FileSet, today: string) {
    this.#settings = settings;
    this.#files = files;
    this.#today = today;
  }

  /** Some finding is accepted. */
  get accepts(): boolean {
    return this.#settings.accepted.length > 0;
  }

  settle(findings: readonly Finding[]): Finding[] {
    const prints = fingerprintsOf(findings, this.#files);
    return findings.map((found) => {
      const fingerprint = prints.get(found);
      const severity = this.#settings.severities.get(found.name)?.severity ?? found.severity;
      const entry = this.#settings.accepted.find(
        (each) =>
          each.fingerprint === fingerprint && each.file === found.span.file && each.finding === found.name,
      );
      if (entry === undefined) return { ...found, severity, fingerprint };
      this.#met.add(entry);
      if (this.#isOver(entry)) return { ...found, severity, fingerprint };
      const { owner, reason, until } = entry;
      return { ...found, severity, fingerprint, accepted: { owner, reason, until } };
    });
  }

  /**
   * What the entries of the settings themselves are found guilty of, once all was settled: their last day has passed;
   * or, where the whole set was looked at, what they accept no longer occurs.
   */
  stale(whole: boolean): Finding[] {
    const findings = this.#settings.accepted.flatMap((entry) => {
      const met = this.#met.has(entry);
      if (met && this.#isOver(entry)) {
        return [
          this.#stale(entry, `the acceptance of ${what(entry)} ended on ${entry.until}; it fails again.`),
        ];
      }
      return met || !whole ? [] : [this.#stale(entry, `${what(entry)} is accepted, but no longer occurs.`)];
    });
    return this.settle(findings);
  }

  #isOver({ until }: AcceptedFinding): boolean {
    return until < this.#today;
  }

  #stale(entry: AcceptedFinding, message: string): Finding {
    const text = this.#files.get(SETTINGS_FILE)?.text ?? "";
    const at = Math.max(0, text.indexOf(`"${entry.fingerprint}"`));
    const span = { file: SETTINGS_FILE, start: at, end: at + entry.fingerprint.length + 2 };
    const facts = [
      { message: `accepted by ${entry.owner} until ${entry.until}: ${entry.reason}` },
      { message: "take the entry out, or have it renewed by its owner" },
    ];
    return finding("stale-acceptance", span, message[0].toUpperCase() + message.slice(1), { facts });
  }
}

function what({ finding: name, file }: AcceptedFinding): string {
  return `\`${name}\` in ${file}`;
}
