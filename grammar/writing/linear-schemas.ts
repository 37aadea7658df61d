import { z } from "zod";
import { ExpressionText, FindingDocument, Name, Quantity } from "./schemas.ts";

const Matrix = z.array(z.array(Quantity));

const Complex = z.strictObject({ re: Quantity, im: Quantity });

const ByName = z.record(Name, Quantity);

const Reach = z.strictObject({
  rank: z.int(),
  missing: z.array(ByName).describe("Combinations of states that are left out, by weight, the greatest 1"),
});

export const LinearDocument = z.strictObject({
  schema: z.literal("bondwright/linear@1"),
  system: Name.nullable(),
  states: z
    .array(Name)
    .describe("Rows of A. Tracks that no law reads are left out, but for those that an output reads"),
  inputs: z.array(Name),
  outputs: z.array(Name),
  A: Matrix,
  B: Matrix,
  C: Matrix,
  D: Matrix,
  E: Matrix.optional().describe("Where inputs are differentiated: x' = A x + B u + E u'"),
  G: Matrix.optional().describe("Where inputs are differentiated: y = C x + D u + G u'"),
  symbolic: z
    .partialRecord(z.enum(["A", "B", "C", "D", "E", "G"]), z.array(z.array(ExpressionText)))
    .nullable()
    .describe("The same as expressions; null where loops or coupled rates are solved numerically"),
  eigenvalues: z
    .array(Complex)
    .describe("By ascending natural frequency; tracks that no law reads are left out"),
  stable: z.boolean().nullable(),
  modes: z.array(
    z.strictObject({
      eigenvalue: Complex.describe("Of a conjugate pair the one with im > 0"),
      frequency: Quantity.describe("Undamped natural frequency, Hz"),
      damping: Quantity.nullable(),
      timeConstant: Quantity.nullable().describe("s; null for what does not fall"),
      participation: ByName.nullable().describe("Shares of the states; null where modes coincide"),
    }),
  ),
  dcGain: Matrix.describe('Outputs by inputs; "inf" where an output grows without end'),
  transfers: z
    .array(
      z.strictObject({
        input: Name,
        output: Name,
        poles: z.array(Complex),
        zeros: z.array(Complex),
        gain: Quantity.describe("Of gain * product(s - zero) / product(s - pole)"),
        bandwidth: Quantity.nullable().describe("Hz: first 3 dB under the gain at rest"),
      }),
    )
    .describe("Without what cancels; empty for large models"),
  controllability: Reach.nullable(),
  observability: Reach.nullable(),
  sensitivity: z
    .array(
      z.strictObject({
        parameter: Name,
        modes: z.array(z.strictObject({ frequency: Quantity, damping: Quantity }).nullable()),
      }),
    )
    .optional()
    .describe(
      "By mode: relative change of frequency, and change of damping, for a relative change of the parameter",
    ),
  operatingPoint: z.strictObject({
    states: ByName,
    inputs: ByName,
    equilibrium: z.boolean(),
    note: z.string().nullable(),
  }),
  findings: z.array(FindingDocument),
});

export const RatesDocument = z.strictObject({
  schema: z.literal("bondwright/rates@1"),
  system: Name.nullable(),
  rates: ByName.describe("Of all states and dependent stores"),
  outputs: ByName,
  variables: z.record(Name, z.strictObject({ e: Quantity, f: Quantity })).describe("By bond"),
  findings: z.array(FindingDocument),
});

export type LinearDocument = z.infer<typeof LinearDocument>;
export type RatesDocument = z.infer<typeof RatesDocument>;
