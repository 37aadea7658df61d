import { freePort, serve } from "../../db/bring-up/serve.mjs";
import { testDatabase } from "./database.ts";

export interface RunningServer {
  /** Such as `http://127.0.0.1:41233`. */
  readonly origin: string;
  readonly databaseUrl: string;
  stop(): Promise<void>;
}

/** The built server on a free port, with a database of its own; with the demo in it unless told otherwise. */
export async function startServer({ seed = true } = {}): Promise<RunningServer> {
  const databaseUrl = await testDatabase({ seed });
  const { origin, stop } = await serve({ url: databaseUrl, port: await freePort("127.0.0.1") });
  return { origin, databaseUrl, stop };
}
