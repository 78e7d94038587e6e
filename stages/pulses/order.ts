import { quickselect } from "simple-statistics";

/**
 * Median by quick selection, in place: `values` comes back in another order. A sorted copy would cost five times
 * as much, and this runs several times a window, thousands of windows a night.
 * @param values at least one, none NaN
 */
export function medianOf(values: Float64Array): number {
  // The library's type asks for number[]; it only indexes and swaps, so a typed array serves.
  const array = values as unknown as number[];
  const middle = values.length >>> 1;
  quickselect(array, middle, 0, values.length - 1);
  const upper = values[middle]!;
  if (values.length % 2 === 1) return upper;
  let lower = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < middle; i++) if (values[i]! > lower) lower = values[i]!;
  return (lower + upper) / 2;
}
