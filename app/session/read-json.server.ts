import type { z } from "zod";
import { refuse } from "./refusal.server.ts";

/** The JSON body of a request in the shape asked for; what else came along is left out. */
export async function readJson<T extends z.ZodType>(request: Request, shape: T): Promise<z.output<T>> {
  const body: unknown = await request.json().catch(() => refuse(400, "The request is no JSON."));
  const read = shape.safeParse(body);
  if (!read.success) refuse(400, "The request does not have the parts it should have.");
  return read.data;
}
