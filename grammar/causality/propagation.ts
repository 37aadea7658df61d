import type { FlatGraph, FlatNode } from "../resolve/graph.ts";
import type { Reason, Stroke } from "./strokes.ts";

/** A stroke that is about to be set, with what it stands on. */
export interface Step {
  readonly bond: number;
  readonly stroke: Stroke;
  readonly reason: Reason;
}

/** Two chains that meet on one bond with opposite strokes: `kept` came first and stands. */
export interface Clash {
  readonly bond: number;
  readonly kept: Reason;
  readonly refused: Step;
}

/** Why a step could not be taken, and the bonds set before it that this rests on. */
export interface Refusal {
  readonly clash: Clash;
  readonly premises: readonly number[];
}

export function opposite(stroke: Stroke): Stroke {
  return stroke === "from" ? "to" : "from";
}

/**
 * Strokes and what follows from them through junctions and two-ports. A junction keeps two counters, the one bond
 * that brings its common variable and the number of the others, so that setting a bond costs the same however large
 * the junction is, and the whole is linear in the number of bonds.
 *
 * At a 0-junction exactly one bond brings the effort in (its stroke is at the junction), at a 1-junction exactly one
 * brings the flow (its stroke is at the far end). A TF passes a stroke on, a GY mirrors it.
 */
export class Propagation {
  readonly strokes: (Stroke | null)[];
  readonly reasons: (Reason | null)[];
  readonly #graph: FlatGraph;
  /** By node: the bond that brings the junction's common variable, or -1. */
  readonly #bringer: Int32Array;
  readonly #others: Int32Array;
  readonly #trail: number[] = [];
  readonly #pending: Step[] = [];

  constructor(graph: FlatGraph) {
    this.#graph = graph;
    this.strokes = graph.bonds.map(() => null);
    this.reasons = graph.bonds.map(() => null);
    this.#bringer = new Int32Array(graph.nodes.length).fill(-1);
    this.#others = new Int32Array(graph.nodes.length);
  }

  /** Sets a stroke and follows it to its end. What contradicts is not set, and returned; the first stroke stands. */
  settle(step: Step): Clash[] {
    const clashes: Clash[] = [];
    this.#follow(step, (clash) => {
      clashes.push(clash);
      return true;
    });
    return clashes;
  }

  /** As `settle`, but a contradiction takes back everything that the step brought about, and is returned. */
  attempt(step: Step): Refusal | null {
    const mark = this.mark;
    let met: Clash | null = null;
    this.#follow(step, (clash) => {
      met = clash;
      return false;
    });
    if (met === null) return null;
    const premises = this.#premisesBefore(mark, met);
    this.undo(mark);
    return { clash: met, premises };
  }

  /** A point to which `undo` takes back what was set later. */
  get mark(): number {
    return this.#trail.length;
  }

  undo(mark: number): void {
    while (this.#trail.length > mark) {
      const bond = this.#trail.pop() as number;
      const { from, to } = this.#graph.bonds[bond];
      const stroke = this.strokes[bond];
      this.#leave(this.#graph.nodes[from], bond, stroke === "from");
      this.#leave(this.#graph.nodes[to], bond, stroke === "to");
      this.strokes[bond] = null;
      this.reasons[bond] = null;
    }
  }

  #follow(step: Step, onClash: (clash: Clash) => boolean): void {
    const pending = this.#pending;
    pending.push(step);
    for (let at = 0; at < pending.length; at += 1) {
      const next = pending[at];
      const kept = this.reasons[next.bond];
      if (kept === null) this.#set(next);
      else if (this.strokes[next.bond] !== next.stroke && !onClash({ bond: next.bond, kept, refused: next }))
        break;
    }
    pending.length = 0;
  }

  #set({ bond, stroke, reason }: Step): void {
    this.strokes[bond] = stroke;
    this.reasons[bond] = reason;
    this.#trail.push(bond);
    const { from, to } = this.#graph.bonds[bond];
    this.#arrive(this.#graph.nodes[from], bond, "from", stroke === "from");
    this.#arrive(this.#graph.nodes[to], bond, "to", stroke === "to");
  }

  /** `here`: the stroke stands at this node's end, so that the effort arrives here. */
  #arrive(node: FlatNode, bond: number, end: Stroke, here: boolean): void {
    if (node.kind === "0" || node.kind === "1") {
      const brings = here === (node.kind === "0");
      if (!brings) {
        this.#others[node.index] += 1;
        if (this.#others[node.index] === node.ports.length - 1 && this.#bringer[node.index] === -1) {
          this.#demandBringer(node);
        }
      } else if (this.#bringer[node.index] === -1) {
        this.#bringer[node.index] = bond;
        const reason: Reason = { rule: "junction", node: node.index, premises: [bond] };
        for (const port of node.ports) {
          if (port.bond === bond && port.end === end) continue;
          this.#pending.push({ bond: port.bond, stroke: here ? opposite(port.end) : port.end, reason });
        }
      }
    } else if ((node.kind === "TF" || node.kind === "GY") && node.ports.length === 2) {
      const other = node.ports[0].bond === bond && node.ports[0].end === end ? node.ports[1] : node.ports[0];
      const rule = node.kind === "TF" ? "transformer" : "gyrator";
      const otherHere = here === (node.kind === "GY");
      this.#pending.push({
        bond: other.bond,
        stroke: otherHere ? other.end : opposite(other.end),
        reason: { rule, node: node.index, premises: [bond] },
      });
    }
  }

  /** All bonds but one take the junction's common variable: the last one must bring it. */
  #demandBringer(node: FlatNode): void {
    const open = node.ports.find((port) => this.strokes[port.bond] === null);
    if (open === undefined) return;
    const premises = node.ports.filter((port) => port !== open).map((port) => port.bond);
    this.#pending.push({
      bond: open.bond,
      stroke: node.kind === "0" ? open.end : opposite(open.end),
      reason: { rule: "junction", node: node.index, premises },
    });
  }

  /** The bonds set before `mark` that a contradiction rests on: why the opposite choice is forced. */
  #premisesBefore(mark: number, clash: Clash): number[] {
    const recent = new Set(this.#trail.slice(mark));
    const found = new Set<number>();
    const seen = new Set<number>();
    const open = [clash.bond, ...clash.refused.reason.premises];
    for (let bond = open.pop(); bond !== undefined; bond = open.pop()) {
      if (seen.has(bond)) continue;
      seen.add(bond);
      if (recent.has(bond)) for (const premise of this.reasons[bond]?.premises ?? []) open.push(premise);
      else found.add(bond);
    }
    return [...found];
  }

  #leave(node: FlatNode, bond: number, here: boolean): void {
    if (node.kind !== "0" && node.kind !== "1") return;
    if (here !== (node.kind === "0")) this.#others[node.index] -= 1;
    else if (this.#bringer[node.index] === bond) this.#bringer[node.index] = -1;
  }
}
