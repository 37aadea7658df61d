import { FINDINGS, type FindingName, type Severity } from "../../grammar/diagnostics/finding.ts";
import { pageOf } from "../../grammar/diagnostics/pages.ts";
import { DOMAINS } from "../../grammar/resolve/domains.ts";
import { FUNCTION_NAMES, RESERVED_NAMES } from "../../grammar/syntax/words.ts";
import { PREFIXES, UNITS } from "../../grammar/units/table.ts";
import { unitText } from "../../grammar/units/unit-text.ts";

/** The tables of the reference that the core itself holds, as Markdown; a page asks for one by `<!-- units -->`. */
export const TABLES: Readonly<Record<string, () => string>> = {
  "reserved names": () => inline(RESERVED_NAMES),
  functions: () => inline(FUNCTION_NAMES),
  domains,
  units,
  prefixes,
  findings,
};

function inline(words: Iterable<string>): string {
  return [...words].map(code).join(" ");
}

function table(head: readonly string[], rows: readonly (readonly string[])[]): string {
  const line = (cells: readonly string[]) => `| ${cells.join(" | ")} |`;
  return [line(head), line(head.map(() => "---")), ...rows.map(line)].join("\n");
}

function domains(): string {
  const rows = [...DOMAINS.values()].map(({ name, effort, flow, momentum, displacement, pseudo }) => [
    `${code(name)}${pseudo ? " (pseudo)" : ""}`,
    ...[effort, flow, momentum, displacement].map(({ text }) => code(text)),
  ]);
  return table(["domain", "effort e", "flow f", "momentum p", "displacement q"], rows);
}

function units(): string {
  const rows = [...UNITS].map(([name, { mantissa, exponent, dimension, prefixes: prefixed, offset }]) => {
    const factor = `${factorText(mantissa, exponent)} ${unitText(dimension)}`.replace(/ 1$/, "");
    const zero = offset === undefined ? "" : `, counted from ${code(`${offset} K`)}`;
    return [code(name), `${code(factor)}${zero}`, prefixed ? "yes" : ""];
  });
  return table(["unit", "in SI", "prefixes"], rows);
}

/** Fifteen digits tell every factor of the table but the last place of a quotient. */
function factorText(mantissa: number, exponent: number): string {
  return String(Number((mantissa * 10 ** exponent).toPrecision(15)));
}

function prefixes(): string {
  const byPower = new Map<number, string[]>();
  for (const [prefix, power] of PREFIXES) byPower.set(power, [...(byPower.get(power) ?? []), prefix]);
  const rows = [...byPower]
    .sort(([a], [b]) => b - a)
    .map(([power, written]) => [
      [...new Set(written.map((one) => one.normalize("NFKC")))].map(code).join(" or "),
      code(`1e${power}`),
    ]);
  return table(["prefix", "factor"], rows);
}

function code(text: string): string {
  return `\`${text}\``;
}

const TITLES: Record<Severity, string> = { error: "Errors", warning: "Warnings", note: "Notes" };

function findings(): string {
  const names = Object.keys(FINDINGS) as FindingName[];
  return (["error", "warning", "note"] as const)
    .map((severity) => {
      const rows = names
        .filter((name) => FINDINGS[name] === severity)
        .map((name) => [code(name), (pageOf(name)?.what ?? "").replaceAll("|", "\\|")]);
      return `## ${TITLES[severity]}\n\n${table(["name", "what it says"], rows)}`;
    })
    .join("\n\n");
}
