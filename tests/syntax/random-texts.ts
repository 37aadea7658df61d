import { readdirSync, readFileSync } from "node:fs";
import { fileURLToPath } from "node:url";

/** Numbers in [0, 1) from a seed (mulberry32, Tommy Ettinger 2017, public domain; recalled from memory). */
export function seeded(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), 1 | state);
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), 61 | mixed)) ^ mixed;
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4294967296;
  };
}

/** Every text of the notation that the project keeps: what mutations start from. */
export function knownTexts(): string[] {
  return [...textsIn("../cases/").values(), ...textsIn("../../models-demo/").values()];
}

/** The whole models among them, by the paths that they use each other by. */
export function knownModels(): Map<string, string> {
  const sets = ["boat-hoist", "davit-cylinder", "load-pin", "slewing-drive"];
  const models = [
    ...sets.map((set) => `../../models-demo/${set}/`),
    "../cases/causality/",
    "../cases/format/",
  ];
  return new Map(models.flatMap((folder) => [...textsIn(folder)]));
}

function textsIn(folder: string): Map<string, string> {
  const root = fileURLToPath(new URL(folder, import.meta.url));
  const names = readdirSync(root, { recursive: true, encoding: "utf8" }).filter((name) =>
    name.endsWith(".wright"),
  );
  return new Map(names.sort().map((name) => [name, readFileSync(`${root}${name}`, "utf8")]));
}

const SCRAPS = [
  ..."{}()[],.:=<>+-*/^%#\"'|&;!?@$~`\\_ \t\n\r",
  ..."−×→≤“”ω²°\u00a0\u200b\ufeff\ufffd\0",
  "\ud800",
  "->",
  "->|",
  "|->",
  "<-",
  "..",
  " -- ",
  "--",
  "##",
  "\r\n",
  "\n\n\n",
  " where ",
  " else ",
  " and ",
  " not ",
  " range ",
  " as ",
  " within ",
  "system X {\n",
  "trial t of X {\n",
  "repeat i = 1 .. 3 {\n",
  "notation 1\n",
  "1 2 0 ",
  "1 ",
  "0.",
  "1e",
  "9^9^9^9",
  "__proto__",
  "constructor",
  "e",
  "time",
  "3 m*x",
  "5%",
];

const TOKENS = /"[^"\n]*"|#[^\n]*|[\p{L}_][\p{L}\p{N}_]*|\d+(?:\.\d+)?(?:e[+-]?\d+)?|\s+|[-|<>=.]+|./gu;

/**
 * A text that is nearly notation: a stretch of a model with a few slips, or hardly any notation at all.
 * `wholes` is the share of whole models among them.
 */
export function randomText(random: () => number, known: readonly string[], wholes = 0.15): string {
  const pick = <T>(list: readonly T[]): T => list[Math.floor(random() * list.length)];
  if (random() < 0.05 * (1 - wholes)) {
    return Array.from({ length: Math.floor(random() * 60) }, () =>
      pick(random() < 0.5 ? SCRAPS : ["param", "R", "x", "3", " "]),
    ).join("");
  }
  let text = random() < wholes ? pick(known) : stretch(pick(known));
  for (let slips = Math.floor(random() * 5); slips > 0; slips -= 1) text = slip(text);
  return text;

  function stretch(whole: string): string {
    const lines = whole.split("\n");
    const from = Math.floor(random() * lines.length);
    const some = lines.slice(from, from + 4 + Math.floor(random() * 16)).join("\n");
    return random() < 0.5 ? `notation 1\nsystem S {\n${some}\n}\n` : some;
  }

  function slip(sound: string): string {
    const tokenwise = random() < 0.7;
    const parts = tokenwise ? (sound.match(TOKENS) ?? []) : sound.split(/(?<=\n)/);
    if (parts.length === 0) return pick(SCRAPS);
    const at = Math.floor(random() * parts.length);
    const other = Math.floor(random() * parts.length);
    switch (Math.floor(random() * 6)) {
      case 0:
        parts.splice(at, 1);
        break;
      case 1:
        parts.splice(at, 0, parts[at]);
        break;
      case 2:
        [parts[at], parts[other]] = [parts[other], parts[at]];
        break;
      case 3:
        parts.splice(at, 0, pick(SCRAPS));
        break;
      case 4:
        parts[at] = pick(SCRAPS);
        break;
      default: {
        const donor = pick(known).match(TOKENS) ?? [];
        const from = Math.floor(random() * donor.length);
        parts.splice(at, 1, ...donor.slice(from, from + 1 + Math.floor(random() * 8)));
      }
    }
    return parts.join("");
  }
}
