import { describe, expect, it } from "vitest";
import { readColumns } from "../../grammar/source/table.ts";
import { SourceText } from "../../grammar/source/text.ts";

const read = (text: string, names: string[] = []) =>
  readColumns(new SourceText("t.csv", text), names, 2, 1000);

describe("columns of numbers", () => {
  it("are found by the names in the first line, quoted or not", () => {
    expect(
      read('\uFEFF"t","u, volt","say ""hi"""\r\n1,2,3\r\n\r\n4,5e-3,6\r\n', ["u, volt", "t"]),
    ).toMatchObject({
      values: [
        [2, 5e-3],
        [1, 4],
      ],
    });
    expect(read('a,"say ""hi"""\n1,2', ['say "hi"'])).toMatchObject({ values: [[2]] });
  });

  it("are the first ones where none is named, with or without a line of names", () => {
    expect(read("1,2\n3,4")).toMatchObject({
      values: [
        [1, 3],
        [2, 4],
      ],
    });
    expect(read("x,y\n1,2\n3,4")).toMatchObject({
      values: [
        [1, 3],
        [2, 4],
      ],
    });
  });

  it("may have commas as decimal points where something else parts them", () => {
    expect(read("x;y\n0,5;-1,25e3")).toMatchObject({ values: [[0.5], [-1250]] });
    expect(read("x\ty\n1\t2")).toMatchObject({ values: [[1], [2]] });
  });

  it("tell what is wrong, and where", () => {
    expect(read("x,y\n1,2", ["z"])).toEqual({ kind: "no-column", wanted: "z", known: ["x", "y"] });
    expect(read("x,y\n1,2\n3,4 mm\n")).toEqual({
      kind: "no-number",
      text: "4 mm",
      range: { start: 10, end: 14 },
    });
    expect(read("x,y\n1\n")).toMatchObject({ kind: "no-number", text: "" });
    expect(read("x,y\n1,0x10\n")).toMatchObject({ kind: "no-number", text: "0x10" });
    expect(readColumns(new SourceText("t.csv", "1,2\n3,4\n5,6"), [], 2, 2)).toEqual({
      kind: "too-long",
      rows: 2,
    });
    expect(read("")).toMatchObject({ kind: "columns", values: [[], []] });
  });

  it("take time in proportion to the text, a quote that never ends included", () => {
    const rows = 200_000;
    expect(readColumns(new SourceText("t.csv", "1,2\n".repeat(rows)), [], 2, rows)).toMatchObject({
      kind: "columns",
    });
    expect(read(`"${"a\n".repeat(100_000)}`)).toMatchObject({ kind: "columns" });
  });
});
