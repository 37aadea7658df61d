import type { Command, Option } from "commander";
import { FINDINGS } from "../../grammar/diagnostics/finding.ts";
import { print } from "../output/print.ts";

type Shell = "bash" | "zsh" | "fish";

/** What one subcommand takes, told by the commands themselves. */
interface Completed {
  readonly name: string;
  readonly about: string;
  readonly options: readonly Option[];
  /** Words that its argument may be; none where it is a path. */
  readonly words: readonly string[];
}

/** Prints the script that completes this command line in a shell. */
export function completion(shell: Shell, program: Command): number {
  const commands = program.commands.map((command): Completed => {
    const choices = command.registeredArguments.flatMap(({ argChoices }) => argChoices ?? []);
    return {
      name: command.name(),
      about: command.description(),
      options: command.options.filter(({ long }) => long !== undefined),
      words: command.name() === "explain" ? Object.keys(FINDINGS) : choices,
    };
  });
  print(SCRIPTS[shell](commands));
  return 0;
}

const SCRIPTS: Readonly<Record<Shell, (commands: readonly Completed[]) => string>> = {
  bash: bashScript,
  zsh: zshScript,
  fish: fishScript,
};

const names = (commands: readonly Completed[]) => commands.map(({ name }) => name).join(" ");

function bashScript(commands: readonly Completed[]): string {
  const values = commands.flatMap(({ name, options }) =>
    options.flatMap(({ long, argChoices }) =>
      argChoices === undefined ? [] : [`    "${name} ${long}") words="${argChoices.join(" ")}" ;;`],
    ),
  );
  return `# bash: source <(bondwright completion bash)
_bondwright() {
  local word="\${COMP_WORDS[COMP_CWORD]}" before="\${COMP_WORDS[COMP_CWORD-1]}" command="" words="" i
  for ((i = 1; i < COMP_CWORD; i++)); do
    [[ \${COMP_WORDS[i]} != -* ]] && { command="\${COMP_WORDS[i]}"; break; }
  done
  case "$command $before" in
${values.join("\n")}
  esac
  [[ -z $words ]] && case "$command $word" in
    " "*) words="${names(commands)}" ;;
${commands.map(optionCase).join("\n")}
${commands
  .filter(({ words }) => words.length > 0)
  .map(wordCase)
  .join("\n")}
  esac
  COMPREPLY=()
  [[ -n $words ]] && COMPREPLY=($(compgen -W "$words" -- "$word"))
}
complete -o default -F _bondwright bondwright
`;
}

const optionCase = ({ name, options }: Completed) =>
  `    "${name} -"*) words="${options.map(({ long }) => long).join(" ")}" ;;`;

const wordCase = ({ name, words }: Completed) => `    "${name} "*) words="${words.join(" ")}" ;;`;

function zshScript(commands: readonly Completed[]): string {
  const cases = commands.map(({ name, options, words }) => {
    const specs = options.map(({ long, description, required, argChoices }) => {
      const value = required
        ? `:value:${argChoices === undefined ? "_files" : `(${argChoices.join(" ")})`}`
        : "";
      return `'${long}[${plain(description)}]${value}'`;
    });
    const rest = words.length > 0 ? `'*:name:(${words.join(" ")})'` : "'*:file:_files'";
    return `    ${name}) _arguments ${[...specs, rest].join(" ")} ;;`;
  });
  return `#compdef bondwright
# zsh: source <(bondwright completion zsh)
_bondwright() {
  if ((CURRENT == 2)); then
    local -a commands=(${commands.map(({ name, about }) => `'${name}:${plain(about)}'`).join(" ")})
    _describe command commands
    return
  fi
  local command=$words[2]
  shift words
  ((CURRENT--))
  case $command in
${cases.join("\n")}
  esac
}
if [[ $funcstack[1] == _bondwright ]]; then _bondwright "$@"; else compdef _bondwright bondwright; fi
`;
}

function fishScript(commands: readonly Completed[]): string {
  const lines = commands.flatMap(({ name, about, options, words }) => {
    const here = `complete -c bondwright -n '__fish_seen_subcommand_from ${name}'`;
    return [
      `complete -c bondwright -f -n __fish_use_subcommand -a ${name} -d '${plain(about)}'`,
      ...(words.length > 0 ? [`${here} -f -a '${words.join(" ")}'`] : []),
      ...options.map(({ long, description, required, argChoices }) => {
        const value = argChoices !== undefined ? ` -x -a '${argChoices.join(" ")}'` : required ? " -r" : "";
        return `${here} -l ${long?.slice(2)}${value} -d '${plain(description)}'`;
      }),
    ];
  });
  return `# fish: bondwright completion fish | source\n${lines.join("\n")}\n`;
}

/** Nothing that a shell or its completion reads in a special way. */
function plain(description: string): string {
  return description
    .replaceAll("'", "\u2019")
    .replaceAll(": ", ", ")
    .replace(/["`[\]:\\$]/g, "");
}
