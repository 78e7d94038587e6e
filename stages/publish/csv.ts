import Papa from "papaparse";

export type Cell = string | number;

/**
 * Nine significant digits in the shortest form: far below any uncertainty, and above the last bits in which
 * two processors may differ. What is no number is an empty field.
 */
export function csvNumber(x: number): string {
  return Number.isFinite(x) ? String(Number(x.toPrecision(9))) : "";
}

/**
 * A CSV text with `#` lines above the header row and "\n" at each line's end.
 * @param comments one line each; line breaks inside become spaces
 * @param rows each as long as `fields`
 */
export function csvText(
  comments: readonly string[],
  fields: readonly string[],
  rows: readonly (readonly Cell[])[],
): string {
  const head = comments.map((line) => `# ${oneLine(line)}`.trimEnd());
  const table = Papa.unparse(
    { fields: [...fields], data: rows.map((row) => row.map((cell) => cellText(cell))) },
    // Readers that take # as the start of a comment anywhere leave quoted text alone.
    { newline: "\n", quotes: (value: unknown) => typeof value === "string" && value.includes("#") },
  );
  return `${[...head, table].join("\n")}\n`;
}

function cellText(cell: Cell): string {
  return typeof cell === "number" ? csvNumber(cell) : oneLine(cell);
}

function oneLine(text: string): string {
  return text.replace(/\s*[\r\n]+\s*/g, " ");
}
