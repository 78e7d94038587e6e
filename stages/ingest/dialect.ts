import { InputError } from "../errors.js";
import type { LogFormat } from "./config.js";
import { nearestName } from "./nearest-name.js";
import { type DecimalMark, hasThousandsSeparators, parseNumber } from "./number.js";

export type Delimiter = Exclude<LogFormat["delimiter"], "auto">;

/** A column that a log must have. */
export interface WantedColumn {
  /** Heading, or "#3" for the third column. */
  readonly column: string;
  /** "moment": dates and clock times, which say nothing of the decimal mark; "present": looked up, not read. */
  readonly holds: "number" | "moment" | "present";
}

/** How one log file is written, and where its wanted columns and its data are. */
export interface Dialect {
  readonly delimiter: Delimiter;
  readonly decimal: DecimalMark;
  readonly newline: "\n" | "\r\n" | "\r";
  /** "" if lines cannot be comments. */
  readonly comment: string;
  /** null for a file without a heading row. */
  readonly heading: readonly string[] | null;
  /** Cells in a row; down to `least` where the last headings are empty. */
  readonly width: number;
  readonly least: number;
  /** 0-based, in the order of the wanted columns. */
  readonly indices: readonly number[];
  /** 1-based line of the first data row, and the number of characters before it. */
  readonly dataLine: number;
  readonly dataStart: number;
  /** Lines above the data, as cells: where a logger restarts it writes them again. */
  readonly above: readonly (readonly string[])[];
}

const CANDIDATES: readonly Delimiter[] = ["tab", ";", "|", ",", "space"];
const NUMBER_LIKE = /^[+-]?(?:\d+(?:[.,]\d*)?|[.,]\d+)(?:[eE][+-]?\d+)?$/;
const TIME_LIKE = /^\d{4}-\d\d-\d\d[Tt ]\d\d:\d\d/;
const ROWS_LOOKED_AT = 200;

export function delimiterText(delimiter: Delimiter): string {
  return delimiter === "tab" ? "\t" : delimiter === "space" ? " " : delimiter;
}

function unquote(cell: string): string {
  const bare = cell.trim();
  return bare.length > 1 && bare.startsWith('"') && bare.endsWith('"')
    ? bare.slice(1, -1).replaceAll('""', '"').trim()
    : bare;
}

/** One line → trimmed cells without their quotes; good for the few lines of a head, not for millions. */
export function splitLine(line: string, delimiter: Delimiter): string[] {
  const cells: string[] = [];
  let cell = "";
  let quoted = false;
  const between = delimiterText(delimiter);
  for (const character of delimiter === "space" ? line.trim().replaceAll("\t", " ") : line) {
    if (character === '"') quoted = !quoted;
    if (character === between && !quoted) {
      cells.push(cell);
      cell = "";
    } else cell += character;
  }
  cells.push(cell);
  const bare = cells.map(unquote);
  return delimiter === "space" ? bare.filter((text) => text !== "") : bare;
}

interface Line {
  readonly text: string;
  readonly number: number;
  readonly start: number;
}

function linesOf(head: string, newline: string): Line[] {
  const lines: Line[] = [];
  let start = 0;
  for (let number = 1; start < head.length; number++) {
    const end = head.indexOf(newline, start);
    const stop = end < 0 ? head.length : end;
    lines.push({ text: head.slice(start, stop), number, start });
    start = stop + newline.length;
  }
  return lines;
}

function detectNewline(head: string): Dialect["newline"] {
  const lineFeed = head.indexOf("\n");
  if (lineFeed > 0 && head[lineFeed - 1] === "\r") return "\r\n";
  return lineFeed >= 0 || !head.includes("\r") ? "\n" : "\r";
}

const columnNumber = (column: string): number | null => {
  const match = /^#([1-9]\d*)$/.exec(column);
  return match === null ? null : Number(match[1]);
};

interface Heading {
  readonly cells: string[];
  readonly at: number;
  readonly delimiter: Delimiter;
}

