import { type Finding, finding, type Report } from "../diagnostics/finding.ts";
import type { System } from "../syntax/tree.ts";
import { describe } from "./describe.ts";
import type { Draft } from "./draft.ts";
import { type SourceFile, spanIn } from "./files.ts";
import { mergingFix } from "./merging-fix.ts";
import { isJunction } from "./number-bonds.ts";
import { isValue, templateOf } from "./template.ts";
import { conditionExpressions, eachReference } from "./tree-walk.ts";

/** What a reviewer would ask about a system that is otherwise in order. */
export function systemNotes(draft: Draft, system: System, file: SourceFile): void {
  missingDescriptions(draft.report, system, file);
  unusedValues(draft.report, system, file);
  for (const bond of draft.bonds) {
    const { from, to, instance, wiring } = bond;
    if (!isJunction(from.type) || from.type !== to.type || instance.parent !== null) continue;
    if (from.instance !== instance || to.instance !== instance || wiring.as !== null) continue;
    draft.report(
      finding(
        "adjacent-junctions",
        bond.span,
        `\`${from.local}\` and \`${to.local}\` are both ${from.type}-junctions and could be one.`,
        { fix: mergingFix(system, bond) },
      ),
    );
  }
}

function missingDescriptions(report: Report, system: System, file: SourceFile): void {
  if (describe(system) === null) {
    report(
      finding(
        "missing-description",
        spanIn(file, system.name.range),
        `System \`${system.name.text}\` has no description.`,
      ),
    );
  }
  for (const statement of templateOf(system).statements) {
    const { kind } = statement;
    if ((kind === "param" || kind === "input" || kind === "output") && describe(statement) === null) {
      const span = spanIn(file, statement.name.range);
      report(finding("missing-description", span, `\`${statement.name.text}\` has no description.`));
    }
  }
}

function unusedValues(report: Report, system: System, file: SourceFile): void {
  const { statements, uses } = templateOf(system);
  if (statements.some(({ kind }) => kind === "unreadable")) return;
  let inTrials: Set<string> | null = null;
  for (const statement of statements) {
    if (!isValue(statement) || statement.kind === "output" || statement.kind === "track") continue;
    const name = statement.name.text;
    if (uses.has(name)) continue;
    inTrials ??= trialUses(system, file);
    if (inTrials.has(name)) continue;
    report(finding("unused-name", spanIn(file, statement.name.range), `Nothing uses \`${name}\`.`));
  }
}

/** What the trials of a system speak of: a let may be there only to be recorded. */
function trialUses(system: System, file: SourceFile): Set<string> {
  const uses = new Set<string>();
  for (const item of file.tree.items) {
    if (item.kind !== "trial" || item.system.text !== system.name.text) continue;
    for (const statement of item.body) {
      const expressions =
        statement.kind === "expect"
          ? conditionExpressions(statement.condition)
          : statement.kind === "record"
            ? statement.signals
            : statement.kind === "compare"
              ? [statement.signal]
              : [];
      for (const expression of expressions)
        eachReference(expression, ({ path }) => uses.add(path[0].name.text));
    }
  }
  return uses;
}

/** Functions and curves that no system and no function of their own file calls; a file of functions is a library. */
export function unusedFunctions(file: SourceFile): Finding[] {
  const systems = file.tree.items.filter((item) => item.kind === "system");
  if (systems.length === 0) return [];
  const called = new Set<string>();
  for (const system of systems) for (const name of templateOf(system).calls) called.add(name);
  for (const item of file.tree.items) {
    if (item.kind === "function")
      eachReference(
        item.body,
        () => {},
        (call) => called.add(call.name.text),
      );
  }
  return file.tree.items.flatMap((item) => {
    if ((item.kind !== "function" && item.kind !== "curve") || called.has(item.name.text)) return [];
    return [
      finding(
        "unused-name",
        spanIn(file, item.name.range),
        `Nothing in this file calls \`${item.name.text}\`.`,
      ),
    ];
  });
}
