import { InputError } from "../errors.js";
import { type CubicSpline, cubicSpline } from "../numerics/cubic-spline.js";
import type { ResistanceCurve } from "./types.js";

/** A calibration's points as read. Every column has length n, rows in either order. */
export interface CalibrationTable {
  readonly file: string;
  /** 1-based line of each row. */
  readonly line: Int32Array;
  readonly resistance_Ohm: Float64Array;
  readonly temperature_K: Float64Array;
}

/** A cubic spline with an end condition of its own needs as many. */
const FEWEST_ROWS = 4;

function checkRows({ file, line, resistance_Ohm, temperature_K }: CalibrationTable): void {
  const n = resistance_Ohm.length;
  if (n < FEWEST_ROWS)
    throw new InputError({
      file,
      value: `${n} rows`,
      expected: `a calibration table of at least ${FEWEST_ROWS} rows`,
      wayOut: "add calibration points, or use form: log-polynomial or form: chebyshev",
    });
  for (let i = 0; i < n; i++)
    for (const [name, value] of [
      ["resistance", resistance_Ohm[i]!],
      ["temperature", temperature_K[i]!],
    ] as const)
      if (!(value > 0 && value < Number.POSITIVE_INFINITY))
        throw new InputError({
          file,
          line: line[i]!,
          column: name,
          value: String(value),
          expected: `a ${name} above zero`,
          wayOut: "mend or leave out this row",
        });
}

/** Indices of the rows from the lowest resistance to the highest. */
function rising({ file, line, resistance_Ohm, temperature_K }: CalibrationTable): number[] {
  const order = Array.from(resistance_Ohm, (_, i) => i).sort(
    (a, b) => resistance_Ohm[a]! - resistance_Ohm[b]!,
  );
  const first = order[0]!;
  const last = order.at(-1)!;
  const falls = temperature_K[last]! < temperature_K[first]!;
  for (let k = 1; k < order.length; k++) {
    const [a, b] = [order[k - 1]!, order[k]!];
    const later = Math.max(line[a]!, line[b]!);
    if (resistance_Ohm[a] === resistance_Ohm[b])
      throw new InputError({
        file,
        line: later,
        column: "resistance",
        value: String(resistance_Ohm[b]),
        expected: `each resistance once; line ${Math.min(line[a]!, line[b]!)} has it too`,
        wayOut: "leave one of the two rows out, or put their mean in their place",
      });
    const step = temperature_K[b]! - temperature_K[a]!;
    if (falls ? step >= 0 : step <= 0)
      throw new InputError({
        file,
        line: later,
        column: "temperature",
        value: String(temperature_K[line[a]! > line[b]! ? a : b]),
        expected: `temperatures that ${falls ? "fall" : "rise"} as the resistance rises, as in the rest of the table`,
        wayOut: "check this row against the calibration certificate and the rows beside it",
      });
  }
  return order;
}

/**
 * The slope of a cubic is a parabola: on each interval it is least or greatest at the ends or where the curvature,
 * which is linear, goes through zero.
 * @returns the interval on which the spline turns back, or −1
 */
function turnsBackOn(spline: CubicSpline, knots: Float64Array): number {
  const way = Math.sign(spline.value(knots.at(-1)!) - spline.value(knots[0]!));
  for (let i = 0; i + 1 < knots.length; i++) {
    const [a, b] = [knots[i]!, knots[i + 1]!];
    const [bendA, bendB] = [spline.curvature(a), spline.curvature(b)];
    const least = [spline.slope(a), spline.slope(b)];
    if (bendA * bendB < 0) least.push(spline.slope(a + ((b - a) * bendA) / (bendA - bendB)));
    if (least.some((slope) => !(way * slope > 0))) return i;
  }
  return -1;
}

/**
 * Cubic spline of ln T against ln R through a table's points, not-a-knot at both ends.
 * @throws InputError for too few rows, values not above zero, equal resistances, and where the table or the spline
 * between two of its points is not monotonic
 * @see README.md
 */
export function calibrationTable(table: CalibrationTable): ResistanceCurve {
  checkRows(table);
  const order = rising(table);
  const { resistance_Ohm, temperature_K } = table;
  const knots = Float64Array.from(order, (i) => Math.log(resistance_Ohm[i]!));
  const heights = Float64Array.from(order, (i) => Math.log(temperature_K[i]!));
  const spline = cubicSpline(knots, heights, "not-a-knot");
  const back = turnsBackOn(spline, knots);
  if (back >= 0) {
    const [a, b] = [order[back]!, order[back + 1]!];
    throw new InputError({
      file: table.file,
      line: Math.max(table.line[a]!, table.line[b]!),
      column: "resistance",
      value: `${resistance_Ohm[a]} to ${resistance_Ohm[b]} Ohm`,
      expected: "a smooth calibration; between these two points the curve through the table turns back",
      wayOut: "check both rows for a slip, or add calibration points between them",
    });
  }
  const lowest = resistance_Ohm[order[0]!]!;
  const highest = resistance_Ohm[order.at(-1)!]!;
  const ends = [temperature_K[order[0]!]!, temperature_K[order.at(-1)!]!];
  const cursor = spline.cursor();
  return {
    form: "table",
    resistanceRange_Ohm: [lowest, highest],
    temperatureRange_K: [Math.min(...ends), Math.max(...ends)],
    temperature_K: (resistance) => Math.exp(cursor.value(Math.log(resistance))),
  };
}
