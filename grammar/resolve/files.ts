import { type Finding, finding, type Report } from "../diagnostics/finding.ts";
import { nearest } from "../diagnostics/nearest.ts";
import { pathFrom } from "../source/released.ts";
import type { Range, Span } from "../source/span.ts";
import type { FileSet, SourceText } from "../source/text.ts";
import type {
  CurveDeclaration,
  File,
  FileItem,
  FunctionDeclaration,
  Identifier,
  System,
  Use,
  ValueDeclaration,
} from "../syntax/tree.ts";
import { parseUnit } from "../units/parse-unit.ts";
import { DOMAINS, declaredDomain } from "./domains.ts";
import type { Domain } from "./graph.ts";
import { missingFile } from "./missing-file.ts";

export type Parse = (source: SourceText) => { readonly tree: File; readonly findings: readonly Finding[] };

/** A declaration and the file in which it stands, whose names it sees. */
export interface Placed<T> {
  readonly file: SourceFile;
  readonly item: T;
}

/** What one name at file level can be: three name spaces, since each is used in a place of its own. */
export interface Names {
  readonly systems: Map<string, Placed<System>>;
  readonly values: Map<string, Placed<ValueDeclaration | FunctionDeclaration | CurveDeclaration>>;
  readonly domains: Map<string, Domain>;
}

/** A file of the set with what it declares and what it sees through `use`. */
export interface SourceFile {
  readonly path: string;
  readonly source: SourceText;
  /** The set it stands in: where the data is that its curves name. */
  readonly set: FileSet;
  readonly tree: File;
  readonly syntaxErrors: readonly Finding[];
  readonly declared: Names;
  /** Declared here or brought in; filled by `Library.open`. */
  readonly visible: Names;
  /** Names that a `use` should have brought but could not; `true`: any name. They are not reported again. */
  missing: Set<string> | true;
}

export function spanIn(file: SourceFile, range: Range): Span {
  return { file: file.path, start: range.start, end: range.end };
}

/** The files that a check reaches, each read once. */
export class Library {
  readonly #set: FileSet;
  readonly #parse: Parse;
  readonly #report: Report;
  readonly #files = new Map<string, SourceFile | null>();

  constructor(set: FileSet, parse: Parse, report: Report) {
    this.#set = set;
    this.#parse = parse;
    this.#report = report;
  }

