// biome-ignore lint/suspicious/noControlCharactersInRegex: what XML 1.0 (production 2, Char) has no place for.
const FORBIDDEN = /[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]|\p{Surrogate}/gu;

const ENTITIES: Readonly<Record<string, string>> = {
  "&": "&amp;",
  "<": "&lt;",
  ">": "&gt;",
  '"': "&quot;",
  "\t": "&#9;",
  "\n": "&#10;",
  "\r": "&#13;",
};

/** Text between tags. */
export function xmlText(text: string): string {
  return text.replace(FORBIDDEN, "").replace(/[&<>\r]/g, (sign) => ENTITIES[sign]);
}

/** Attributes as they stand in a start tag, in the order given. */
export function xmlAttributes(values: Readonly<Record<string, string | number>>): string {
  return Object.entries(values)
    .map(([name, value]) => ` ${name}="${attribute(String(value))}"`)
    .join("");
}

function attribute(text: string): string {
  return text.replace(FORBIDDEN, "").replace(/[&<>"\t\n\r]/g, (sign) => ENTITIES[sign]);
}
