import { chmodSync } from "node:fs";
import { reactRouter } from "@react-router/dev/vite";
import tailwindcss from "@tailwindcss/vite";
import { defineConfig, type UserConfig } from "vite";

/** Packages that run on the server alone. */
const SERVER_ONLY = [
  ...["sequelize", "pg", "isomorphic-git", "@node-rs/argon2"],
  ...["pino", "rate-limiter-flexible", "remix-auth", "remix-auth-form"],
];

/** The web application; `react-router build` and `react-router dev` ask for it. */
const application: UserConfig = {
  plugins: [tailwindcss(), reactRouter()],
  worker: { format: "es" },
  // Named here, so that the first visit to a page in development does not reload it when they are found.
  optimizeDeps: {
    include: [
      ...["react", "react-dom/client", "react-router", "react-router/dom"],
      ...["chevrotain", "diff", "elkjs/lib/elk-api.js", "elkjs/lib/elk-worker.min.js", "katex", "zod"],
      ...["monaco-editor/editor", "monaco-editor/features/*/register"],
      "monaco-editor/editor/contrib/suggest/browser/suggestController.js",
    ],
    exclude: SERVER_ONLY,
  },
  ssr: { external: SERVER_ONLY },
  server: { host: "127.0.0.1", watch: { ignored: ["**/.data/**", "**/build/**", "**/tests/**"] } },
};

/** The command line: one file that plain Node.js runs with no packages beside it. */
const commandLine: UserConfig = {
  publicDir: false,
  ssr: { noExternal: true },
  build: {
    ssr: "cli/main.ts",
    target: "node20",
    outDir: "build/cli",
    // Node.js reads the whole file at each start: half as much of it is a tenth of the time that a small check takes.
    minify: true,
    rolldownOptions: { output: { entryFileNames: "bondwright.mjs", codeSplitting: false } },
  },
  plugins: [
    {
      name: "executable",
      writeBundle: () => chmodSync(new URL("build/cli/bondwright.mjs", import.meta.url), 0o755),
    },
  ],
};

/** What `npm start` does with the database before it serves: migrations and the demo. */
const databaseSteps: UserConfig = {
  publicDir: false,
  build: {
    ssr: "db/make-ready.ts",
    target: "node20",
    outDir: "build/db",
    rolldownOptions: { output: { entryFileNames: "make-ready.mjs", codeSplitting: false } },
  },
};

export default defineConfig(({ mode }) => {
  if (mode === "cli") return commandLine;
  if (mode === "db") return databaseSteps;
  return application;
});
