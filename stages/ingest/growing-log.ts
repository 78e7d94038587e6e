import { InputError } from "../errors.js";
import { Cell, type RowReader } from "./cells.js";
import { numberFault } from "./dialect.js";
import type { LogRequest } from "./requests.js";
import { Tally } from "./tally.js";
import { LATEST_EPOCH_S, timeExpectation, timeKind, timeScale, timeWayOut } from "./time.js";
import { SampleFlag } from "./types.js";

/** A cell that holds neither a reading nor one of the words for a gap: an error, unless its span is excluded. */
export interface CellFault {
  /** Index into the log's columns. */
  readonly sample: number;
  readonly error: InputError;
}

// More wrong cells than a person would list: the column is of another kind than configured.
const MOST_FAULTS = 10_000;
const FIRST_LENGTH = 4096;

/** What became of a number outside its bound. */
function notAbove(what: string): string {
  const quantity = what.replace(/^an? /, "").replace(/ in .*/, "");
  return `${quantity} not above zero, taken as no reading`;
}

/** The columns of one log while its file is read: growing, with a flag for each sample that is no reading. */
export class GrowingLog {
  readonly file: string;
  readonly request: LogRequest;
  readonly timeSlot: number;
  readonly readingSlots: readonly number[];
  readonly absolute: boolean;
  /** Samples are in order of time and either good or not; events may be in any order, and each cell counts. */
  readonly sampled: boolean;
  readonly tally = new Tally();
  readonly faults: CellFault[] = [];
  n = 0;
  backwards = 0;
  firstBackwards: { line: number; after_s: number; time_s: number } | null = null;
  #time_s = new Float64Array(FIRST_LENGTH);
  #readings: Float64Array[];
  #flag = new Uint8Array(FIRST_LENGTH);
  readonly #factor: number;
  readonly #divisor: number;
  /** The last two samples in order of time, for finding those that are not. */
  #last_s = Number.NEGATIVE_INFINITY;
  #beforeLast_s = Number.NEGATIVE_INFINITY;
  #last = -1;

  constructor(file: string, request: LogRequest, timeSlot: number, readingSlots: readonly number[]) {
    this.file = file;
    this.request = request;
    this.timeSlot = timeSlot;
    this.readingSlots = readingSlots;
    this.#readings = request.readings.map(() => new Float64Array(FIRST_LENGTH));
    const { factor, divisor } = timeScale(request.time.unit);
    this.#factor = factor;
    this.#divisor = divisor;
    this.absolute = timeKind(request.time.unit) === "absolute";
    this.sampled = request.kind === "sampled";
  }

  /** Columns of length n, without the room left for growth. */
  columns(): { time_s: Float64Array; readings: Float64Array[]; flag: Uint8Array } {
    return {
      time_s: this.#time_s.slice(0, this.n),
      readings: this.#readings.map((column) => column.slice(0, this.n)),
      flag: this.#flag.slice(0, this.n),
    };
  }