function findHeading(
  lines: readonly Line[],
  names: readonly string[],
  candidates: readonly Delimiter[],
  comment: string,
): Heading | null {
  for (let at = 0; at < lines.length; at++) {
    const text = lines[at]!.text;
    // Some loggers write the heading as a comment.
    const bare = comment !== "" && text.startsWith(comment) ? text.slice(comment.length) : text;
    if (!names.every((name) => bare.includes(name))) continue;
    for (const delimiter of candidates) {
      const cells = splitLine(bare, delimiter);
      if (names.every((name) => cells.includes(name))) return { cells, at, delimiter };
    }
  }
  return null;
}

const looksLikeData = (cell: string) => NUMBER_LIKE.test(cell) || TIME_LIKE.test(cell);

/** A heading for the message when the right one is not there: most wanted names, else the line above the data. */
function likelyHeading(
  lines: readonly Line[],
  names: readonly string[],
  candidates: readonly Delimiter[],
  comment: string,
): Heading | null {
  let best: Heading | null = null;
  let most = 0;
  let above: Heading | null = null;
  for (let at = 0; at < lines.length; at++) {
    const text = lines[at]!.text;
    const commented = comment !== "" && text.startsWith(comment);
    const bare = commented ? text.slice(comment.length) : text;
    for (const delimiter of candidates) {
      const cells = splitLine(bare, delimiter);
      if (cells.length < 2) continue;
      const hits = names.filter((name) => cells.includes(name)).length;
      if (hits > most) {
        most = hits;
        best = { cells, at, delimiter };
      }
      if (!commented && cells.filter(looksLikeData).length * 2 > cells.length)
        return best ?? above ?? { cells: [], at, delimiter };
      above = { cells, at, delimiter };
      break;
    }
  }
  return best ?? above;
}

function missingColumn(
  file: string,
  lines: readonly Line[],
  names: readonly string[],
  format: LogFormat,
): InputError {
  if (format.delimiter !== "auto") {
    const other = findHeading(lines, names, CANDIDATES, format.comment);
    if (other !== null)
      return new InputError({
        file,
        line: lines[other.at]!.number,
        key: "format.delimiter",
        value: format.delimiter,
        expected: `the delimiter of the heading, ${JSON.stringify(other.delimiter)}`,
        wayOut: `write delimiter: auto or delimiter: ${JSON.stringify(other.delimiter)}`,
      });
  }
  const candidates = format.delimiter === "auto" ? CANDIDATES : [format.delimiter];
  const seen = likelyHeading(lines, names, candidates, format.comment);
  if (seen === null || seen.cells.length === 0)
    return new InputError({
      file,
      column: names[0]!,
      expected: "a heading row with this name; the file has none",
      wayOut: "add the heading to the file, or give columns by number: column: 1",
    });
  const absent = names.find((name) => !seen.cells.includes(name)) ?? names[0]!;
  const near = nearestName(absent, seen.cells);
  return new InputError({
    file,
    line: lines[seen.at]!.number,
    column: absent,
    expected: `one of the headings ${seen.cells
      .filter((cell) => cell !== "")
      .map((cell) => JSON.stringify(cell))
      .join(", ")}`,
    wayOut: near === undefined ? "name one of these in column:" : `write column: ${JSON.stringify(near)}`,
  });
}

/** First line whose wanted cells could all be data, for files without headings. */
function findFirstRow(
  lines: readonly Line[],
  numbers: readonly number[],
  candidates: readonly Delimiter[],
  comment: string,
): { at: number; delimiter: Delimiter } | null {
  let short: { at: number; delimiter: Delimiter } | null = null;
  for (let at = 0; at < lines.length; at++) {
    const { text } = lines[at]!;
    if (comment !== "" && text.startsWith(comment)) continue;
    let most = 1;
    for (const delimiter of candidates) {
      const cells = splitLine(text, delimiter);
      const wanted = numbers.map((number) => cells[number - 1] ?? "");
      if (!wanted.some(looksLikeData) || !wanted.every((cell) => cell === "" || looksLikeData(cell)))
        continue;
      if (cells.length >= Math.max(...numbers)) return { at, delimiter };
      // Kept for the message that there are too few columns.
      if (short === null || (short.at === at && cells.length > most)) short = { at, delimiter };
      most = Math.max(most, cells.length);
    }
  }
  return short;
}

