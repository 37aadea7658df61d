import { spawnSync } from "node:child_process";
import { fileURLToPath } from "node:url";
import { PYTHON } from "../../db/bring-up/debian.mjs";

/** Hands a JSON document to a script beside this file, and gives the one that it prints. */
export function python<Answer>(script: string, input: unknown): Answer {
  const path = fileURLToPath(new URL(script, import.meta.url));
  // Numerical libraries that start a thread a core only wait for each other on matrices this small.
  const env = { ...process.env, OPENBLAS_NUM_THREADS: "1", PYTHONDONTWRITEBYTECODE: "1" };
  const run = spawnSync(PYTHON, [path], {
    input: JSON.stringify(input),
    encoding: "utf8",
    maxBuffer: 2 ** 30,
    env,
  });
  if (run.status !== 0) throw new Error(`${script} failed: ${run.error ?? run.stderr}`);
  return JSON.parse(run.stdout) as Answer;
}
