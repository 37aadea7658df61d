import { inert } from "./print.ts";

/** Work that takes no longer than this needs no word, in ms. */
const SILENT_FOR = 1000;
const BETWEEN = 100;

type Terminal = Pick<NodeJS.WriteStream, "isTTY" | "columns" | "write">;

/** Says how far the work is, on one line that it rewrites and takes away: only on a terminal, only if it takes long. */
export class Progress {
  readonly #terminal: Terminal | null;
  readonly #now: () => number;
  readonly #start: number;
  #said: number | null = null;

  constructor(terminal: Terminal = process.stderr, now: () => number = Date.now) {
    this.#terminal = terminal.isTTY && process.env.TERM !== "dumb" ? terminal : null;
    this.#now = now;
    this.#start = now();
  }

  say(done: number, total: number, name: string): void {
    const now = this.#now();
    if (this.#terminal === null || now - this.#start < SILENT_FOR) return;
    if (this.#said !== null && now - this.#said < BETWEEN) return;
    this.#said = now;
    const line = `checking ${done + 1} of ${total}: ${inert(name)}`;
    this.#terminal.write(`\r\u001b[2K${line.slice(0, Math.max(20, (this.#terminal.columns || 80) - 1))}`);
  }

  end(): void {
    if (this.#said !== null) this.#terminal?.write("\r\u001b[2K");
    this.#said = null;
  }
}
