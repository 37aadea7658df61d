import { afterAll, describe, expect, it } from "vitest";
import { RunDocument } from "../../grammar/writing/run-schemas.ts";
import { CLEAN, CONFLICT, Workplace } from "./run.ts";

const MOVED = CLEAN.replace("  expect", "  output speed = rail.f -- speed of the cart\n\n  expect");

const PUSHED = `${MOVED}
## Pushed from rest.
trial pushed of Cart {
  drive F = step(1 s, 24 N)
  run for 100 s every 10 s
  expect final(speed) = 2 m/s within 1 %
}
`;

const place = new Workplace()
  .write("pushed.wright", PUSHED)
  .write("two.wright", `${PUSHED}\ntrial idle of Cart {\n  run for 1 s\n}\n`)
  .write("fails.wright", PUSHED.replace("= 2 m/s", "= 3 m/s"))
  .write("none.wright", CLEAN)
  .write(
    "refused.wright",
    `${CONFLICT}\ntrial any of ${/system (\w+)/.exec(CONFLICT)?.[1]} {\n  run for 1 s\n  expect energy_in > 0 J\n}\n`,
  );

afterAll(() => place.remove());

const document = (...args: string[]) => {
  const { out, code } = place.run(["run", "--format", "json", ...args]);
  return { run: RunDocument.parse(JSON.parse(out)), code };
};

describe("run", () => {
  it("gives samples, energy and requirements of a trial", () => {
    const { run, code } = document("pushed.wright");
    expect(code).toBe(0);
    expect(run).toMatchObject({ trial: "pushed", system: "Cart", status: "reached", runs: 1, others: [] });
    expect(run.time).toEqual([0, 10, 20, 30, 40, 50, 60, 70, 80, 90, 100]);
    expect(run.signals?.speed).toHaveLength(11);
    expect(run.signals?.speed[2]).toBeCloseTo(2 * (1 - Math.exp((-12 / 80) * 19)), 5);
    expect(run.expectations).toMatchObject([{ passed: true, wanted: "= 2 m/s within 1 %" }]);
    expect(run.energy?.closure).toBeLessThan(1e-6);
    expect(run.steps).toBeGreaterThan(5);
  });

  it("is 1 where a requirement is not met, with the measured value", () => {
    const { out, err, code } = place.run(["run", "fails.wright"]);
    expect(code).toBe(1);
    expect(out).toContain("not met  final(speed) = 3 m/s within 1 %  measured 2 m/s");
    expect(err).toContain("expectation-failed");
    const checked = place.run(["check", "fails.wright"]);
    expect(checked.code).toBe(1);
    expect(checked.out).toContain("is not met: measured 2 m/s, wanted = 3 m/s within 1 %");
  });

  it("writes one trial as a table", () => {
    const { out, code } = place.run(["run", "two.wright", "--trial", "pushed", "--format", "csv"]);
    expect(code).toBe(0);
    const rows = out.trimEnd().split("\r\n");
    expect(rows).toHaveLength(12);
    expect(rows[0]).toMatch(/^time \[s\],speed \[m\/s\]/);
    expect(place.run(["run", "two.wright", "--format", "csv"]).code).toBe(2);
  });

  it("runs all trials unless one is named", () => {
    const { run } = document("two.wright");
    expect(run.others.map(({ trial }) => trial)).toEqual(["idle"]);
    expect(document("two.wright", "--trial", "idle").run).toMatchObject({ trial: "idle", others: [] });
  });

  it("is wrong use where there is no such trial", () => {
    expect(place.run(["run", "none.wright"])).toMatchObject({ code: 2 });
    expect(place.run(["run", "two.wright", "--trial", "idel"]).err).toContain("it holds: pushed, idle");
  });

  it("never passes a trial of a refused system", () => {
    const { run, code } = document("refused.wright");
    expect(code).toBe(1);
    expect(run).toMatchObject({ status: "refused", expectations: [{ passed: false, measured: null }] });
  });
});
