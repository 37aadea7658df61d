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
  readonly message: string | null;
}
