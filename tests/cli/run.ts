import { spawnSync } from "node:child_process";
import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { fileURLToPath } from "node:url";

export const BUILT = fileURLToPath(new URL("../../build/cli/bondwright.mjs", import.meta.url));

export interface Outcome {
  readonly code: number | null;
  readonly out: string;
  readonly err: string;
}

/** A folder of files for one test, and the built command line run in it as a process of its own. */
export class Workplace {
  readonly folder = mkdtempSync(path.join(tmpdir(), "bondwright-cli-"));

  write(name: string, content: string | Buffer): this {
    const file = path.join(this.folder, name);
    mkdirSync(path.dirname(file), { recursive: true });
    writeFileSync(file, content);
    return this;
  }

  run(
    args: readonly string[],
    options: { readonly stdin?: string; readonly env?: NodeJS.ProcessEnv; readonly cwd?: string } = {},
  ): Outcome {
    const { NO_COLOR: _, ...env } = process.env;
    const done = spawnSync(process.execPath, [BUILT, ...args], {
      cwd: path.join(this.folder, options.cwd ?? "."),
      encoding: "utf8",
      input: options.stdin ?? "",
      env: { ...env, ...options.env },
    });
    return { code: done.status, out: done.stdout, err: done.stderr };
  }

  remove(): void {
    rmSync(this.folder, { recursive: true, force: true });
  }
}

const HEAD = "notation 1\n\n## A cart on a rail.\n";

/** Nothing to say about it. */
export const CLEAN = `${HEAD}system Cart {
  param m = 80 kg    -- mass
  param b = 12 N*s/m -- drag

  input F : N        -- push

  Se push     e = F
  1  rail     : translation
  I  body   = m
  R  damper = b

  push -> rail -> body, damper

  expect order = 1
}
`;

export const CONFLICT = `${HEAD}system Lines {
  Se a e = 5 bar
  Se b e = 6 bar
  0 node : hydraulic
  R leak e = 3e9 Pa*s/m^3 * f
  a -> node
  b -> node
  node -> leak
}
`;

/** A second inertia on a rigid gear: a warning, no error. */
export const DEPENDENT = `${HEAD}system Gear {
  param J1 = 1 kg*m^2 -- motor
  param J2 = 4 kg*m^2 -- drum
  param n = 1/3 -- speed of the drum by that of the motor
  input T : N*m -- torque
  Se motor e = T
  1 fast : rotation
  I J1
  TF gear out.f = n*in.f
  1 slow : rotation
  I J2
  motor -> fast -> J1
  fast -> gear -> slow -> J2
}
`;

export const FAILED_REQUIREMENT = CLEAN.replace("order = 1", "order = 2");

export const UNMEASURABLE_REQUIREMENT = CLEAN.replace("order = 1", "frequency(2) > 1 Hz");

export const SYNTAX_ERROR = CLEAN.replace("input F : N ", "input F : ");
