import { z } from "zod";
import { FINDINGS, type FindingName } from "../diagnostics/finding.ts";
import { Day, Fingerprint, SeverityWord } from "./schemas.ts";

/**
 * The settings of a model set, as `public/schemas/settings.json` tells them to editors. They are read by
 * `diagnostics/settings.ts`, which needs no zod and says more of a mistake; the tests hold the two together.
 */
const Words = z.string().regex(/\S/);

const Reason = Words.describe("Why; a reviewer reads it");

const NAMES = Object.keys(FINDINGS) as FindingName[];

/** An error stays an error, and cannot be accepted: nothing is derived from a model that has one. */
const severities = NAMES.map((name) => {
  const severity = FINDINGS[name] === "error" ? z.literal("error") : SeverityWord;
  return [name, z.strictObject({ severity, reason: Reason }).optional()] as const;
});

const acceptable = NAMES.filter((name) => FINDINGS[name] !== "error" && name !== "stale-acceptance");

export const SettingsDocument = z.strictObject({
  $schema: z.string().optional(),
  severities: z.strictObject(Object.fromEntries(severities)).optional().describe("By the name of a finding"),
  accepted: z
    .array(
      z.strictObject({
        finding: z.enum(acceptable as [FindingName, ...FindingName[]]),
        file: Words.describe("From the root of the set"),
        fingerprint: Fingerprint.describe("As `check --fingerprints` prints it"),
        owner: Words.describe("Who answers for it"),
        reason: Reason,
        until: Day,
      }),
    )
    .optional(),
});
