import { InputError } from "../errors.js";
import { cellCount } from "./cells.js";
import type { LogFormat, ValueColumn } from "./config.js";
import { numberFault } from "./dialect.js";
import type { LogSource } from "./encoding.js";
import { parseNumber } from "./number.js";
import { openLog } from "./rows.js";

/** Columns of a small table in which every cell must be a number. Every column has length n. */
export interface NumberTable {
  /** SI, in the order asked for. */
  readonly columns: readonly Float64Array[];
  /** 1-based line of each row. */
  readonly line: Int32Array;
}

/**
 * Reads a calibration or another table that may have no gaps.
 * @throws InputError for a missing column, and for the first cell that is no number
 */
export async function readTable(
  source: LogSource,
  file: string,
  columns: readonly ValueColumn[],
  format: LogFormat,
): Promise<NumberTable> {
  const wanted = columns.map(({ column }) => ({ column, holds: "number" as const }));
  const { dialect, batches } = await openLog(source, wanted, format, file);
  const numbers: number[][] = columns.map(() => []);
  const lines: number[] = [];
  for await (const { rows, lineOf } of batches)
    rows.forEach((row, r) => {
      if (row.every((cell) => cell.trim() === "")) return;
      const line = lineOf(r);
      const surplus = row.slice(dialect.width).some((cell) => cell.trim() !== "");
      if (row.length < dialect.least || surplus)
        throw new InputError({
          file,
          line,
          value: cellCount(row.length),
          expected: `${cellCount(dialect.width)} as in the other rows`,
          wayOut: "mend this row",
        });
      lines.push(line);
      columns.forEach(({ column, unit, factor }, k) => {
        const cell = row[dialect.indices[k]!] ?? "";
        const number = parseNumber(cell, dialect.decimal);
        if (Number.isNaN(number)) {
          const { expected, wayOut } = numberFault(cell, dialect.decimal, `a number in ${unit}`);
          throw new InputError({
            file,
            line,
            column,
            value: cell.trim(),
            expected,
            wayOut: wayOut ?? "mend or leave out this row; a table has no gaps",
          });
        }
        numbers[k]!.push(number * factor);
      });
    });
  return { columns: numbers.map((column) => Float64Array.from(column)), line: Int32Array.from(lines) };
}
