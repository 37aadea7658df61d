import { z } from "zod";
import { FindingDocument, Name, Quantity } from "./schemas.ts";

const Series = z.array(Quantity);

const Energy = z.strictObject({
  supplied: Quantity,
  dissipated: Quantity,
  stored: Quantity.describe("The change over the run"),
  closure: Quantity.describe("What is missing, as a share of what was moved; the greatest at any time"),
  elements: z.array(
    z.strictObject({ name: Name, kind: z.enum(["supplied", "dissipated", "stored"]), energy: Quantity }),
  ),
});

const Run = z.strictObject({
  trial: Name,
  system: Name,
  status: z.enum(["reached", "stopped", "refused"]),
  reason: z.string().nullable().describe("Why it stopped"),
  parameters: z
    .record(Name, Quantity)
    .describe("What differs from the text in the run that is shown: of several the worst"),
  runs: z.int().describe("How many runs the trial made"),
  time: Series.describe("s"),
  signals: z.record(z.string(), Series),
  energy: Energy.nullable(),
  expectations: z.array(
    z.strictObject({
      text: z.string(),
      passed: z.boolean(),
      measured: z.string().nullable(),
      wanted: z.string(),
      margin: z.string().nullable(),
      message: z.string().nullable(),
    }),
  ),
  steps: z.int(),
  method: z.string().nullable().describe("Which methods made the steps"),
});

export const RunDocument = z.strictObject({
  schema: z.literal("bondwright/run@1"),
  ...Run.partial().shape,
  others: z.array(Run).describe("Further trials of the file, where none was asked for by name"),
  findings: z.array(FindingDocument),
});

export type OneRun = z.infer<typeof Run>;
export type RunDocument = z.infer<typeof RunDocument>;
