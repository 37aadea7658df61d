/** Columns of running text; code keeps its own lines. */
const WIDTH = 80;

const ROLES: Readonly<Record<string, string>> = {
  failing: "Fails:",
  mended: "Mended:",
  "failing later": "Fails, once a later version works it out:",
  "mended later": "Mended:",
};

/**
 * Our own Markdown (paragraphs, code between backquotes, fenced examples) for a terminal: text wrapped, examples
 * indented under a word that says what they are. A name may stand in a column left of the text.
 */
export function terminalText(markdown: string, name = ""): string {
  const parts = markdown.trim().split(/^(```[\s\S]*?^```)$/m);
  const blocks = parts.flatMap((part) =>
    part.startsWith("```")
      ? example(part)
      : part
          .trim()
          .split(/\n{2,}/)
          .filter((text) => text !== "")
          .map((text) => wrapped(text, name)),
  );
  return blocks.join("\n\n");
}

function example(fenced: string): string {
  const [head, ...lines] = fenced.split("\n");
  const code = lines.slice(0, -1).map((line) => (line === "" ? "" : `    ${line}`));
  return [ROLES[head.replace("```wright ", "")] ?? "Example:", ...code].join("\n");
}

function wrapped(text: string, name: string): string {
  const lines: string[] = [];
  let line = name;
  let empty = true;
  for (const word of text.split(/\s+/)) {
    if (!empty && line.length + 1 + word.length > WIDTH) {
      lines.push(line);
      line = " ".repeat(name.length);
      empty = true;
    }
    line += empty ? word : ` ${word}`;
    empty = false;
  }
  return [...lines, line].join("\n");
}
