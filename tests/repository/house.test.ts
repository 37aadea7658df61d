import { describe, expect, test } from "vitest";
import { read, shippedFiles, sourceFiles, trackedFiles } from "./tracked.ts";

const TOP_LEVEL = [
  ...["app", "cli", "db", "grammar", "models-demo", "public", "tests"],
  ...["package.json", "package-lock.json", "tsconfig.json", "biome.json"],
  ...["vite.config.ts", "vitest.config.ts", "react-router.config.ts"],
  ...["README.md", "DEVELOPERS.md", "CHANGELOG.md", "LICENSE", ".ci", ".gitignore"],
];

describe("the house", () => {
  test("has only the agreed entries at its top level", () => {
    const found = new Set(trackedFiles.map((path) => path.split("/")[0] as string));
    expect([...found].filter((entry) => !TOP_LEVEL.includes(entry))).toEqual([]);
  });

  test("has no room for odds and ends", () => {
    const odd = /(^|\/)(utils?|misc|common|helpers?)(\.[^/]*)?(\/|$)/i;
    expect(trackedFiles.filter((path) => odd.test(path))).toEqual([]);
  });

  test("has no file over 400 lines", () => {
    const code = sourceFiles.filter((path) => /^(app|cli|db|grammar)\//.test(path));
    const long = code.map((path) => ({ path, lines: read(path).split("\n").length - 1 }));
    expect(long.filter(({ lines }) => lines > 400)).toEqual([]);
  });

  test("ships nothing that is fetched from an address outside", () => {
    const outside =
      /(src|href|import|url|fetch)\W{1,6}https?:\/\/(?!127\.0\.0\.1|localhost)|\b(cdn|unpkg|jsdelivr|googleapis|gstatic)\b\./i;
    const text = shippedFiles.filter((path) => /\.(ts|tsx|mjs|css|html|md|svg|json)$/.test(path));
    expect(text.filter((path) => outside.test(read(path)))).toEqual([]);
  });

  test("has no test that is skipped, alone or yet to be written", () => {
    const tests = sourceFiles.filter((path) => path.endsWith(".test.ts"));
    expect(tests.filter((path) => /\b(it|test|describe)\.(skip|only|todo)\(/.test(read(path)))).toEqual([]);
  });
});

describe("the packages", () => {
  const { dependencies, devDependencies } = JSON.parse(read("package.json"));

  test("are pinned to one version each", () => {
    const all: [string, string][] = Object.entries({ ...dependencies, ...devDependencies });
    expect(all.filter(([, version]) => !/^\d+\.\d+\.\d+$/.test(version))).toEqual([]);
  });

  test("of React Router are all of one version", () => {
    const all: [string, string][] = Object.entries({ ...dependencies, ...devDependencies });
    const versions = all.filter(([name]) => /^(react-router|@react-router\/.*)$/.test(name));
    expect(new Set(versions.map(([, version]) => version)).size).toBe(1);
  });
});
