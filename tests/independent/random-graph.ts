import { DOMAINS, type DomainName } from "./physical-units.ts";

/**
 * Random bond graphs as data, from which the text for the core is written, and the equations of the check without
 * causality: trees of junctions over several domains, closed to meshes, with dependent stores, fields, two-ports
 * that are modulated, and tracks.
 */
export interface RandomGraph {
  readonly nodes: readonly RandomNode[];
  /** Power counts positive from the first end to the second. */
  readonly bonds: readonly (readonly [from: BondEnd, to: BondEnd])[];
  readonly tracks: readonly RandomTrack[];
  /** In SI, with their rates. */
  readonly inputs: readonly { readonly name: string; readonly value: number; readonly rate: number }[];
}

export type RandomKind = "0" | "1" | "Se" | "Sf" | "R" | "C" | "I" | "IC" | "TF" | "GY";

export interface BondEnd {
  readonly node: number;
  readonly port: number;
}

export interface RandomNode {
  readonly name: string;
  readonly kind: RandomKind;
  /** By port; of a junction its one domain; of a two-port those of `in` and `out`. */
  readonly domains: readonly DomainName[];
  /**
   * What a law relates, row by row: R: e = M·f; C: e = M·q; I: f = M·p; IC: the co-variables (f of its first port, e of
   * its second) = M·(p, q); a two-port: its ratio, as the one number. `inverse`: the right side is told by the left.
   */
  readonly matrix: readonly (readonly number[])[];
  readonly inverse: boolean;
  /** A store's law is written as its energy. */
  readonly energy: boolean;
  /** `curved`: of R: e = M·f·|f|; of C and I: with a tenth of the cube added. One-ports only. */
  readonly curved: boolean;
  /** The law's factor is times 1 + s²/4 for a signal s: `time`, an input or a track. */
  readonly modulation: string | null;
}

export interface RandomTrack {
  readonly name: string;
  /** Its rate is the common variable of this junction. */
  readonly of: number;
}

export interface GraphWishes {
  /** Square-law resistors and stores that stiffen. */
  readonly curved?: boolean;
  /** Two-ports and resistors that follow the displacement of a junction. */
  readonly tracks?: boolean;
  /** At most so many junctions. */
  readonly junctions?: number;
}

type Draw = () => number;

export function randomGraph(draw: Draw, wishes: GraphWishes = {}): RandomGraph {
  const plan = new Plan(draw, wishes);
  plan.tree();
  plan.rings();
  plan.elements();
  return plan;
}

const ONE_PORTS = ["R", "R", "C", "I", "C", "I", "Se", "Sf"] as const;
const FIELDS = ["R", "C", "I", "IC"] as const;
const DOMAIN_NAMES = Object.keys(DOMAINS) as DomainName[];

class Plan implements RandomGraph {
  readonly nodes: RandomNode[] = [];
  readonly bonds: [BondEnd, BondEnd][] = [];
  readonly tracks: RandomTrack[] = [];
  readonly inputs: { name: string; value: number; rate: number }[] = [];
  readonly #draw: Draw;
  readonly #wishes: GraphWishes;

  constructor(draw: Draw, wishes: GraphWishes) {
    this.#draw = draw;
    this.#wishes = wishes;
  }

