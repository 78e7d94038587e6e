import type { TimeColumn } from "./config.js";

export type TimeKind = "relative" | "absolute";

/** Whether a log's times count from the night's own zero or name a moment. */
export function timeKind(unit: TimeColumn["unit"]): TimeKind {
  return unit === "epoch" || unit === "epoch-ms" || unit === "iso8601" ? "absolute" : "relative";
}

/** Days from 1970-01-01 to a date of the proleptic Gregorian calendar (H. Hinnant, days_from_civil). */
function epochDay(year: number, month: number, day: number): number {
  const y = month <= 2 ? year - 1 : year;
  const era = Math.floor(y / 400);
  const yearOfEra = y - era * 400;
  const dayOfYear = Math.floor((153 * (month + (month > 2 ? -3 : 9)) + 2) / 5) + day - 1;
  return (
    era * 146_097 +
    yearOfEra * 365 +
    Math.floor(yearOfEra / 4) -
    Math.floor(yearOfEra / 100) +
    dayOfYear -
    719_468
  );
}

function daysInMonth(year: number, month: number): number {
  if (month === 2) return year % 4 === 0 && (year % 100 !== 0 || year % 400 === 0) ? 29 : 28;
  return month === 4 || month === 6 || month === 9 || month === 11 ? 30 : 31;
}

const ISO_8601 =
  /^\s*(\d{4})-(\d\d)-(\d\d)[Tt ](\d\d):(\d\d)(?::(\d\d)(?:[.,](\d+))?)?\s*([Zz]|[+-]\d\d(?::?\d\d)?)?\s*$/;

/** "UTC", "Z" or ±hh[:mm] → seconds east of Greenwich. */
export function zoneOffset_s(zone: string): number {
  const match = /^([+-])(\d\d):?(\d\d)?$/.exec(zone);
  if (match === null) return 0;
  return (match[1] === "-" ? -1 : 1) * (Number(match[2]) * 3600 + Number(match[3] ?? 0) * 60);
}

/**
 * Unix time of an ISO 8601 date and time (year first, T or a blank between, fraction of any length).
 * @param offset_s the zone where the text names none, seconds east of Greenwich
 * @returns s; NaN if the text is no such time or no such day exists. A leap second counts as the second after it.
 */
export function parseIso8601(text: string, offset_s: number): number {
  const match = ISO_8601.exec(text);
  if (match === null) return Number.NaN;
  const [, year, month, day, hour, minute, second, fraction, zone] = match;
  const [y, mo, d] = [Number(year), Number(month), Number(day)];
  const [h, mi, s] = [Number(hour), Number(minute), Number(second ?? 0)];
  if (mo < 1 || mo > 12 || d < 1 || d > daysInMonth(y, mo) || h > 23 || mi > 59 || s > 60) return Number.NaN;
  const whole = epochDay(y, mo, d) * 86_400 + h * 3600 + mi * 60 + s;
  const offset = zone === undefined ? offset_s : zoneOffset_s(zone);
  return whole - offset + (fraction === undefined ? 0 : Number(`0.${fraction}`));
}

// Later than the year 2200, a "Unix time in seconds" is one in milliseconds.
export const LATEST_EPOCH_S = 7.26e9;

/** Numbers of a time column → seconds: times `factor`, then over `divisor` (both exact, so that 0.1 s stays 0.1 s). */
export function timeScale(unit: TimeColumn["unit"]): { factor: number; divisor: number } {
  switch (unit) {
    case "ms":
    case "epoch-ms":
      return { factor: 1, divisor: 1000 };
    case "min":
      return { factor: 60, divisor: 1 };
    case "h":
      return { factor: 3600, divisor: 1 };
    default:
      return { factor: 1, divisor: 1 };
  }
}

/** What an unreadable time cell should have held, in the words of an InputError. */
export function timeExpectation(unit: TimeColumn["unit"]): string {
  switch (unit) {
    case "epoch":
      return "a Unix time in s";
    case "epoch-ms":
      return "a Unix time in ms";
    case "iso8601":
      return "an ISO 8601 time such as 2026-11-14T21:30:00.5";
    default:
      return `a time in ${unit}`;
  }
}

/** How to mend an unreadable time cell. */
export function timeWayOut(unit: TimeColumn["unit"]): string {
  switch (unit) {
    case "epoch":
      return "write unit: epoch-ms if the log counts milliseconds, unit: iso8601 for dates, unit: s for times from the log's own zero";
    case "epoch-ms":
      return "write unit: epoch if the log counts seconds, or unit: iso8601 for dates";
    case "iso8601":
      return "have the instrument write year-month-day, or write unit: epoch or unit: s if these are numbers";
    default:
      return "write unit: iso8601 if these are dates, or add the span to exclude: in run.yaml";
  }
}
