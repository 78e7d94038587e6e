import { type Content, html, type Markup, NOTHING, trusted } from "../html.js";

/** A column of a table: its heading, and whether it holds numbers. */
export interface Column {
  readonly heading: Content;
  readonly side: "words" | "numbers";
}

export const words = (heading: Content): Column => ({ heading, side: "words" });
export const numbers = (heading: Content): Column => ({ heading, side: "numbers" });

export interface Row {
  readonly cells: readonly Content[];
  readonly emphasis?: "chosen" | "none";
}

/** A table whose first cell in each row is that row's heading. */
export function table(
  caption: Content,
  columns: readonly Column[],
  rows: readonly Row[],
  foot: readonly Row[] = [],
): Markup {
  const side = (j: number) => (columns[j]!.side === "numbers" ? trusted(' class="number"') : NOTHING);
  const row = ({ cells, emphasis = "none" }: Row) =>
    html`<tr${emphasis === "chosen" ? trusted(' class="chosen"') : NOTHING}>${cells.map((cell, j) =>
      j === 0 ? html`<th scope="row"${side(j)}>${cell}</th>` : html`<td${side(j)}>${cell}</td>`,
    )}</tr>
`;
  return html`<div class="scroll"><table>
<caption>${caption}</caption>
<thead><tr>${columns.map(({ heading }, j) => html`<th scope="col"${side(j)}>${heading}</th>`)}</tr></thead>
<tbody>
${rows.map(row)}</tbody>
${
  foot.length === 0
    ? NOTHING
    : html`<tfoot>${foot.map(row)}</tfoot>
`
}</table></div>
`;
}

/** A drawn figure with its caption; nothing where it was not drawn. */
export function figure(svg: string | undefined, caption: Content, name: "plate" | "bare" = "plate"): Markup {
  if (svg === undefined) return NOTHING;
  return html`<figure${name === "plate" ? trusted(' class="plate"') : NOTHING}>${trusted(inline(svg))}
<figcaption>${caption}</figcaption></figure>
`;
}

/** SVG as it stands inside HTML: namespaces are the parser's own business there. */
export function inline(svg: string): string {
  return svg.replace(/ xmlns(?::\w+)?="[^"]*"/g, "");
}

/** A minus sign where a hyphen stands before a number. */
export function typeset(text: string): string {
  return text.replace(/(^|[\s(])-(?=\d)/g, "$1−");
}

/** "1 pulse", "2 pulses". */
export function counted(n: number, noun: string): string {
  return `${n} ${noun}${n === 1 ? "" : "s"}`;
}
