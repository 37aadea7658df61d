import { defineConfig } from "vitest/config";

const DATABASE = ["tests/{operations,faults}/**/*.test.ts"];
const COMMAND_LINE = ["tests/cli/**/*.test.ts"];
const BROWSER = ["tests/browser/**/*.test.ts"];

export default defineConfig({
  test: {
    projects: [
      {
        test: {
          name: "unit",
          include: ["tests/**/*.test.{ts,tsx}"],
          exclude: [...DATABASE, ...COMMAND_LINE, ...BROWSER],
          setupFiles: "tests/support/property-seed.ts",
        },
      },
      {
        test: {
          name: "command-line",
          include: COMMAND_LINE,
          globalSetup: "tests/support/command-line.setup.ts",
          testTimeout: 30_000,
        },
      },
      {
        test: {
          name: "database",
          include: DATABASE,
          globalSetup: "tests/support/database.setup.ts",
          testTimeout: 30_000,
        },
      },
      {
        // After all others and one at a time: a browser wants the machine to itself.
        test: {
          name: "browser",
          include: BROWSER,
          globalSetup: ["tests/support/database.setup.ts", "tests/support/browser.setup.ts"],
          testTimeout: 120_000,
          hookTimeout: 120_000,
          fileParallelism: false,
          sequence: { groupOrder: 1 },
        },
      },
    ],
  },
});