  tree(): void {
    this.#junction(this.#pick(DOMAIN_NAMES));
    const most = this.#wishes.junctions ?? 6;
    for (let more = Math.floor(this.#draw() * most); more > 0; more -= 1) {
      const from = this.#pick(this.#junctions());
      const near = this.nodes[from];
      if (this.#draw() < 0.5) {
        const far = this.#junction(this.#draw() < 0.5 ? near.domains[0] : this.#pick(DOMAIN_NAMES));
        this.#joinByTwoPort(from, far);
      } else {
        const kind = this.#draw() < 0.15 ? near.kind : near.kind === "0" ? "1" : "0";
        this.#join(from, this.#junction(near.domains[0], kind));
      }
    }
  }

  /** Bonds and two-ports that close meshes. */
  rings(): void {
    const junctions = this.#junctions();
    if (junctions.length < 3) return;
    for (let more = Math.floor(this.#draw() * 2.2); more > 0; more -= 1) {
      const [a, b] = [this.#pick(junctions), this.#pick(junctions)];
      if (a === b) continue;
      const joined = this.bonds.some(
        ([from, to]) => (from.node === a && to.node === b) || (from.node === b && to.node === a),
      );
      const may = this.nodes[a].domains[0] === this.nodes[b].domains[0] && !joined;
      if (may && this.nodes[a].kind !== this.nodes[b].kind && this.#draw() < 0.6) this.#join(a, b);
      else if (this.#draw() < 0.5) this.#joinByTwoPort(a, b);
    }
  }

  elements(): void {
    const junctions = this.#junctions();
    for (const junction of junctions) {
      const [domain] = this.nodes[junction].domains;
      for (let more = 1 + Math.floor(this.#draw() * 2); more > 0; more -= 1) {
        const kind = this.#pick(ONE_PORTS);
        const source = kind === "Se" || kind === "Sf";
        const element = this.#element(kind, [domain]);
        if (source && this.#draw() < 0.5) this.#join(element, junction);
        else this.#join(junction, element);
      }
    }
    while (this.#draw() < 0.35) {
      const kind = this.#pick(FIELDS);
      const wide = kind !== "IC" && this.#draw() < 0.3 ? 3 : 2;
      const at = Array.from({ length: wide }, () => this.#pick(junctions));
      const field = this.#element(
        kind,
        at.map((junction) => this.nodes[junction].domains[0]),
      );
      for (const [port, junction] of at.entries()) {
        this.bonds.push([
          { node: junction, port: 0 },
          { node: field, port },
        ]);
      }
    }
  }

  #junction(domain: DomainName, kind: RandomKind = this.#pick(["0", "1"])): number {
    return this.#add({ kind, domains: [domain], matrix: [] });
  }

  #element(kind: RandomKind, domains: readonly DomainName[]): number {
    if (kind === "Se" || kind === "Sf") {
      const node = this.#add({ kind, domains, matrix: [] });
      this.#input(`v_${this.nodes[node].name}`);
      return node;
    }
    const store = kind === "C" || kind === "I" || kind === "IC";
    const curved = this.#wishes.curved === true && domains.length === 1 && this.#draw() < 0.5;
    const energy = store && (kind === "IC" || this.#draw() < 0.25);
    return this.#add({
      kind,
      domains,
      matrix: this.#definite(domains.length),
      energy,
      curved,
      inverse: !curved && !energy && this.#draw() < 0.5,
      modulation: kind === "R" && domains.length === 1 && !curved ? this.#modulation(0.15) : null,
    });
  }

  #joinByTwoPort(from: number, to: number): void {
    const domains = [this.nodes[from].domains[0], this.nodes[to].domains[0]];
    const kind = this.#pick(["TF", "GY"] as const);
    const twoPort = this.#add({
      kind,
      domains,
      matrix: [[this.#positive()]],
      modulation: this.#modulation(0.3),
    });
    this.bonds.push([
      { node: from, port: 0 },
      { node: twoPort, port: 0 },
    ]);
    this.bonds.push([
      { node: twoPort, port: 1 },
      { node: to, port: 0 },
    ]);
  }

  #join(a: number, b: number): void {
    const ends: [BondEnd, BondEnd] = [
      { node: a, port: 0 },
      { node: b, port: 0 },
    ];
    const isJunction = ({ node }: BondEnd) => this.nodes[node].matrix.length === 0;
    if (ends.every(isJunction) && this.#draw() < 0.5) ends.reverse();
    this.bonds.push(ends);
  }

  #modulation(share: number): string | null {
    if (this.#draw() >= share) return null;
    const which = this.#draw();
    if (which < 0.4) return "time";
    if (which < 0.7 || this.#wishes.tracks !== true) return this.#input(`w_${this.nodes.length}`);
    const track = { name: `way_${this.nodes.length}`, of: this.#pick(this.#junctions()) };
    this.tracks.push(track);
    return track.name;
  }

  #input(name: string): string {
    this.inputs.push({ name, value: this.#positive(), rate: 2 * this.#draw() - 1 });
    return name;
  }

  /** Symmetric, and definite, since each row's diagonal outweighs the rest of it. */
  #definite(size: number): number[][] {
    const rows = Array.from({ length: size }, () => new Array<number>(size).fill(0));
    for (let i = 0; i < size; i += 1) {
      rows[i][i] = 0.9 + this.#positive();
      for (let j = 0; j < i; j += 1) rows[i][j] = rows[j][i] = 0.8 * this.#draw() - 0.4;
    }
    return rows;
  }

  #add(node: Pick<RandomNode, "kind" | "domains" | "matrix"> & Partial<RandomNode>): number {
    const name = `x${node.kind}_${this.nodes.length}`;
    const plain = { inverse: false, energy: false, curved: false, modulation: null };
    this.nodes.push({ ...plain, ...node, name });
    return this.nodes.length - 1;
  }

  #junctions(): number[] {
    return this.nodes.flatMap(({ kind }, i) => (kind === "0" || kind === "1" ? [i] : []));
  }

  #positive(): number {
    return 0.4 + 2 * this.#draw();
  }

  #pick<T>(from: readonly T[]): T {
    return from[Math.floor(this.#draw() * from.length)];
  }
}
