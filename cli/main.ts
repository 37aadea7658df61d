#!/usr/bin/env node
import { Argument, Command, CommanderError, Option } from "commander";
import { version } from "../package.json";
import { REPORT_FORMS } from "./output/forms.ts";
import { WrongUse } from "./wrong-use.ts";

/**
 * The command line. Exit codes: 0 clean, 1 findings at or over the asked severity or failed requirements,
 * 2 wrong use, an unreadable file or an internal fault. What a command does is loaded when it is asked for.
 */
const EXIT_HELP =
  "\nExit codes: 0 clean; 1 findings or failed requirements; 2 wrong use or an internal fault.";

const ROOT_HELP = `
Paths after \`use\` count from the root of the model set: the nearest parent folder that holds a
bondwright.json; without one the folder given, or the nearest folder above the file in which they
lead to files.`;

const POINT_HELP = `
A point is a JSON object with states, inputs, inputRates, parameters (each an object of names and
SI values) and time; what it leaves out is as the text has it.
`;

const color = () =>
  new Option("--color <when>", "colour the report").choices(["auto", "always", "never"]).default("auto");
const stdinName = () =>
  new Option(
    "--stdin-name <path>",
    "what standard input (-) is called, and where its `use` paths count from",
  ).default("stdin.wright");

const program = new Command("bondwright")
  .description("Checks bond-graph models, derives their equations, formats their text.")
  .version(version, "-V, --version")
  .addHelpText("after", EXIT_HELP)
  .exitOverride();

program
  .command("check")
  .description("say what is wrong with models, and whether they meet their requirements")
  .argument("[paths...]", "files, folders with all .wright files below, or - for standard input", ["."])
  .addOption(new Option("--format <form>", "form of the report").choices(REPORT_FORMS).default("text"))
  .addOption(
    new Option("--output <form=file>", "write the report to a file too; may be given several times")
      .argParser((given: string, before: string[]) => [...before, given])
      .default([], "none"),
  )
  .addOption(
    new Option("--fail-on <severity>", "least severity that fails")
      .choices(["error", "warning", "note"])
      .default("error"),
  )
  .option("--system <name>", "only this system")
  .option("--trial <name>", "only this trial and its system")
  .option("--quiet", "print only what fails")
  .option("--watch", "check again whenever a file changes, until interrupted")
  .option("--fingerprints", "print what a finding is known by in the set's settings")
  .addOption(color())
  .addOption(stdinName())
  .addHelpText("after", ROOT_HELP + EXIT_HELP)
  .action(async (paths, options) => {
    const { check } = await import("./commands/check.ts");
    process.exitCode = await check(paths, options);
  });

program
  .command("equations")
  .description("derive the state equations of a system")
  .argument("<file>", "a .wright file, or - for standard input")
  .option("--system <name>", "this system of the file (default: the last)")
  .addOption(
    new Option("--format <form>", "form of the report")
      .choices(["text", "json", "latex", "markdown"])
      .default("text"),
  )
  .option("--steps", "show how each equation came about")
  .addOption(
    new Option("--states <variables>", "show stores by their energy or co-energy variables")
      .choices(["energy", "co-energy"])
      .default("energy"),
  )
  .addOption(color())
  .addOption(stdinName())
  .addHelpText("after", ROOT_HELP + EXIT_HELP)
  .action(async (file, options) => {
    const { equations } = await import("./commands/equations.ts");
    process.exitCode = equations(file, options);
  });

program
  .command("linear")
  .description("linearise a system: operating point, modes, gains, transfer functions")
  .argument("<file>", "a .wright file, or - for standard input")
  .option("--system <name>", "this system of the file (default: the last)")
  .option("--at <point.json>", "at this point instead of the equilibrium")
  .option("--sensitivity", "tell how modes answer to parameters")
  .addOption(new Option("--format <form>", "form of the report").choices(["text", "json"]).default("text"))
  .addOption(color())
  .addOption(stdinName())
  .addHelpText("after", POINT_HELP + ROOT_HELP + EXIT_HELP)
  .action(async (file, options) => {
    const { linear } = await import("./commands/linear.ts");
    process.exitCode = linear(file, options);
  });

program
  .command("rates")
  .description("work out rates, outputs and bond variables of a system at a point")
  .argument("<file>", "a .wright file, or - for standard input")
  .option("--system <name>", "this system of the file (default: the last)")
  .option("--at <point.json>", "the point (default: the start values under the nominal inputs)")
  .addOption(new Option("--format <form>", "form of the report").choices(["text", "json"]).default("text"))
  .addOption(color())
  .addOption(stdinName())
  .addHelpText("after", POINT_HELP + ROOT_HELP + EXIT_HELP)
  .action(async (file, options) => {
    const { rates } = await import("./commands/rates.ts");
    process.exitCode = rates(file, options);
  });

program
  .command("run")
  .description("run the trials of a file: signals, energy, requirements")
  .argument("<file>", "a .wright file, or - for standard input")
  .option("--trial <name>", "this trial of the file (default: all)")
  .option("--system <name>", "only trials of this system")
  .addOption(
    new Option("--format <form>", "form of the report").choices(["text", "json", "csv"]).default("text"),
  )
  .addOption(color())
  .addOption(stdinName())
  .addHelpText("after", ROOT_HELP + EXIT_HELP)
  .action(async (file, options) => {
    const { run } = await import("./commands/run.ts");
    process.exitCode = run(file, options);
  });

program
  .command("format")
  .description("bring files into the notation's one layout")
  .argument("[paths...]", "files, folders with all .wright files below, or - for standard input", ["."])
  .option("--check", "change nothing; fail when a file would change")
  .option("--stdout", "print the formatted text instead of changing files")
  .addOption(stdinName())
  .addHelpText("after", EXIT_HELP)
  .action(async (paths, options) => {
    const { format } = await import("./commands/format.ts");
    process.exitCode = format(paths, options);
  });

program
  .command("explain")
  .description("tell what a finding means and how it is mended; without a name, list all findings")
  .argument("[name]", "name of a finding, as reports print it")
  .addOption(color())
  .action(async (name, options) => {
    const { explain } = await import("./commands/explain.ts");
    process.exitCode = explain(name, options);
  });

program
  .command("completion")
  .description("print what makes a shell complete this command line")
  .addArgument(new Argument("<shell>").choices(["bash", "zsh", "fish"]))
  .action(async (shell) => {
    const { completion } = await import("./commands/completion.ts");
    process.exitCode = completion(shell, program);
  });

// A reader that has seen enough (`| head`) is no fault of the report.
process.stdout.on("error", (error: NodeJS.ErrnoException) => {
  process.exit(error.code === "EPIPE" ? process.exitCode : 2);
});

try {
  await program.parseAsync();
} catch (error) {
  if (error instanceof CommanderError) process.exitCode = error.exitCode === 0 ? 0 : 2;
  else {
    const wrongUse = error instanceof WrongUse;
    const detail =
      error instanceof Error ? ((wrongUse ? error.message : error.stack) ?? error.message) : String(error);
    process.stderr.write(
      wrongUse ? `bondwright: ${detail}\n` : `bondwright: internal fault, please report it: ${detail}\n`,
    );
    process.exitCode = 2;
  }
}
