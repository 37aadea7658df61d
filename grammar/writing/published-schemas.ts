import { LinearDocument, RatesDocument } from "./linear-schemas.ts";
import { RunDocument } from "./run-schemas.ts";
import { CheckDocument, EquationsDocument } from "./schemas.ts";

/** By file name under `public/schemas`. */
export const SCHEMAS = {
  equations: EquationsDocument,
  check: CheckDocument,
  linear: LinearDocument,
  rates: RatesDocument,
  run: RunDocument,
} as const;
