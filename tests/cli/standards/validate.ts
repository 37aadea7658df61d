import { readFileSync } from "node:fs";
import { Ajv } from "ajv";
import { validateXML } from "xmllint-wasm";

const read = (name: string) => readFileSync(new URL(name, import.meta.url), "utf8");

/**
 * The schema of SARIF 2.1.0 (OASIS), in the copy that @microsoft/jest-sarif 1.0.0-beta.0 carries; it uses nothing in
 * which drafts 4 and 7 of JSON Schema differ.
 */
const { $schema: _, id: __, ...sarif } = JSON.parse(read("sarif-2.1.0.json"));

/** What a text is lacking to be SARIF; empty where it is. */
export const sarifMistakes = jsonMistakes(sarif);

export function jsonMistakes(schema: object): (document: unknown) => string[] {
  const formats = { uri: isUri, "uri-reference": isReference, "date-time": isMoment };
  const validate = new Ajv({ strict: false, allErrors: true, unicodeRegExp: false, formats }).compile(schema);
  return (document) => {
    validate(document);
    return (validate.errors ?? []).map(({ instancePath, message }) => `${instancePath} ${message}`);
  };
}

function isUri(text: string): boolean {
  return URL.canParse(text) && isReference(text);
}

/** RFC 3986: nothing but its own characters, and percent signs before two hexadecimal digits. */
function isReference(text: string): boolean {
  return /^(?:[\w.~:/?#[\]@!$&'()*+,;=-]|%[0-9a-f]{2})*$/i.test(text);
}

function isMoment(text: string): boolean {
  return /^\d{4}-\d{2}-\d{2}T\d{2}:\d{2}:\d{2}(\.\d+)?Z$/.test(text);
}

export async function junitMistakes(xml: string): Promise<string[]> {
  const { errors } = await validateXML({
    xml: [{ fileName: "report.xml", contents: xml }],
    schema: [{ fileName: "junit.xsd", contents: read("junit.xsd") }],
  });
  return errors.map(({ message }) => message);
}
