import ELK from "elkjs/lib/elk-api.js";
import type { LayoutAnswer, LayoutRequest } from "../../grammar/writing/drawing-layout.ts";
import { workerAddress } from "../editor/worker-address.ts";
import layoutWorkerUrl from "./layout.worker.ts?worker&url";

let kernel: InstanceType<typeof ELK> | null = null;

/** Lays out off the main thread. One worker serves every drawing of the page and is started by the first. */
export async function layoutInWorker(request: LayoutRequest): Promise<LayoutAnswer> {
  kernel ??= new ELK({ workerFactory: () => new Worker(workerAddress(layoutWorkerUrl), { type: "module" }) });
  // The kernel writes into what it is given; the request is plain data made for this one call.
  return (await kernel.layout(request as Parameters<typeof kernel.layout>[0])) as LayoutAnswer;
}
