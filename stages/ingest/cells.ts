import { type DecimalMark, parseNumber } from "./number.js";

// SCPI-1999, volume 1, 7.2.1: infinity is written 9.9E37, not-a-number 9.91E37.
const OVER_RANGE = 9.9e37;
const NOT_A_NUMBER = 9.91e37;

/** What a cell turned out to hold. */
export const Cell = { Good: 0, OverRange: 1, Gap: 2, Blank: 3, Fault: 4 } as const;

/** One column of the file, read once a row however many logs share it. */
export interface Slot {
  /** 0-based place in a row. */
  readonly index: number;
  /** Reads a date and time; null: the column holds numbers. */
  readonly moment: ((cell: string) => number) | null;
}

/** The text of a cell without blanks and quotes about it. */
export function bareText(cell: string | undefined): string {
  const text = (cell ?? "").trim();
  return text.length > 1 && text.startsWith('"') && text.endsWith('"') ? text.slice(1, -1).trim() : text;
}

/** "1 cell", "3 cells". */
export function cellCount(cells: number): string {
  return cells === 1 ? "1 cell" : `${cells} cells`;
}

/** The wanted cells of one row at a time: numbers as written, and what became of each. */
export class RowReader {
  readonly slots: readonly Slot[];
  readonly decimal: DecimalMark;
  /** As written, not yet SI; of use where `cell` is Good. */
  readonly value: Float64Array;
  readonly cell: Uint8Array;
  /** 1-based line of the row at hand. */
  line = 0;
  row: readonly string[] = [];
  readonly #gapWords: ReadonlySet<string>;
  /** Some instruments write a number, −999 say, for a gap. */
  readonly #gapNumbers: ReadonlySet<number>;
  readonly #hasGapNumbers: boolean;

  constructor(slots: readonly Slot[], decimal: DecimalMark, gapWords: readonly string[]) {
    this.slots = slots;
    this.decimal = decimal;
    this.value = new Float64Array(slots.length);
    this.cell = new Uint8Array(slots.length);
    this.#gapWords = new Set(["NaN", "nan", "NAN", "-", ...gapWords]);
    this.#gapNumbers = new Set(
      gapWords.map((word) => parseNumber(word, decimal)).filter((gap) => !Number.isNaN(gap)),
    );
    this.#hasGapNumbers = this.#gapNumbers.size > 0;
  }

  text(slot: number): string {
    return bareText(this.row[this.slots[slot]!.index]);
  }

  /** Takes a row in hand. @returns whether every wanted cell holds an ordinary number or time */
  read(row: readonly string[]): boolean {
    this.row = row;
    let ordinary = true;
    for (let s = 0; s < this.slots.length; s++) {
      const { index, moment } = this.slots[s]!;
      const text = row[index] ?? "";
      const number = moment === null ? parseNumber(text, this.decimal) : moment(text);
      this.value[s] = number;
      const usual =
        number < OVER_RANGE && number > -OVER_RANGE && !(this.#hasGapNumbers && this.#gapNumbers.has(number));
      if (usual) this.cell[s] = Cell.Good;
      else {
        this.cell[s] = this.#classify(s);
        ordinary = false;
      }
    }
    return ordinary;
  }

  #classify(s: number): number {
    const text = this.text(s);
    if (text === "") return Cell.Blank;
    if (this.#gapWords.has(text)) return Cell.Gap;
    const { moment } = this.slots[s]!;
    const number = moment === null ? parseNumber(text, this.decimal) : moment(text);
    this.value[s] = number;
    if (Number.isNaN(number)) return Cell.Fault;
    if (number === NOT_A_NUMBER || this.#gapNumbers.has(number)) return Cell.Gap;
    return Math.abs(number) >= OVER_RANGE ? Cell.OverRange : Cell.Good;
  }
}
