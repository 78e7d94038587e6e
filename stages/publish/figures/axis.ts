import type { Axis } from "vega-lite/types_unstable/axis.js";
import { superscript } from "../rounding.js";

export type LogAxis = Pick<Axis, "values" | "labelExpr" | "tickSize" | "labelOverlap">;

/** "tenths": plain numbers as on a ruler, for less than about one decade; "powers": 10⁻³ and its like. */
export type LogLabels = "tenths" | "powers";

/** All of 1…9 in each decade, and tenths between 1 and 2 where the axis is short. */
function tickMantissas(labels: LogLabels): number[] {
  const whole = [1, 2, 3, 4, 5, 6, 7, 8, 9];
  if (labels === "powers") return whole;
  return [1, 1.1, 1.2, 1.3, 1.4, 1.5, 1.6, 1.7, 1.8, 1.9, ...whole.slice(1)];
}

/** Where an axis of plain numbers is labelled: more in a shorter one. */
function labelledMantissas(decades: number): number[] {
  if (decades < 0.75) return [1, 1.2, 1.5, 2, 3, 4, 5, 6, 7, 8];
  if (decades < 1.5) return [1, 1.5, 2, 3, 4, 6];
  return [1, 2, 5];
}

/**
 * Ticks of a logarithmic axis given by hand: long and labelled, or short between them.
 * @param domain both > 0, the smaller first
 */
export function logAxis(domain: readonly [number, number], labels: LogLabels): LogAxis {
  const [from, to] = domain;
  const labelled = labels === "powers" ? [1] : labelledMantissas(Math.log10(to / from));
  const values: number[] = [];
  const words: Record<string, string> = {};
  for (let decade = Math.floor(Math.log10(from)); decade <= Math.ceil(Math.log10(to)); decade++) {
    for (const mantissa of tickMantissas(labels)) {
      const value = Number(`${mantissa}e${decade}`);
      if (value < from || value > to) continue;
      values.push(value);
      if (labelled.includes(mantissa))
        words[String(value)] = labels === "powers" ? power(decade) : String(value);
    }
  }
  const lookUp = JSON.stringify(words);
  return {
    values,
    labelExpr: `${lookUp}[toString(datum.value)] || ''`,
    tickSize: { condition: { test: `${lookUp}[toString(datum.value)]`, value: 6 }, value: 3 },
    labelOverlap: false,
  };
}

function power(decade: number): string {
  return decade === 0 ? "1" : `10${superscript(decade)}`;
}

/** Smallest and largest of the finite values, moved apart by a factor; for logarithmic axes. */
export function logDomain(values: Iterable<number>, factor: number): [number, number] {
  const [low, high] = extent(values, (x) => x > 0);
  return [low / factor, high * factor];
}

/** Smallest and largest, moved apart by a part of their distance. */
export function linearDomain(values: Iterable<number>, margin: number): [number, number] {
  const [low, high] = extent(values, () => true);
  const room = margin * (high - low || Math.abs(high) || 1);
  return [low - room, high + room];
}

function extent(values: Iterable<number>, counts: (x: number) => boolean): [number, number] {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (const x of values) {
    if (!Number.isFinite(x) || !counts(x)) continue;
    low = Math.min(low, x);
    high = Math.max(high, x);
  }
  return [low, high];
}

/** Logarithmic axes of C against T, with the labels that suit the span. */
export function temperatureAxis(domain: readonly [number, number]): LogAxis {
  return logAxis(domain, domain[1] / domain[0] < 300 ? "tenths" : "powers");
}

export function capacityAxis(domain: readonly [number, number]): LogAxis {
  return logAxis(domain, domain[1] / domain[0] < 12 ? "tenths" : "powers");
}
