import { Marked, type Tokens } from "marked";
import { isFindingName } from "../../grammar/diagnostics/pages.ts";
import { escapeHtml } from "./escape-html.ts";
import { notationHtml } from "./highlight.server.ts";
import { TABLES } from "./tables.server.ts";

export interface Heading {
  readonly id: string;
  readonly title: string;
  readonly depth: number;
}

export interface Rendered {
  readonly html: string;
  readonly headings: readonly Heading[];
}

/** What an example is, said above it; other blocks of notation stand without a word. */
const CAPTIONS: Readonly<Record<string, string>> = {
  "wright failing": "Fails",
  "wright mended": "Mended",
  "wright failing later": "Fails, once a later version works it out",
  "wright mended later": "Mended",
};

/**
 * Our own Markdown as HTML: headings with anchors and one step lower, since the page has its own; notation
 * highlighted; names of findings lead to their pages; tables ruled; what is wider than a page scrolls by itself. The text is ours and static.
 */
export function renderMarkdown(text: string): Rendered {
  const headings: Heading[] = [];
  const marked = new Marked({
    renderer: {
      heading({ tokens, depth }: Tokens.Heading) {
        const inner = this.parser.parseInline(tokens);
        const title = this.parser.parseInline(tokens, this.parser.textRenderer);
        const id = slug(title);
        headings.push({ id, title, depth: depth + 1 });
        return `<h${depth + 1} id="${id}"><a class="anchor" href="#${id}">${inner}</a></h${depth + 1}>\n`;
      },
      code({ text: code, lang }: Tokens.Code) {
        const caption = CAPTIONS[lang ?? ""];
        const body = `<pre class="notation-text" tabindex="0">${notationHtml(code)}</pre>`;
        return caption === undefined
          ? `${body}\n`
          : `<figure class="example"><figcaption>${caption}</figcaption>${body}</figure>\n`;
      },
      table({ header, rows }: Tokens.Table) {
        const cell = (name: string) => (one: Tokens.TableCell) =>
          `<${name}>${this.parser.parseInline(one.tokens)}</${name}>`;
        const body = rows.map((row) => `<tr>${row.map(cell("td")).join("")}</tr>`).join("\n");
        const head = header.map(cell("th")).join("");
        return `<div class="wide" tabindex="0"><table class="ruled"><thead><tr>${head}</tr></thead><tbody>\n${body}\n</tbody></table></div>\n`;
      },
      codespan({ text: code }: Tokens.Codespan) {
        const html = `<code>${escapeHtml(code)}</code>`;
        return isFindingName(code) ? `<a href="/reference/findings/${code}">${html}</a>` : html;
      },
      html({ text: html }: Tokens.HTML | Tokens.Tag) {
        return escapeHtml(html);
      },
    },
  });
  const html = marked.parse(withTables(text), { async: false });
  return { html, headings };
}

function withTables(text: string): string {
  return text.replace(/^<!-- (.*) -->$/gm, (_, name: string) => {
    const table = TABLES[name];
    if (table === undefined) throw new Error(`The reference has no table of ${name}`);
    return table();
  });
}

function slug(title: string): string {
  return title
    .toLowerCase()
    .replace(/[^\p{L}\p{N}]+/gu, "-")
    .replace(/^-|-$/g, "");
}
