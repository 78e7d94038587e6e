import { InputError } from "../errors.js";
import { bareText, Cell, cellCount, RowReader, type Slot } from "./cells.js";
import type { LogFormat, TimeColumn } from "./config.js";
import type { Dialect, WantedColumn } from "./dialect.js";
import type { LogSource } from "./encoding.js";
import { type CellFault, GrowingLog } from "./growing-log.js";
import type { LogRequest } from "./requests.js";
import { openLog, type RowBatch } from "./rows.js";
import { Tally } from "./tally.js";
import { parseIso8601, zoneOffset_s } from "./time.js";
import type { Note } from "./types.js";

/** One log as read. Every column has length n; a number that is no reading is NaN and flagged. */
export interface LogColumns {
  readonly log: LogRequest["log"];
  readonly kind: LogRequest["kind"];
  readonly file: string;
  readonly timeUnit: TimeColumn["unit"];
  /** As written in the log, in s: from the log's own zero, or Unix time. NaN where there is none. */
  readonly time_s: Float64Array;
  /** SI, in the order of the request's readings. */
  readonly readings: readonly Float64Array[];
  /** Bits of SampleFlag. */
  readonly flag: Uint8Array;
  readonly faults: readonly CellFault[];
  readonly notes: readonly Note[];
  readonly dialect: Dialect;
}

// A power failure or a serial line's hiccup spoils a few lines of millions; more is another kind of file.
const FEW = 3;
const TOLERATED_RAGGED = 0.001;
const TOLERATED_BACKWARDS = 0.01;

/** The format of a file that several logs share. */
function commonFormat(requests: readonly LogRequest[], file: string): LogFormat {
  const first = requests[0]!.format;
  for (const { log, format } of requests)
    for (const key of ["delimiter", "decimal", "comment"] as const)
      if (format[key] !== first[key])
        throw new InputError({
          file,
          key: `logs.${log}.format.${key}`,
          value: format[key],
          expected: `${JSON.stringify(first[key])}, as for the ${requests[0]!.log} in the same file`,
          wayOut: "give the format once, under format: of the run",
        });
  return { ...first, gap_words: requests.flatMap(({ format }) => format.gap_words) };
}

interface Plan {
  /** The columns to read, slot by slot, then those that need only be there. */
  readonly wanted: WantedColumn[];
  readonly moments: Slot["moment"][];
  readonly logs: GrowingLog[];
}

/** The distinct columns that the logs of a file need, and which of them each log uses. */
function planColumns(requests: readonly LogRequest[], file: string): Plan {
  const wanted: WantedColumn[] = [];
  const moments: Slot["moment"][] = [];
  const known = new Map<string, number>();
  const slotOf = (key: string, column: WantedColumn, moment: Slot["moment"]) => {
    const slot = known.get(key) ?? wanted.length;
    if (slot === wanted.length) {
      known.set(key, slot);
      wanted.push(column);
      moments.push(moment);
    }
    return slot;
  };
  const numberSlot = (column: string) => slotOf(`number ${column}`, { column, holds: "number" }, null);
  const momentSlot = (column: string, zone: string) => {
    const offset_s = zoneOffset_s(zone);
    return slotOf(`${zone} ${column}`, { column, holds: "moment" }, (cell) => parseIso8601(cell, offset_s));
  };
  const logs = requests.map((request) => {
    const { column, unit, zone } = request.time;
    const timeSlot = unit === "iso8601" ? momentSlot(column, zone) : numberSlot(column);
    const readingSlots = request.readings.map((reading) => numberSlot(reading.column.column));
    return new GrowingLog(file, request, timeSlot, readingSlots);
  });
  for (const column of requests.flatMap(({ present }) => present)) wanted.push({ column, holds: "present" });
  return { wanted, moments, logs };
}

/** The cells of a row as one text, empty cells at its end left out; "" for a row without any. */
function rowText(row: readonly string[]): string {
  const cells = row.map(bareText);
  while (cells.at(-1) === "") cells.pop();
  return cells.join("\t");
}

