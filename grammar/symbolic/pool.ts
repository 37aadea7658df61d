import { canonicalCall } from "./call.ts";
import { canonicalCompare, canonicalConnective, canonicalNot } from "./condition.ts";
import { type Curve, compareCurves, curveValue, degreeOf } from "./curve.ts";
import * as exact from "./exact.ts";
import type { Expr, FunctionName, Operator, Symbol, SymbolRole } from "./expression.ts";
import { Node } from "./node.ts";
import { canonicalPower } from "./power.ts";
import { canonicalProduct } from "./product.ts";
import { canonicalSum } from "./sum.ts";

const NO_ARGS: readonly Node[] = [];

/**
 * Where expressions live. Every constructor returns the canonical form (sums and products flat and collected,
 * constants folded, arguments in an order by names), and equal expressions are the same object. What counts as
 * equal holds for all real values of the symbols but for isolated points (x/x is 1, 0*x is 0).
 */
export class Pool {
  #buckets: (Node | null)[] = new Array<Node | null>(1024).fill(null);
  #count = 0;
  /** Symbols by role and name: the runtime keeps the hash of a name, so its own map is quicker than ours. */
  readonly #symbols = new Map<SymbolRole, Map<string, Node>>();
  readonly zero: Node = this.intern("number", NO_ARGS, 0, "");
  readonly one: Node = this.intern("number", NO_ARGS, 1, "");
  readonly minusOne: Node = this.intern("number", NO_ARGS, -1, "");

  /** By name: curves that were called, one object for equal data. */
  readonly #curves = new Map<string, Curve[]>();

  /** How many distinct expressions there are: a measure of work done, for limits. */
  get size(): number {
    return this.#count;
  }

  number(value: number): Expr {
    return this.intern("number", NO_ARGS, value === 0 ? 0 : value, "");
  }

  rational(numerator: number, denominator: number): Expr {
    return this.number(exact.divide(numerator, denominator));
  }

