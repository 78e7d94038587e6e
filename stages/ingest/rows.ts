import Papa from "papaparse";
import { InputError } from "../errors.js";
import type { LogFormat } from "./config.js";
import { type Dialect, delimiterText, detectDialect, type WantedColumn } from "./dialect.js";
import { HEAD_BYTES, type LogSource, textPieces } from "./encoding.js";

/** Consecutive rows of a log, comments left out. */
export interface RowBatch {
  readonly rows: readonly (readonly string[])[];
  /** 1-based line of row i. */
  lineOf(i: number): number;
  /** Whether the last row's line had its line end; only a file's last can lack it. */
  readonly terminated: boolean;
}

/** A log whose dialect is known and whose data rows are still to be read, once. */
export interface OpenLog {
  readonly dialect: Dialect;
  readonly batches: AsyncGenerator<RowBatch>;
}

// Two reads: pieces as they come from a file pass uncut, whole strings are cut to lines of this length together.
const LONGEST_PIECE = 2 * HEAD_BYTES;

/**
 * Looks at the first lines of a log and gets its rows ready to be read in batches.
 * @throws InputError as {@link detectDialect} does; while reading, if a quoted field does not end on its line
 */
export async function openLog(
  source: LogSource,
  wanted: readonly WantedColumn[],
  format: LogFormat,
  file: string,
): Promise<OpenLog> {
  const pieces = textPieces(source, file);
  let head = "";
  let ended = false;
  while (head.length < HEAD_BYTES && !ended) {
    const next = await pieces.next();
    if (next.done === true) ended = true;
    else head += next.value;
  }
  const whole = ended && head.length <= HEAD_BYTES;
  const lastEnd = Math.max(head.lastIndexOf("\n", HEAD_BYTES), head.lastIndexOf("\r", HEAD_BYTES));
  if (!whole && lastEnd < 0) throw endlessLine(file, 1);
  const dialect = detectDialect(whole ? head : head.slice(0, lastEnd + 1), wanted, format, file);
  const newline = dialect.newline === "\r" ? "\r" : "\n";
  const lines = wholeLines(head.slice(dialect.dataStart), pieces, newline);
  return { dialect, batches: rowBatches(lines, dialect, newline, file) };
}

function endlessLine(file: string, line: number): InputError {
  return new InputError({
    file,
    line,
    expected: `lines of text, but this one is longer than ${HEAD_BYTES} characters`,
    wayOut: "check that the file is the instrument's log, and export it again as CSV text",
  });
}

interface LinesOfText {
  /** Without the last line end; null: a line that never ends. */
  readonly text: string | null;
  readonly terminated: boolean;
}

async function* wholeLines(
  start: string,
  pieces: AsyncGenerator<string>,
  newline: string,
): AsyncGenerator<LinesOfText> {
  let rest = start;
  for (;;) {
    let from = 0;
    while (rest.length - from > LONGEST_PIECE) {
      const end = rest.lastIndexOf(newline, from + HEAD_BYTES);
      if (end < from) {
        yield { text: null, terminated: false };
        return;
      }
      yield { text: rest.slice(from, end), terminated: true };
      from = end + 1;
    }
    const end = rest.lastIndexOf(newline);
    if (end >= from) {
      yield { text: rest.slice(from, end), terminated: true };
      from = end + 1;
    }
    const next = await pieces.next();
    if (next.done === true) {
      if (rest.length > from) yield { text: rest.slice(from), terminated: false };
      return;
    }
    rest = rest.slice(from) + next.value;
  }
}

function countLines(text: string, newline: string): number {
  let lines = 1;
  for (let at = text.indexOf(newline); at >= 0; at = text.indexOf(newline, at + 1)) lines++;
  return lines;
}

/** Line numbers of the rows of a text with comments or quotes: every line but the comments. */
function rowLines(text: string, newline: string, comment: string, firstLine: number): number[] {
  const numbers: number[] = [];
  let start = 0;
  for (let line = firstLine; start <= text.length; line++) {
    const end = text.indexOf(newline, start);
    if (comment === "" || !text.startsWith(comment, start)) numbers.push(line);
    if (end < 0) break;
    start = end + 1;
  }
  return numbers;
}

async function* rowBatches(
  pieces: AsyncIterable<LinesOfText>,
  dialect: Dialect,
  newline: "\n" | "\r",
  file: string,
): AsyncGenerator<RowBatch> {
  const { comment } = dialect;
  // One parser for the whole log, given whole lines. Papa.parse() on each piece costs twice the time, and on the
  // stream itself hides which line a row came from. CRLF is parsed at its LF: a CR left at a row's end is a blank.
  const parser = new Papa.Parser({
    delimiter: delimiterText(dialect.delimiter),
    newline,
    comments: comment === "" ? false : comment,
    header: false,
    fastMode: false,
  });
  let line = dialect.dataLine;
  for await (const { text, terminated } of pieces) {
    if (text === null) throw endlessLine(file, line);
    const firstLine = line;
    if (text === "") {
      line++;
      continue;
    }
    const spaced = dialect.delimiter === "space";
    const parsed: Papa.ParseResult<string[]> = parser.parse(
      spaced ? text.replaceAll("\t", " ") : text,
      0,
      false,
    );
    let rows = parsed.data;
    const plain =
      !text.includes('"') &&
      (comment === "" || !(text.startsWith(comment) || text.includes(newline + comment)));
    let numbers: number[] | null = null;
    if (plain) line += rows.length;
    else {
      numbers = rowLines(text, newline, comment, firstLine);
      line += countLines(text, newline);
      const broken =
        parsed.errors[0]?.row ??
        (rows.length === numbers.length
          ? -1
          : rows.findIndex((cells) => cells.some((cell) => cell.includes(newline))));
      if (broken >= 0) throw strayQuote(file, numbers[broken] ?? firstLine);
    }
    // Blanks in a row separate as one, and none at its ends counts.
    if (spaced) rows = rows.map((cells) => cells.filter((cell) => cell.trim() !== ""));
    yield {
      rows,
      lineOf: numbers === null ? (i) => firstLine + i : (i) => numbers[i]!,
      terminated,
    };
  }
}

function strayQuote(file: string, line: number): InputError {
  return new InputError({
    file,
    line,
    value: '"',
    expected: "each quoted field to end on its own line",
    wayOut: "take the stray quote out of a copy of the log, and name the copy in run.yaml",
  });
}
