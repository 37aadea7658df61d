import { z } from "zod";
import { FINDINGS, type FindingName } from "../diagnostics/finding.ts";

/**
 * The machine-readable documents: the one source of their types, of the JSON Schemas in `public/schemas` and of what
 * the tests hold every output against. Only types are imported from here at run time, so that the command line
 * starts without zod.
 */
export const Quantity = z.union([z.number(), z.enum(["inf", "-inf", "nan"])]).describe("An SI value");

const Unit = z.string().describe("The SI unit of the value beside it; 1 where it has none");

export const Name = z.string().min(1);

export const ExpressionText = z
  .string()
  .describe("An expression in the notation's own syntax, in SI; x' is the rate of x");

const Position = z
  .object({ line: z.int().min(1), column: z.int().min(1) })
  .describe("1-based; columns count UTF-16 code units");

const Place = { file: z.string(), start: Position, end: Position.describe("The first position after it") };

export const Fingerprint = z
  .string()
  .regex(/^[0-9a-f]{16}$/)
  .describe("What the finding is known by though lines move");

export const Day = z
  .string()
  .regex(/^\d{4}-\d{2}-\d{2}$/)
  .describe("The last day on which it counts, in UTC");

export const SeverityWord = z.enum(["error", "warning", "note"]);

export const FindingDocument = z.strictObject({
  name: z.enum(Object.keys(FINDINGS) as [FindingName, ...FindingName[]]),
  severity: SeverityWord,
  message: z.string(),
  ...Place,
  facts: z.array(
    z.strictObject({
      message: z.string(),
      file: z.string().optional(),
      start: Position.optional(),
      end: Position.optional(),
    }),
  ),
  fix: z
    .strictObject({ title: z.string(), edits: z.array(z.strictObject({ ...Place, text: z.string() })) })
    .optional(),
  fingerprint: Fingerprint.optional(),
  accepted: z
    .strictObject({ owner: z.string(), reason: z.string(), until: Day })
    .optional()
    .describe("By whose leave it stands; it fails nothing"),
});

export const EquationsDocument = z.strictObject({
  schema: z.literal("bondwright/equations@1"),
  system: Name.nullable(),
  states: z.array(
    z.strictObject({
      name: Name,
      unit: Unit,
      start: Quantity,
      kind: z.enum(["p", "q", "tracked"]),
    }),
  ),
  dependent: z.array(
    z.strictObject({
      name: Name,
      unit: Unit,
      of: z.array(Name).describe("The states that settle it"),
      value: ExpressionText,
      rate: ExpressionText,
    }),
  ),
  inputs: z.array(
    z.strictObject({
      name: Name,
      unit: Unit,
      nominal: Quantity,
      differentiated: z.boolean().describe("Its rate occurs"),
    }),
  ),
  parameters: z.array(z.strictObject({ name: Name, value: Quantity, unit: Unit })),
  equations: z
    .array(z.strictObject({ state: Name, rate: ExpressionText }))
    .describe(
      "Empty where `mass` and `right` stand: mass * rates = right, rows and columns in the order of `states`",
    ),
  mass: z.array(z.array(ExpressionText)).optional(),
  right: z.array(ExpressionText).optional(),
  outputs: z.array(z.strictObject({ name: Name, unit: Unit, value: ExpressionText })),
  loops: z.array(
    z.strictObject({
      variables: z.array(Name),
      residuals: z.array(ExpressionText).describe("Zero at the solution"),
      linear: z.boolean(),
      solved: z.boolean().describe("Its variables no longer occur in the equations"),
    }),
  ),
  bonds: z.array(
    z.strictObject({
      id: Name,
      from: Name,
      to: Name,
      stroke: z.enum(["from", "to"]).nullable().describe("The end that carries the causal stroke"),
      domain: Name,
    }),
  ),
  findings: z.array(FindingDocument),
});

export const CheckDocument = z.strictObject({
  schema: z.literal("bondwright/check@1"),
  files: z.array(z.string()),
  systems: z.array(
    z.strictObject({
      name: Name,
      file: z.string(),
      derived: z.boolean().describe("Its equations were derived; the findings say why not"),
    }),
  ),
  findings: z.array(FindingDocument),
  expectations: z.array(
    z.strictObject({
      system: Name,
      trial: Name.optional(),
      file: z.string(),
      text: z.string(),
      judged: z.boolean().describe("false: the measure is not worked out by this version"),
      passed: z.boolean(),
      measured: z.string().nullable(),
      wanted: z.string(),
      margin: z.string().nullable().optional().describe("Of a trial: how far it is from failing"),
      message: z.string().nullable(),
    }),
  ),
  summary: z.strictObject({
    files: z.int(),
    systems: z.int(),
    errors: z.int(),
    warnings: z.int(),
    notes: z.int(),
    accepted: z.int().describe("Findings that stand by leave; not counted in the figures above"),
    expectations: z.strictObject({ passed: z.int(), failed: z.int(), unjudged: z.int() }),
  }),
});

export type FindingDocument = z.infer<typeof FindingDocument>;
export type EquationsDocument = z.infer<typeof EquationsDocument>;
export type CheckDocument = z.infer<typeof CheckDocument>;