  /**
   * Adds the row at hand if it is a good sample of a log with one reading, as all but a few of millions are.
   * @returns false if it is not, and {@link append} has to look closer
   */
  appendGood(row: RowReader): boolean {
    if (this.readingSlots.length !== 1) return false;
    const s = this.readingSlots[0]!;
    const t = this.timeSlot;
    if (row.cell[s] !== Cell.Good || row.cell[t] !== Cell.Good) return false;
    const si = row.value[s]! * this.request.readings[0]!.column.factor;
    const time_s = (row.value[t]! * this.#factor) / this.#divisor;
    if (!(si > 0 && time_s > this.#last_s) || (this.absolute && Math.abs(time_s) > LATEST_EPOCH_S))
      return false;
    if (this.n === this.#flag.length) this.#grow();
    const i = this.n++;
    this.#time_s[i] = time_s;
    this.#readings[0]![i] = si;
    this.#beforeLast_s = this.#last_s;
    this.#last_s = time_s;
    this.#last = i;
    return true;
  }

  /**
   * Adds the row at hand, whatever it holds.
   * @param shape "ragged": cells are missing or surplus, so that none of its readings can be trusted
   */
  append(row: RowReader, shape: "whole" | "ragged"): void {
    if (this.n === this.#flag.length) this.#grow();
    const i = this.n++;
    this.#flag[i] = shape === "ragged" ? SampleFlag.Ragged : 0;
    for (let k = 0; k < this.readingSlots.length; k++)
      this.#readings[k]![i] = shape === "ragged" ? Number.NaN : this.#reading(row, i, k);
    // A sampled heater is known only where both its readings are.
    if (this.sampled && this.#flag[i] !== 0) this.#refuse(i, 0);
    this.#time_s[i] = this.#time(row, i, shape);
  }

  /** SI value of reading k, or NaN and a flag. */
  #reading(row: RowReader, i: number, k: number): number {
    const s = this.readingSlots[k]!;
    const { column, what, bound } = this.request.readings[k]!;
    const si = row.value[s]! * column.factor;
    switch (row.cell[s]) {
      case Cell.Good:
        if (bound === "above zero" && !(si > 0)) {
          this.#mark(i, SampleFlag.NotANumber, notAbove(what), row.line);
          return Number.NaN;
        }
        if (bound === "not below zero" && si < 0) throw this.#belowZero(row, k);
        return si;
      case Cell.OverRange:
        this.#mark(i, SampleFlag.OverRange, "over range", row.line);
        return Number.NaN;
      case Cell.Fault:
        this.#flag[i] = this.#flag[i]! | SampleFlag.NotANumber;
        this.#fault(row, i, k);
        return Number.NaN;
      default:
        this.#mark(i, SampleFlag.NotANumber, "no reading", row.line);
        return Number.NaN;
    }
  }

  /** Time of sample i, or NaN; flags it where it does not follow the samples before. */
  #time(row: RowReader, i: number, shape: "whole" | "ragged"): number {
    const s = this.timeSlot;
    const time_s = (row.value[s]! * this.#factor) / this.#divisor;
    const beyond = this.absolute && Math.abs(time_s) > LATEST_EPOCH_S;
    if (row.cell[s] !== Cell.Good || beyond) {
      if (this.sampled) this.#refuse(i, SampleFlag.TimeNotIncreasing);
      if (shape === "whole" && (row.cell[s] === Cell.Fault || beyond)) this.#fault(row, i, null);
      else this.tally.add("no time", row.line);
      return Number.NaN;
    }
    if (!this.sampled) return time_s;
    if (time_s > this.#last_s) {
      this.#beforeLast_s = this.#last_s;
      this.#last_s = time_s;
      this.#last = i;
    } else this.#backwards(i, time_s, row.line);
    return time_s;
  }

  #backwards(i: number, time_s: number, line: number): void {
    this.backwards++;
    this.firstBackwards ??= { line, after_s: this.#last_s, time_s };
    this.tally.add("time not after the sample before", line);
    if (time_s < this.#last_s && time_s > this.#beforeLast_s) {
      // One sample ran ahead and this one follows those before it: the one ahead is the wrong one.
      this.#refuse(this.#last, SampleFlag.TimeNotIncreasing);
      this.#last = i;
      this.#last_s = time_s;
    } else this.#refuse(i, SampleFlag.TimeNotIncreasing);
  }

  #mark(i: number, bit: number, note: string, line: number): void {
    this.#flag[i] = this.#flag[i]! | bit;
    this.tally.add(note, line);
  }

  #refuse(i: number, bit: number): void {
    this.#flag[i] = this.#flag[i]! | bit;
    for (const column of this.#readings) column[i] = Number.NaN;
  }

  #fault(row: RowReader, sample: number, k: number | null): void {
    const value = row.text(k === null ? this.timeSlot : this.readingSlots[k]!);
    const { time, readings } = this.request;
    const gap = `mark gaps as 9.91E37, name the word in format: as gap_words: [${JSON.stringify(value)}], or add the span to exclude: in run.yaml`;
    const fault =
      k === null
        ? { column: time.column, expected: timeExpectation(time.unit), wayOut: timeWayOut(time.unit) }
        : {
            column: readings[k]!.column.column,
            wayOut: gap,
            ...numberFault(value, row.decimal, readings[k]!.what),
          };
    this.faults.push({ sample, error: new InputError({ file: this.file, line: row.line, value, ...fault }) });
    if (this.faults.length >= MOST_FAULTS) throw this.faults[0]!.error;
  }

  #belowZero(row: RowReader, k: number): InputError {
    const { column, what } = this.request.readings[k]!;
    return new InputError({
      file: this.file,
      line: row.line,
      column: column.column,
      value: row.text(this.readingSlots[k]!),
      expected: `${what}, not below 0`,
      wayOut: "mend the row in a copy of the log and name the copy in run.yaml",
    });
  }

  #grow(): void {
    const wider = <Column extends Float64Array | Uint8Array>(column: Column, fresh: Column): Column => {
      fresh.set(column);
      return fresh;
    };
    const length = 2 * this.#flag.length;
    this.#time_s = wider(this.#time_s, new Float64Array(length));
    this.#readings = this.#readings.map((column) => wider(column, new Float64Array(length)));
    this.#flag = wider(this.#flag, new Uint8Array(length));
  }
}
