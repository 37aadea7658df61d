/** One `expect` line, judged. What could not be computed has failed, and `message` says why. */
export interface ExpectationResult {
  readonly system: string;
  readonly trial: string | null;
  readonly text: string;
  /**
   * false: the measure is read, but this version does not work it out. Such a requirement has neither passed nor
   * failed; it is listed as not judged, and `passed` is false so that nobody takes it for kept.
   */
  readonly judged: boolean;
  readonly passed: boolean;
  /** As shown: `4`, `52.3 kN`; null where nothing could be measured. */
  readonly measured: string | null;
  readonly wanted: string;
  /** How far it is from failing, as shown; below zero where it fails. Of what has no margin it is left out. */
  readonly margin?: string | null;
  readonly message: string | null;
}
