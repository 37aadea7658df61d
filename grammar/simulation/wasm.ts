import { interpreter, partsOf } from "./interpreter.ts";
import { type Instruction, type Machine, type Program, slotsOf, type TapeOperation } from "./program.ts";

/**
 * A program as WebAssembly, written byte by byte (WebAssembly Core Specification 1.0, sections 5.4 and 5.5): one
 * function without parameters over an own memory. Where bytes may not be compiled, or the program is larger than what
 * engines take as one function, the interpreter runs it.
 */
export function machineFor(program: Program): Machine {
  if (program.tape.length <= MOST_INSTRUCTIONS && typeof WebAssembly !== "undefined") {
    try {
      return wasmMachine(program);
    } catch (error) {
      // Refused by a content security policy, or out of memory: the interpreter gives the same numbers.
      if (!(error instanceof WebAssembly.CompileError || error instanceof RangeError)) throw error;
    }
  }
  return interpreter(program);
}

/** Engines limit locals to 50,000 a function. */
const MOST_INSTRUCTIONS = 45_000;

/** Longer chains on the operand stack are cut by keeping a value in a local. */
const DEEPEST = 32;

const PAGE = 65_536;
const F64 = 0x7c;
const FUNCTION_TYPE = 0x60;

export function wasmMachine(program: Program): Machine {
  const pages = Math.ceil((8 * Math.max(1, slotsOf(program))) / PAGE);
  const module = new WebAssembly.Module(moduleBytes(program, pages) as BufferSource);
  const f = Object.fromEntries(program.outside.map((fn, i) => [String(i), fn]));
  const instance = new WebAssembly.Instance(module, { f });
  const { memory, run } = instance.exports as { memory: WebAssembly.Memory; run: () => void };
  return { ...partsOf(new Float64Array(memory.buffer, 0, slotsOf(program)), program), run };
}

function moduleBytes(program: Program, pages: number): Uint8Array {
  const types = [
    [FUNCTION_TYPE, 0, 0],
    [FUNCTION_TYPE, 2, F64, F64, 1, F64],
  ];
  const imports = program.outside.map((_, i) => [...text("f"), ...text(String(i)), 0x00, 1]);
  const run = program.outside.length;
  const bytes = [
    [0x00, 0x61, 0x73, 0x6d, 0x01, 0x00, 0x00, 0x00],
    section(1, vector(types)),
    section(2, vector(imports)),
    section(3, vector([[0]])),
    section(5, vector([[0x00, ...unsigned(pages)]])),
    section(
      7,
      vector([
        [...text("memory"), 0x02, 0],
        [...text("run"), 0x00, ...unsigned(run)],
      ]),
    ),
    section(10, [...unsigned(1), ...sized(body(program))]),
  ];
  return Uint8Array.from(bytes.flat());
}

const OPCODES: Partial<Record<TapeOperation, number>> = {
  add: 0xa0,
  multiply: 0xa2,
  divide: 0xa3,
  negate: 0x9a,
  abs: 0x99,
  sqrt: 0x9f,
  min: 0xa4,
  max: 0xa5,
  "=": 0x61,
  "!=": 0x62,
  "<": 0x63,
  ">": 0x64,
  "<=": 0x65,
  ">=": 0x66,
};

const [LOCAL_GET, LOCAL_SET, F64_LOAD, F64_STORE] = [0x20, 0x21, 0x2b, 0x39];
const [I32_CONST, F64_CONST, CALL, SELECT, END] = [0x41, 0x44, 0x10, 0x1b, 0x0b];
const F64_FROM_I32 = 0xb7;

function operands({ op, a, b, c }: Instruction): readonly number[] {
  switch (op) {
    case "number":
    case "load":
      return [];
    case "negate":
    case "abs":
    case "sqrt":
      return [a];
    case "select":
      return [a, b, c];
    default:
      return [a, b];
  }
}

function body({ tape, results, variables, fixed }: Program): number[] {
  const kept = localsOf(tape, results);
  const code: number[] = [];
  let locals = 0;
  const local = new Map<number, number>();
  /** Puts a value on the stack; recursion ends at kept values, so it is never deep. */
  const push = (at: number): void => {
    const known = local.get(at);
    if (known !== undefined) code.push(LOCAL_GET, ...unsigned(known));
    else compute(at);
  };
  const compute = (at: number): void => {
    const instruction = tape[at];
    const { op, a, b, c, value } = instruction;
    if (op === "number") return void code.push(F64_CONST, ...double(value));
    if (op === "load") return void code.push(I32_CONST, ...signed(0), F64_LOAD, 3, ...unsigned(8 * a));
    if (op === "select") {
      push(b);
      push(c);
      push(a);
      return void code.push(F64_CONST, ...double(0), OPCODES["!="] as number, SELECT);
    }
    for (const operand of operands(instruction)) push(operand);
    if (op === "outside") return void code.push(CALL, ...unsigned(value));
    code.push(OPCODES[op] as number);
    if (op.length <= 2) code.push(F64_FROM_I32);
  };
  for (let at = 0; at < tape.length; at += 1) {
    if (!kept[at]) continue;
    compute(at);
    code.push(LOCAL_SET, ...unsigned(locals));
    local.set(at, locals);
    locals += 1;
  }
  const first = 8 * (variables.length + fixed.length);
  results.forEach((at, i) => {
    code.push(I32_CONST, ...signed(0));
    push(at);
    code.push(F64_STORE, 3, ...unsigned(first + 8 * i));
  });
  const declared = locals === 0 ? [0] : [1, ...unsigned(locals), F64];
  return declared.concat(code, END);
}

/** Which values go to a local: those used more than once, and every one on top of a deep chain. */
function localsOf(tape: readonly Instruction[], results: readonly number[]): boolean[] {
  const uses = new Int32Array(tape.length);
  for (const instruction of tape) for (const operand of operands(instruction)) uses[operand] += 1;
  for (const at of results) uses[at] += 1;
  const depth = new Int32Array(tape.length);
  return tape.map((instruction, at) => {
    if (instruction.op === "number") return false;
    depth[at] = 1 + Math.max(0, ...operands(instruction).map((operand) => depth[operand]));
    const keep = uses[at] > 1 || depth[at] >= DEEPEST;
    if (keep) depth[at] = 0;
    return keep;
  });
}

function section(id: number, content: readonly number[]): number[] {
  return [id].concat(sized(content));
}

function sized(content: readonly number[]): number[] {
  return unsigned(content.length).concat(content);
}

function vector(items: readonly (readonly number[])[]): number[] {
  return unsigned(items.length).concat(items.flat());
}

function text(ascii: string): number[] {
  return [ascii.length, ...[...ascii].map((letter) => letter.charCodeAt(0))];
}

/** LEB128. */
function unsigned(value: number): number[] {
  const bytes: number[] = [];
  let rest = value;
  do {
    bytes.push((rest & 0x7f) | (rest > 0x7f ? 0x80 : 0));
    rest >>>= 7;
  } while (rest > 0);
  return bytes;
}

/** Of small whole numbers below 64, which are all that is written signed here. */
function signed(value: number): number[] {
  return [value];
}

const scratch = new DataView(new ArrayBuffer(8));

function double(value: number): number[] {
  scratch.setFloat64(0, value, true);
  return Array.from({ length: 8 }, (_, i) => scratch.getUint8(i));
}