  symbol(role: SymbolRole, name: string): Symbol {
    let ofRole = this.#symbols.get(role);
    if (ofRole === undefined) {
      ofRole = new Map();
      this.#symbols.set(role, ofRole);
    }
    let symbol = ofRole.get(name);
    if (symbol === undefined) {
      symbol = new Node(this.#count, "symbol", NO_ARGS, 0, name, role, this.#count, null);
      this.#count += 1;
      ofRole.set(name, symbol);
    }
    return symbol as Node as Symbol;
  }

  sum(...args: Expr[] | [readonly Expr[]]): Expr {
    return canonicalSum(this, nodes(args));
  }

  product(...args: Expr[] | [readonly Expr[]]): Expr {
    return canonicalProduct(this, nodes(args));
  }

  negate(x: Expr): Expr {
    return canonicalProduct(this, [this.minusOne, x as Node]);
  }

  subtract(a: Expr, b: Expr): Expr {
    return canonicalSum(this, [a as Node, this.negate(b) as Node]);
  }

  divide(a: Expr, b: Expr): Expr {
    return canonicalProduct(this, [a as Node, canonicalPower(this, b as Node, this.minusOne)]);
  }

  power(base: Expr, exponent: Expr): Expr {
    return canonicalPower(this, base as Node, exponent as Node);
  }

  /** A square root is the power 1/2, never a call. */
  call(fn: FunctionName, ...args: Expr[]): Expr {
    return canonicalCall(this, fn, args as Node[]);
  }

  /** The curve at x, or its derivative of this order. */
  curve(curve: Curve, x: Expr, order = 0): Expr {
    if (order > degreeOf(curve)) return this.zero;
    if (x.op === "number") {
      const value = curveValue(curve, order, x.value);
      // As for functions: what is rounded stays, or sums would depend on the order in which they are added.
      if (exact.fractionOf(value) !== null) return this.number(value);
    }
    return this.intern("curve", [x as Node], order, curve.name, this.#known(curve));
  }

  where(condition: Expr, then: Expr, otherwise: Expr): Expr {
    if (condition.op === "number") return condition.value !== 0 ? then : otherwise;
    if (then === otherwise) return then;
    return this.intern("where", [condition as Node, then as Node, otherwise as Node], 0, "");
  }

  /** `op` is one of < <= > >= = !=; a truth value is 1 or 0. */
  compare(op: string, a: Expr, b: Expr): Expr {
    return canonicalCompare(this, op, a as Node, b as Node);
  }

  and(...args: Expr[]): Expr {
    return canonicalConnective(this, "and", args as Node[]);
  }

  or(...args: Expr[]): Expr {
    return canonicalConnective(this, "or", args as Node[]);
  }

  not(x: Expr): Expr {
    return canonicalNot(this, x as Node);
  }

  /** The one node of this structure. For the canonical constructors only: the arguments must be canonical. */
  intern(op: Operator, args: readonly Node[], value: number, name: string, curve: Curve | null = null): Node {
    const hash = hashOf(op, args, value, name);
    const mask = this.#buckets.length - 1;
    for (let node = this.#buckets[hash & mask]; node !== null; node = node.next) {
      if (node.hash === hash && same(node, op, args, value, name, curve)) return node;
    }
    if (this.#count > this.#buckets.length) this.#grow();
    const at = hash & (this.#buckets.length - 1);
    const node = new Node(this.#count, op, args, value, name, null, hash, this.#buckets[at], curve);
    this.#buckets[at] = node;
    this.#count += 1;
    return node;
  }

  #known(curve: Curve): Curve {
    const ofName = this.#curves.get(curve.name);
    if (ofName === undefined) {
      this.#curves.set(curve.name, [curve]);
      return curve;
    }
    const known = ofName.find((other) => compareCurves(other, curve) === 0);
    if (known === undefined) ofName.push(curve);
    return known ?? curve;
  }

  #grow(): void {
    const old = this.#buckets;
    const mask = old.length * 4 - 1;
    this.#buckets = new Array<Node | null>(mask + 1).fill(null);
    for (const head of old) {
      for (let node = head; node !== null; ) {
        const next: Node | null = node.next;
        node.next = this.#buckets[node.hash & mask];
        this.#buckets[node.hash & mask] = node;
        node = next;
      }
    }
  }
}

function nodes(args: Expr[] | [readonly Expr[]]): readonly Node[] {
  return (Array.isArray(args[0]) ? args[0] : args) as readonly Node[];
}

function same(
  node: Node,
  op: Operator,
  args: readonly Node[],
  value: number,
  name: string,
  curve: Curve | null,
): boolean {
  if (node.op !== op || node.name !== name || node.args.length !== args.length) return false;
  if (node.curve !== curve) return false;
  for (let i = 0; i < args.length; i += 1) if (node.args[i] !== args[i]) return false;
  return Object.is(node.value, value);
}

const bits = new DataView(new ArrayBuffer(8));

function hashOf(op: Operator, args: readonly Node[], value: number, name: string): number {
  let hash = op.length * 31 + op.charCodeAt(0);
  for (let i = 0; i < args.length; i += 1) hash = mix(hash, args[i].id);
  if (op === "number") {
    bits.setFloat64(0, value);
    hash = mix(mix(hash, bits.getInt32(0)), bits.getInt32(4));
  }
  for (let i = 0; i < name.length; i += 1) hash = (Math.imul(hash, 31) + name.charCodeAt(i)) | 0;
  // A last scramble, since the low bits alone choose the bucket.
  hash = Math.imul(hash ^ (hash >>> 16), 0x45d9f3b);
  return hash ^ (hash >>> 15);
}

function mix(hash: number, word: number): number {
  return Math.imul((hash << 5) ^ (hash >>> 27) ^ word, 0x9e3779b1);
}