  /** The file with all that it reaches through `use`, circles and missing files reported. */
  open(path: string): SourceFile | null {
    const root = this.#read(path);
    if (root === null) return null;
    const state = new Map<SourceFile, "open" | "done">([[root, "open"]]);
    const stack: { file: SourceFile; uses: Use[]; next: number }[] = [
      { file: root, uses: root.tree.items.filter((item) => item.kind === "use"), next: 0 },
    ];
    while (stack.length > 0) {
      const top = stack[stack.length - 1];
      if (top.next === top.uses.length) {
        state.set(top.file, "done");
        stack.pop();
        continue;
      }
      const use = top.uses[top.next];
      top.next += 1;
      const used = this.#used(top.file, use);
      if (used === null) {
        if (use.names === null) top.file.missing = true;
        else if (top.file.missing !== true) for (const name of use.names) top.file.missing.add(name.text);
        continue;
      }
      if (state.get(used) === "open") {
        this.#reportCycle(
          stack.map(({ file }) => file),
          top.file,
          use,
          used,
        );
        if (used === top.file) continue;
      } else if (state.get(used) === undefined) {
        state.set(used, "open");
        stack.push({ file: used, uses: used.tree.items.filter((item) => item.kind === "use"), next: 0 });
      }
      this.#bring(top.file, use, used);
    }
    return root;
  }

  #used(file: SourceFile, use: Use): SourceFile | null {
    const used = this.#read(pathFrom(file.path, use.path.value));
    if (used === null)
      this.#report(missingFile(this.#set, file.path, use.path.value, spanIn(file, use.path.range)));
    return used;
  }

  #bring(file: SourceFile, use: Use, used: SourceFile): void {
    const wanted = use.names;
    if (wanted === null) {
      for (const [name, system] of used.declared.systems)
        this.#add(file.visible.systems, name, system, file, use);
      for (const [name, value] of used.declared.values)
        this.#add(file.visible.values, name, value, file, use);
      for (const [name, domain] of used.declared.domains) {
        if (!file.visible.domains.has(name)) file.visible.domains.set(name, domain);
      }
      return;
    }
    for (const { text: name, range } of wanted) {
      const system = used.declared.systems.get(name);
      const value = used.declared.values.get(name);
      const domain = used.declared.domains.get(name);
      if (system !== undefined) this.#add(file.visible.systems, name, system, file, use);
      if (value !== undefined) this.#add(file.visible.values, name, value, file, use);
      if (domain !== undefined) file.visible.domains.set(name, domain);
      if (system !== undefined || value !== undefined || domain !== undefined) continue;
      if (file.missing !== true) file.missing.add(name);
      if (used.syntaxErrors.length > 0) continue;
      const { systems, values, domains } = used.declared;
      const meant = nearest(name, [...systems.keys(), ...values.keys(), ...domains.keys()]);
      const span = spanIn(file, range);
      this.#report(
        finding(
          "unknown-name",
          span,
          `${used.path} declares no \`${name}\`.${meant === null ? "" : ` Is \`${meant}\` meant?`}`,
          {
            fix: meant === null ? undefined : { title: `Use ${meant}`, edits: [{ span, text: meant }] },
          },
        ),
      );
    }
  }

  #add<T extends { readonly name: Identifier }>(
    names: Map<string, Placed<T>>,
    name: string,
    placed: Placed<T>,
    file: SourceFile,
    use: Use,
  ): void {
    const other = names.get(name);
    if (other === undefined) names.set(name, placed);
    else if (other.item !== placed.item) {
      this.#report(
        finding(
          "duplicate-name",
          spanIn(file, use.range),
          `This brings in \`${name}\` from ${placed.file.path}, but \`${name}\` is declared in ${other.file.path} too.`,
          {
            facts: [{ message: "declared here", span: spanIn(other.file, other.item.name.range) }],
          },
        ),
      );
    }
  }

  #reportCycle(open: readonly SourceFile[], file: SourceFile, use: Use, used: SourceFile): void {
    const circle = [...open.slice(open.indexOf(used)).map(({ path }) => path), used.path];
    this.#report(
      finding(
        "import-cycle",
        spanIn(file, use.path.range),
        `Files bring each other in by \`use\` in a circle: ${circle.join(" → ")}.`,
      ),
    );
  }

  #read(path: string): SourceFile | null {
    const known = this.#files.get(path);
    if (known !== undefined) return known;
    const source = this.#set.get(path);
    let file: SourceFile | null = null;
    if (source !== undefined) {
      const { tree, findings } = this.#parse(source);
      file = {
        path,
        source,
        set: this.#set,
        tree,
        syntaxErrors: findings.filter(({ severity }) => severity === "error"),
        declared: { systems: new Map(), values: new Map(), domains: new Map() },
        visible: { systems: new Map(), values: new Map(), domains: new Map() },
        missing: new Set(),
      };
      for (const item of tree.items) this.#declare(file, item);
      for (const [name, system] of file.declared.systems) file.visible.systems.set(name, system);
      for (const [name, value] of file.declared.values) file.visible.values.set(name, value);
      for (const [name, domain] of file.declared.domains) file.visible.domains.set(name, domain);
    }
    this.#files.set(path, file);
    return file;
  }

  #declare(file: SourceFile, item: FileItem): void {
    switch (item.kind) {
      case "system":
        this.#place(file, file.declared.systems, item);
        return;
      case "const":
      case "param":
      case "function":
      case "curve":
        this.#place(file, file.declared.values, item);
        return;
      case "unreadable":
        // It may have been a `use` of anything.
        if (item.declares === null) file.missing = true;
        else if (file.missing !== true) file.missing.add(item.declares.name.text);
        return;
      case "domain": {
        const { name } = item;
        if (DOMAINS.has(name.text) || file.declared.domains.has(name.text)) {
          this.#report(
            finding(
              "duplicate-name",
              spanIn(file, name.range),
              `A domain \`${name.text}\` is there already.`,
            ),
          );
          return;
        }
        const effort = parseUnit(item.effort.text);
        const flow = parseUnit(item.flow.text);
        for (const [unit, written] of [
          [effort, item.effort],
          [flow, item.flow],
        ] as const) {
          if (unit === null) {
            this.#report(
              finding("unknown-unit", spanIn(file, written.range), `\`${written.text}\` is not a unit.`),
            );
          }
        }
        if (effort !== null && flow !== null) {
          file.declared.domains.set(name.text, declaredDomain(name.text, effort, flow, item.pseudo));
        } else file.missing = true;
      }
    }
  }

  #place<T extends { readonly name: Identifier }>(
    file: SourceFile,
    names: Map<string, Placed<T>>,
    item: T,
  ): void {
    const { text, range } = item.name;
    const other = names.get(text);
    if (other === undefined) names.set(text, { file, item });
    else {
      this.#report(
        finding("duplicate-name", spanIn(file, range), `\`${text}\` is declared twice in this file.`, {
          facts: [{ message: "declared here first", span: spanIn(file, other.item.name.range) }],
        }),
      );
    }
  }
}