function mostCommon(counts: readonly number[]): number {
  const tally = new Map<number, number>();
  for (const count of counts) tally.set(count, (tally.get(count) ?? 0) + 1);
  return [...tally].sort((a, b) => b[1] - a[1])[0]?.[0] ?? 0;
}

interface HeadRow {
  readonly cells: string[];
  readonly line: Line;
}

function detectDecimal(
  rows: readonly HeadRow[],
  indices: readonly number[],
  wanted: readonly WantedColumn[],
  format: LogFormat,
  file: string,
): DecimalMark {
  let points = 0;
  let commas = 0;
  let against: { line: number; column: string; value: string } | null = null;
  for (const { cells, line } of rows)
    for (let k = 0; k < indices.length; k++) {
      if (wanted[k]!.holds !== "number") continue;
      const value = cells[indices[k]!] ?? "";
      const mark = NUMBER_LIKE.test(value)
        ? value.includes(".")
          ? "."
          : value.includes(",")
            ? ","
            : ""
        : "";
      if (mark === ".") points++;
      if (mark === ",") commas++;
      if (mark !== "" && mark !== format.decimal)
        against ??= { line: line.number, column: wanted[k]!.column, value };
    }
  if (format.decimal === "auto") return commas > points ? "," : ".";
  const fitting = format.decimal === "." ? points : commas;
  if (against !== null && fitting === 0)
    throw new InputError({
      file,
      ...against,
      expected: `a number with the decimal mark "${format.decimal}", as format: says`,
      wayOut: "write decimal: auto, or the mark that the file has",
    });
  return format.decimal;
}

/**
 * Rows between the heading and the data: units, descriptions, a heading written twice. Their wanted cells hold
 * words, none of them data. At most three are taken for such.
 */
function rowsOfWords(rows: readonly HeadRow[], indices: readonly number[]): number {
  const first = rows
    .slice(0, 4)
    .findIndex(({ cells }) => indices.some((index) => looksLikeData(cells[index] ?? "")));
  return first < 0 ? (rows.length === 1 ? 1 : 0) : first;
}

function trimmedWidth(cells: readonly string[]): number {
  let width = cells.length;
  while (width > 0 && cells[width - 1] === "") width--;
  return width;
}

/**
 * Reads off the first lines how a log is written.
 * @param head whole lines from the start of the file, at least one of them data
 * @throws InputError if it is empty, lacks a wanted column or its data, or is not written as `format` says
 * @see README.md, "Dialects"
 */
