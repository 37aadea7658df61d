import { readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { SourceText } from "../../grammar/source/text.ts";
import { parse } from "../../grammar/syntax/parse.ts";

/** Reads and parses every model below a folder and does nothing else: what a whole check is measured against. */
const [folder] = process.argv.slice(2);
for (const path of readdirSync(folder, { recursive: true, encoding: "utf8" })) {
  if (path.endsWith(".wright")) parse(new SourceText(path, readFileSync(join(folder, path), "utf8")));
}
