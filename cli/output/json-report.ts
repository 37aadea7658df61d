import { checkDocument } from "../../grammar/writing/json.ts";
import type { CheckRun } from "../check-run.ts";
import { inertJson } from "./print.ts";

export function jsonReport({ checked }: CheckRun): string {
  return inertJson(checkDocument(checked));
}