export function detectDialect(
  head: string,
  wanted: readonly WantedColumn[],
  format: LogFormat,
  file: string,
): Dialect {
  if (head.trim() === "")
    throw new InputError({
      file,
      expected: "a log, but the file is empty",
      wayOut: "copy the log again, or leave this night out",
    });
  if (
    format.comment !== "" &&
    format.delimiter !== "auto" &&
    format.comment === delimiterText(format.delimiter)
  )
    throw new InputError({
      file,
      key: "format.comment",
      value: format.comment,
      expected: "a mark that is not the delimiter",
      wayOut: 'write comment: "" if the log has no comments',
    });
  const newline = detectNewline(head);
  const lines = linesOf(head, newline === "\r" ? "\r" : "\n");
  const candidates = format.delimiter === "auto" ? CANDIDATES : [format.delimiter];
  const names = wanted
    .filter(({ column }) => columnNumber(column) === null)
    .map(({ column }) => column.trim());
  const isComment = ({ text }: Line) => format.comment !== "" && text.trimStart().startsWith(format.comment);

  let heading: Heading | null = null;
  let delimiter: Delimiter;
  let at: number;
  if (names.length > 0) {
    heading = findHeading(lines, names, candidates, format.comment);
    if (heading === null) throw missingColumn(file, lines, names, format);
    const twice = names.find((name) => heading!.cells.indexOf(name) !== heading!.cells.lastIndexOf(name));
    if (twice !== undefined)
      throw new InputError({
        file,
        line: lines[heading.at]!.number,
        column: twice,
        value: heading.cells.join(delimiterText(heading.delimiter)),
        expected: "this heading once",
        wayOut: "give the column by number: column: 1",
      });
    delimiter = heading.delimiter;
    at = heading.at + 1;
  } else {
    const numbers = wanted.map(({ column }) => columnNumber(column)!);
    const first = findFirstRow(lines, numbers, candidates, format.comment);
    if (first === null)
      throw new InputError({
        file,
        column: wanted[0]!.column,
        expected: `a row with numbers in columns ${numbers.join(", ")}`,
        wayOut: "name the delimiter in format:, or give columns by their heading",
      });
    ({ at, delimiter } = first);
  }

  const rows: HeadRow[] = [];
  for (let i = at; i < lines.length && rows.length < ROWS_LOOKED_AT; i++) {
    const line = lines[i]!;
    if (isComment(line)) continue;
    const cells = splitLine(line.text, delimiter);
    if (cells.some((cell) => cell !== "")) rows.push({ cells, line });
  }
  const indices = wanted
    .map(({ column }) => (columnNumber(column) ?? 0) - 1)
    .map((index, k) => (index >= 0 ? index : heading!.cells.indexOf(wanted[k]!.column.trim())));
  const readIndices = indices.filter((_, k) => wanted[k]!.holds !== "present");
  if (heading !== null) rows.splice(0, rowsOfWords(rows, readIndices));
  const first = rows[0];
  if (first === undefined)
    throw new InputError({
      file,
      expected: "rows of data, but there is only a heading",
      wayOut: "copy the log again, or leave this night out",
    });

  const width = rowWidth(rows, heading, indices, wanted, delimiter, file);
  return {
    delimiter,
    decimal: detectDecimal(rows, indices, wanted, format, file),
    newline,
    comment: format.comment,
    heading: heading?.cells ?? null,
    width,
    least: heading === null ? width : Math.min(width, trimmedWidth(heading.cells)),
    indices,
    dataLine: first.line.number,
    dataStart: first.line.start,
    above: lines
      .filter((line) => line.number < first.line.number && !isComment(line) && line.text.trim() !== "")
      .map(({ text }) => splitLine(text, delimiter)),
  };
}

/** Cells in a row: as many as the heading has, give or take empty ones at the end. */
function rowWidth(
  rows: readonly HeadRow[],
  heading: Heading | null,
  indices: readonly number[],
  wanted: readonly WantedColumn[],
  delimiter: Delimiter,
  file: string,
): number {
  const usual = mostCommon(rows.map(({ cells }) => cells.length));
  const row = rows.find(({ cells }) => cells.length === usual)!;
  const beyond = indices.findIndex((index) => index >= usual);
  const headed = heading === null ? usual : heading.cells.length;
  const least = heading === null ? 0 : trimmedWidth(heading.cells);
  const surplus = trimmedWidth(row.cells) > headed;
  if (heading !== null && (surplus || usual < least)) {
    const decimalComma = surplus && delimiter === ",";
    throw new InputError({
      file,
      line: row.line.number,
      value: row.line.text.trim(),
      expected: `${headed} cells, as the heading has; this row and most others have ${usual}`,
      wayOut: decimalComma
        ? "a decimal comma needs another delimiter or quotes about the numbers: export the log so; or give columns by number"
        : "name the delimiter in format:, or give columns by number: column: 1",
    });
  }
  if (beyond >= 0)
    throw new InputError({
      file,
      line: row.line.number,
      column: wanted[beyond]!.column,
      expected: `a column number up to ${usual}, as many as the rows have`,
      wayOut: "give the column's number counted from 1, or name the delimiter in format:",
    });
  return usual;
}

/** Why a cell is no number, in the words of an InputError. */
export function numberFault(
  cell: string,
  mark: DecimalMark,
  what: string,
): { expected: string; wayOut?: string } {
  const other: DecimalMark = mark === "." ? "," : ".";
  if (!Number.isNaN(parseNumber(cell, other)) && !hasThousandsSeparators(cell))
    return {
      expected: `${what} with the decimal mark "${mark}", as in the rows above`,
      wayOut: `write decimal: "${other}" in format: if the whole log has it, or export the log with one mark`,
    };
  if (hasThousandsSeparators(cell))
    return {
      expected: `${what} without thousands separators`,
      wayOut: "switch digit grouping off in the instrument and export the log again",
    };
  return { expected: what };
}
