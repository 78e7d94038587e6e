import { median } from "simple-statistics";
import type { Dialect } from "./dialect.js";
import type { LogSummary } from "./types.js";

/** A span without a usable sample is a gap from this many sampling intervals on (common practice, no source). */
const GAP_INTERVALS = 10;
const INTERVALS_LOOKED_AT = 2001;

/** Median of up to 2001 intervals between neighbouring usable samples, spread over the log; NaN for fewer than two. */
function samplingInterval(time_s: Float64Array): number {
  const n = time_s.length - 1;
  const step = Math.max(1, Math.floor(n / INTERVALS_LOOKED_AT));
  const intervals: number[] = [];
  for (let i = 0; i < n; i += step) intervals.push(time_s[i + 1]! - time_s[i]!);
  return intervals.length === 0 ? Number.NaN : median(intervals);
}

/**
 * What one log held.
 * @param rows samples, usable or not
 * @param usable_s times of the usable samples, increasing
 */
export function summarize(
  log: LogSummary["log"],
  file: string,
  rows: number,
  usable_s: Float64Array,
  regular: "sampled" | "events",
  dialect: Dialect,
): LogSummary {
  const gaps: { from_s: number; to_s: number }[] = [];
  const longest_s = regular === "sampled" ? GAP_INTERVALS * samplingInterval(usable_s) : Number.NaN;
  for (let i = 1; i < usable_s.length; i++)
    if (usable_s[i]! - usable_s[i - 1]! > longest_s)
      gaps.push({ from_s: usable_s[i - 1]!, to_s: usable_s[i]! });
  return {
    log,
    file,
    rows,
    usable: usable_s.length,
    from_s: usable_s[0] ?? Number.NaN,
    to_s: usable_s.at(-1) ?? Number.NaN,
    gaps,
    dialect: { delimiter: dialect.delimiter, decimal: dialect.decimal },
  };
}