/** Decimals of a number as written. */
function decimals(row: readonly string[], index: number, mark: string): number {
  const text = (row[index] ?? "").trim();
  const at = text.indexOf(mark);
  return at < 0 ? 0 : text.length - at - 1;
}

/** Sorts the rows of one file into its logs. */
class FileReader {
  readonly tally = new Tally();
  readonly #file: string;
  readonly #dialect: Dialect;
  readonly #reader: RowReader;
  readonly #logs: readonly GrowingLog[];
  readonly #above: ReadonlySet<string>;
  /** Whether the last cell of a row is read: then a last line without its end may have lost some of it. */
  readonly #readsLast: boolean;
  #rows = 0;
  #ragged = 0;
  #firstRagged: { line: number; cells: number } | null = null;
  /** The last row if it was ragged: kept back, for the last line of a file may be cut short. */
  #pending: { row: readonly string[]; line: number } | null = null;
  #previous: readonly string[] = [];
  #beforePrevious: readonly string[] = [];

  constructor(file: string, dialect: Dialect, reader: RowReader, logs: readonly GrowingLog[]) {
    this.#file = file;
    this.#dialect = dialect;
    this.#reader = reader;
    this.#logs = logs;
    this.#above = new Set(
      [...dialect.above, ...(dialect.heading === null ? [] : [dialect.heading])].map(rowText),
    );
    this.#readsLast = reader.slots.some(({ index }) => index === dialect.width - 1);
  }

  add(batch: RowBatch): void {
    const { rows } = batch;
    const { width } = this.#dialect;
    for (let r = 0; r < rows.length; r++) {
      const row = rows[r]!;
      if (row.length !== width && !this.#takesUneven(row, batch.lineOf(r))) continue;
      if (this.#pending !== null) this.#addRagged();
      const ordinary = this.#reader.read(row);
      this.#reader.line = batch.lineOf(r);
      if (!ordinary && this.#isChatter(row)) continue;
      if (!batch.terminated && r === rows.length - 1 && this.#isCutShort(row)) continue;
      this.#rows++;
      this.#beforePrevious = this.#previous;
      this.#previous = row;
      for (let k = 0; k < this.#logs.length; k++) {
        const log = this.#logs[k]!;
        if (!log.appendGood(this.#reader) && this.#hasSample(log)) log.append(this.#reader, "whole");
      }
    }
  }

  /** @throws InputError if too many rows had missing or surplus cells */
  end(): void {
    if (this.#pending !== null) this.tally.add("last line cut short, left out", this.#pending.line);
    if (this.#firstRagged === null || this.#ragged <= Math.max(FEW, TOLERATED_RAGGED * this.#rows)) return;
    throw new InputError({
      file: this.#file,
      line: this.#firstRagged.line,
      value: cellCount(this.#firstRagged.cells),
      expected: `${cellCount(this.#dialect.width)} as in the other rows; ${this.#ragged} of ${this.#rows} rows differ`,
      wayOut: "name the delimiter in format:, or copy the log from the instrument again",
    });
  }

  /** Whether a row of unusual length can be read all the same: cells that are missing or surplus are empty ones. */
  #takesUneven(row: readonly string[], line: number): boolean {
    const { width, least } = this.#dialect;
    if (rowText(row) === "") return false;
    this.#reader.line = line;
    if (this.#isRepeated(row) || this.#isComment(row)) return false;
    const surplus = row.slice(width).some((cell) => cell.trim() !== "");
    if (!surplus && row.length >= least) return true;
    this.#addRagged();
    this.#pending = { row, line };
    this.#rows++;
    return false;
  }

  #addRagged(): void {
    if (this.#pending === null) return;
    const { row, line } = this.#pending;
    this.#pending = null;
    this.#ragged++;
    this.#firstRagged ??= { line, cells: row.length };
    this.tally.add("line with missing or surplus cells, not used", line);
    const lineAtHand = this.#reader.line;
    this.#reader.read(row);
    this.#reader.line = line;
    // In a file of several logs a broken row may be no pulse at all; the thermometer's sample stays in any case.
    for (const log of this.#logs)
      if (log.sampled || this.#logs.length === 1) log.append(this.#reader, "ragged");
    this.#reader.line = lineAtHand;
  }

  /** Where a logger restarts it writes its preamble, heading and units again. */
  #isRepeated(row: readonly string[]): boolean {
    if (!this.#above.has(rowText(row))) return false;
    this.tally.add("heading written again, skipped", this.#reader.line);
    return true;
  }

  /** A comment that does not begin at the line's start. */
  #isComment(row: readonly string[]): boolean {
    const { comment } = this.#dialect;
    return comment !== "" && row[0]!.trimStart().startsWith(comment);
  }

  #isChatter(row: readonly string[]): boolean {
    return this.#reader.cell.includes(Cell.Fault) && (this.#isRepeated(row) || this.#isComment(row));
  }

  /** Whether the row at hand holds anything of this log: in a shared file, cells without a sample are blank. */
  #hasSample(log: GrowingLog): boolean {
    const { cell } = this.#reader;
    const shared = this.#logs.length > 1;
    return (
      log.readingSlots.some((s) => cell[s] !== Cell.Blank) || (!shared && cell[log.timeSlot] !== Cell.Blank)
    );
  }

  /**
   * Whether the file's last line, having no line end, lost part of its last number: it has fewer decimals than the
   * two rows before, which agree. A pulse is kept all the same, with a note.
   */
  #isCutShort(row: readonly string[]): boolean {
    const { decimal, width } = this.#dialect;
    const usual = decimals(this.#previous, width - 1, decimal);
    if (
      !this.#readsLast ||
      decimals(this.#beforePrevious, width - 1, decimal) !== usual ||
      decimals(row, width - 1, decimal) >= usual
    )
      return false;
    const kept = this.#logs.some(({ sampled }) => !sampled);
    this.tally.add(
      kept ? "last line has no line end: its last cell may be cut short" : "last line cut short, left out",
      this.#reader.line,
    );
    return !kept;
  }
}

/**
 * Reads the logs that one file holds, in one pass; memory grows with the columns, not with the text.
 * @param file its name in messages
 * @param requests one for each log in the file
 * @returns one LogColumns a request, in the same order
 * @throws InputError if the file is not a log, is not written as its format says, lacks a column, or is broken in
 * more than a few lines. Texts among the numbers are not thrown but listed as `faults`: their span may be excluded.
 */
export async function readLogFile(
  source: LogSource,
  file: string,
  requests: readonly LogRequest[],
): Promise<LogColumns[]> {
  const format = commonFormat(requests, file);
  const { wanted, moments, logs } = planColumns(requests, file);
  const { dialect, batches } = await openLog(source, wanted, format, file);
  const slots = moments.map((moment, s) => ({ index: dialect.indices[s]!, moment }));
  const reader = new FileReader(file, dialect, new RowReader(slots, dialect.decimal, format.gap_words), logs);
  for await (const batch of batches) reader.add(batch);
  reader.end();
  return logs.map((log, k) => finished(log, k === 0 ? reader.tally.notes(file) : [], dialect));
}

/** @throws InputError if the log has no sample, or if its clock was set back */
function finished(log: GrowingLog, fileNotes: readonly Note[], dialect: Dialect): LogColumns {
  const { request, file, n, firstBackwards, backwards } = log;
  if (n === 0)
    throw new InputError({
      file,
      column: request.readings[0]!.column.column,
      value: "",
      expected: `rows with ${request.readings[0]!.what}, but every cell is empty`,
      wayOut: `check which column logs.${request.log} names`,
    });
  if (firstBackwards !== null && backwards > Math.max(FEW, TOLERATED_BACKWARDS * n))
    throw new InputError({
      file,
      line: firstBackwards.line,
      column: request.time.column,
      value: `${firstBackwards.time_s} s after ${firstBackwards.after_s} s`,
      expected: `times that increase; ${backwards} of ${n} samples do not`,
      wayOut:
        "the clock was set back or the logger restarted: split a copy of the log there and reduce it as two runs",
    });
  return {
    log: request.log,
    kind: request.kind,
    file,
    timeUnit: request.time.unit,
    ...log.columns(),
    faults: log.faults,
    notes: [...fileNotes, ...log.tally.notes(file)],
    dialect,
  };
}
