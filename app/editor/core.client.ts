import coreWorkerUrl from "./core.worker.ts?worker&url";
import type { CoreAnswer, CoreRequest } from "./core-messages.ts";
import type { AnswerTo, Question } from "./core-questions.ts";
import type { NameAnswer, NameQuestion } from "./names/rename.ts";
import type { FileView, Variables } from "./view-model.ts";
import { workerAddress } from "./worker-address.ts";

export interface CoreListener {
  view(view: FileView, milliseconds: number): void;
  fault(message: string): void;
}

/** The page's end of the core: it sends what changed and hears only the newest answer. */
export class Core {
  readonly #worker: Worker;
  readonly #listener: CoreListener;
  readonly #sent = new Map<string, string>();
  readonly #waiting = new Map<number, (answer: CoreAnswer | null) => void>();
  #number = 0;
  #newestCheck = 0;

  constructor(listener: CoreListener) {
    this.#listener = listener;
    this.#worker = new Worker(workerAddress(coreWorkerUrl), { type: "module" });
    this.#worker.onmessage = (event: MessageEvent<CoreAnswer>) => this.#hear(event.data);
    this.#worker.onerror = (event) =>
      listener.fault(event.message || "the worker of the core could not be started");
  }

  check(texts: ReadonlyMap<string, string>, path: string, system: string | null, variables: Variables): void {
    const changed: [string, string | null][] = [];
    for (const [file, text] of texts) {
      if (this.#sent.get(file) !== text) {
        changed.push([file, text]);
        this.#sent.set(file, text);
      }
    }
    for (const file of [...this.#sent.keys()]) {
      if (!texts.has(file)) {
        changed.push([file, null]);
        this.#sent.delete(file);
      }
    }
    this.#newestCheck = ++this.#number;
    this.#post({ kind: "check", number: this.#newestCheck, path, system, variables, changed });
  }

  /** The text laid out by the formatter; null where the core could not. */
  async format(path: string, text: string): Promise<string | null> {
    const answer = await this.#request((number) => ({ kind: "format", number, path, text }));
    return answer?.kind === "formatted" ? answer.text : null;
  }

  async names(question: NameQuestion): Promise<NameAnswer> {
    const answer = await this.#request((number) => ({ kind: "names", number, ...question }));
    return answer?.kind === "named" ? answer.answer : { refusal: "The core could not read this text." };
  }

  async ask<Q extends Question>(path: string, question: Q): Promise<AnswerTo<Q>> {
    const answer = await this.#request((number) => ({ kind: "ask", number, path, question }));
    return answer?.kind === "answer" ? (answer.answer as AnswerTo<Q>) : null;
  }

  close(): void {
    this.#worker.terminate();
    for (const resolve of this.#waiting.values()) resolve(null);
    this.#waiting.clear();
  }

  #request(of: (number: number) => CoreRequest): Promise<CoreAnswer | null> {
    const number = ++this.#number;
    return new Promise((resolve) => {
      this.#waiting.set(number, resolve);
      this.#post(of(number));
    });
  }

  #post(request: CoreRequest): void {
    this.#worker.postMessage(request);
  }

  #hear(answer: CoreAnswer): void {
    const waiting = this.#waiting.get(answer.number);
    if (waiting !== undefined) {
      this.#waiting.delete(answer.number);
      waiting(answer);
    } else if (answer.number === this.#newestCheck) {
      if (answer.kind === "view") this.#listener.view(answer.view, answer.milliseconds);
      else if (answer.kind === "fault") this.#listener.fault(answer.message);
    }
  }
}
