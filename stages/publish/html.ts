/** Text that is already HTML; everything else is escaped on its way in. */
export interface Markup {
  readonly markup: string;
}

export type Content = string | number | Markup | readonly Content[];

const ENTITIES: Readonly<Record<string, string>> = {
  "&": "&amp;",
  "<": "&lt;",
  ">": "&gt;",
  '"': "&quot;",
  "'": "&#39;",
};

/** Text for an element or a quoted attribute, in HTML and SVG. */
export function escapeText(text: string): string {
  return text.replace(/[&<>"']/g, (sign) => ENTITIES[sign]!);
}

/** HTML made elsewhere in this program, taken as it is. Never for text that a person wrote. */
export function trusted(markup: string): Markup {
  return { markup };
}

export const NOTHING: Markup = { markup: "" };

function toMarkup(content: Content): string {
  if (typeof content === "string") return escapeText(content);
  if (typeof content === "number") return escapeText(String(content));
  if ("markup" in content) return content.markup;
  return content.map(toMarkup).join("");
}

/** A template whose values are escaped, unless they are Markup themselves. */
export function html(strings: TemplateStringsArray, ...values: readonly Content[]): Markup {
  return {
    markup: strings.map((text, i) => text + (i < values.length ? toMarkup(values[i]!) : "")).join(""),
  };
}
