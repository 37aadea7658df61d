import { type Machine, type Program, slotsOf, type TapeOperation } from "./program.ts";

const ORDER: readonly TapeOperation[] = [
  "number",
  "load",
  "add",
  "multiply",
  "divide",
  "negate",
  "abs",
  "sqrt",
  "min",
  "max",
  "<",
  "<=",
  ">",
  ">=",
  "=",
  "!=",
  "select",
  "outside",
];

/** Follows the tape: the reference for compiled code, and what runs where WebAssembly may not. */
export function interpreter(program: Program): Machine {
  const memory = new Float64Array(slotsOf(program));
  const { tape, results, outside } = program;
  const first = program.variables.length + program.fixed.length;
  const values = new Float64Array(tape.length);
  const code = Int32Array.from(tape, ({ op }) => ORDER.indexOf(op));
  const [a, b, c] = (["a", "b", "c"] as const).map((key) => Int32Array.from(tape, (one) => one[key]));
  const number = Float64Array.from(tape, ({ value }) => value);
  function run(): void {
    for (let i = 0; i < code.length; i += 1) {
      const x = values[a[i]];
      const y = values[b[i]];
      switch (code[i]) {
        case 0:
          values[i] = number[i];
          break;
        case 1:
          values[i] = memory[a[i]];
          break;
        case 2:
          values[i] = x + y;
          break;
        case 3:
          values[i] = x * y;
          break;
        case 4:
          values[i] = x / y;
          break;
        case 5:
          values[i] = -x;
          break;
        case 6:
          values[i] = Math.abs(x);
          break;
        case 7:
          values[i] = Math.sqrt(x);
          break;
        case 8:
          values[i] = Math.min(x, y);
          break;
        case 9:
          values[i] = Math.max(x, y);
          break;
        case 10:
          values[i] = x < y ? 1 : 0;
          break;
        case 11:
          values[i] = x <= y ? 1 : 0;
          break;
        case 12:
          values[i] = x > y ? 1 : 0;
          break;
        case 13:
          values[i] = x >= y ? 1 : 0;
          break;
        case 14:
          values[i] = x === y ? 1 : 0;
          break;
        case 15:
          values[i] = x !== y ? 1 : 0;
          break;
        case 16:
          values[i] = x !== 0 ? y : values[c[i]];
          break;
        default:
          values[i] = outside[number[i]](x, y);
      }
    }
    for (let i = 0; i < results.length; i += 1) memory[first + i] = values[results[i]];
  }
  return { ...partsOf(memory, program), run };
}

export function partsOf(memory: Float64Array, { variables, fixed }: Program) {
  const [first, second] = [variables.length, variables.length + fixed.length];
  return {
    variables: memory.subarray(0, first),
    fixed: memory.subarray(first, second),
    results: memory.subarray(second),
  };
}
