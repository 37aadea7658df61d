import { afterAll, describe, expect, it } from "vitest";
import { LinearDocument, RatesDocument } from "../../grammar/writing/linear-schemas.ts";
import { CLEAN, CONFLICT, DEPENDENT, Workplace } from "./run.ts";

const RUNAWAY = CLEAN.replace("R  damper = b", "R  damper e = b*f*abs(f)*(1 s/m)").replace(
  "order = 1",
  "order = 1",
);

const place = new Workplace()
  .write("clean.wright", CLEAN)
  .write("conflict.wright", CONFLICT)
  .write("dependent.wright", DEPENDENT)
  .write(
    "runaway.wright",
    RUNAWAY.replace("input F : N        -- push", "input F : N = -5 N        -- push").replace(
      "b = 12",
      "b = 0",
    ),
  )
  .write(
    "point.json",
    JSON.stringify({ states: { "body.p": 160 }, inputs: { F: 50 }, parameters: { b: 10 } }),
  )
  .write("unknown.json", JSON.stringify({ states: { "bodyp.p": 160 } }))
  .write("driven.json", JSON.stringify({ inputRates: { T: 1 }, inputs: { T: 26 } }));

afterAll(() => place.remove());

const linear = (...args: string[]) => {
  const { out, code } = place.run(["linear", "--format", "json", ...args]);
  return { document: LinearDocument.parse(JSON.parse(out)), code };
};

describe("linear", () => {
  it("gives the matrices, eigenvalues and gains at the equilibrium", () => {
    const { document, code } = linear("clean.wright");
    expect(code).toBe(0);
    expect(document).toMatchObject({
      system: "Cart",
      states: ["body.p"],
      inputs: ["F"],
      A: [[-12 / 80]],
      B: [[1]],
      symbolic: { A: [["-b/m"]], B: [["1"]] },
      eigenvalues: [{ re: -12 / 80, im: 0 }],
      stable: true,
      operatingPoint: { states: { "body.p": 0 }, inputs: { F: 0 }, equilibrium: true, note: null },
    });
  });

  it("takes another point, and says that it is no equilibrium", () => {
    const { document } = linear("clean.wright", "--at", "point.json");
    expect(document.A).toEqual([[-10 / 80]]);
    expect(document.operatingPoint).toMatchObject({ states: { "body.p": 160 }, equilibrium: false });
  });

  it("says where there is no equilibrium, and gives the start instead", () => {
    const { document, code } = linear("runaway.wright");
    expect(code).toBe(0);
    expect(document.operatingPoint.equilibrium).toBe(false);
    expect(document.findings.map(({ name }) => name)).toContain("no-equilibrium");
    expect(place.run(["linear", "runaway.wright"]).out).toContain(
      "At the start values, since there is no equilibrium",
    );
  });

  it("has empty arrays for a refused system", () => {
    const { document, code } = linear("conflict.wright");
    expect([code, document.A, document.eigenvalues, document.dcGain]).toEqual([1, [], [], []]);
  });

  it("prints modes, gains, reach and matrices", () => {
    const { out } = place.run(["linear", "clean.wright", "--sensitivity"]);
    expect(out).toContain("Modes: stable");
    expect(out).toMatch(/1 {2}-0\.15 +0\.023873 +1 +6\.667 +body\.p 100 %/);
    expect(out).toMatch(/ {2}m {2}mode 1: -1 %\n {2}b {2}mode 1: 1 %/);
  });
});

describe("rates", () => {
  it("gives rates, outputs and bond variables at a point", () => {
    const { out, code } = place.run(["rates", "clean.wright", "--format", "json", "--at", "point.json"]);
    const document = RatesDocument.parse(JSON.parse(out));
    expect(code).toBe(0);
    expect(document.rates).toEqual({ "body.p": 30 });
    expect(document.variables["rail->damper"]).toEqual({ e: 20, f: 2 });
  });

  it("gives the rate of a dependent store too", () => {
    const { out } = place.run(["rates", "dependent.wright", "--format", "json", "--at", "driven.json"]);
    const { rates } = RatesDocument.parse(JSON.parse(out));
    // J1 + n²·J2 = 13/9 kg·m²: 18 rad/s² at the motor, 6 at the drum.
    expect(rates).toEqual({ "J1.p": expect.closeTo(18, 12), "J2.p": expect.closeTo(24, 12) });
    expect(place.run(["rates", "dependent.wright"]).out).toContain("Rates\n  J1.p'  0 N*m\n");
  });

  it.each([
    ["unknown.json", "is body.p meant?"],
    ["missing.json", "there is no such file"],
  ])("%s is wrong use", (file, said) => {
    const { code, err } = place.run(["rates", "clean.wright", "--at", file]);
    expect([code, err.includes(said)]).toEqual([2, true]);
  });
});
