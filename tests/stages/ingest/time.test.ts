import { expect, test } from "vitest";
import { parseIso8601, zoneOffset_s } from "../../../stages/ingest/time.js";

// Date.parse is the reference: ECMA-262, 21.4.1.32, reads this form of ISO 8601 to the millisecond.
test("ISO 8601 times agree with Date.parse", () => {
  const texts = [
    "1970-01-01T00:00:00Z",
    "2026-11-14T21:30:00.125Z",
    "2024-02-29T23:59:59+01:00",
    "1999-12-31T00:00:00-05:30",
  ];
  texts.push("2000-03-01T12:00:00Z", "2100-02-28T12:00:00Z", "2026-11-14T21:30Z");
  for (const text of texts) expect(parseIso8601(text, 0), text).toBe(Date.parse(text) / 1000);
});

test("every day of 400 years has its number", () => {
  for (let day = -40_000; day < 110_000; day += 1) {
    const date = new Date(day * 86_400_000).toISOString().slice(0, 10);
    if (parseIso8601(`${date} 00:00:00`, 0) !== day * 86_400) expect.fail(date);
  }
});

test("a blank may stand for T, a comma for the point, and the zone for the configured one", () => {
  const expected = Date.parse("2026-11-14T20:30:00.5Z") / 1000;
  expect(parseIso8601("2026-11-14 21:30:00,5", 3600)).toBe(expected);
  expect(parseIso8601("2026-11-14t21:30:00.5+0100", -7200)).toBe(expected);
  expect(parseIso8601(" 2026-11-14 20:30:00.5 z ", 3600)).toBe(expected);
  expect(parseIso8601("2026-11-14T21:30:00.500000+01", 0)).toBe(expected);
});

test("microseconds are kept: a double near 2·10⁹ s resolves 0.24 µs", () => {
  const whole = Date.parse("2026-11-14T21:30:00Z") / 1000;
  expect(Math.abs(parseIso8601("2026-11-14T21:30:00.123456Z", 0) - whole - 0.123456)).toBeLessThan(2.4e-7);
});

test("a leap second is the second after it", () => {
  expect(parseIso8601("2016-12-31T23:59:60Z", 0)).toBe(Date.parse("2017-01-01T00:00:00Z") / 1000);
});

test("other orders of the date and impossible days are refused", () => {
  for (const text of [
    "14.11.2026 21:30",
    "11/14/2026 21:30:00",
    "2026-13-01T00:00",
    "2026-02-30T00:00",
    "2026-11-14",
    "2026-11-14T24:00:00",
    "2026-11-14T21:60:00",
    "21:30:00",
  ])
    expect(parseIso8601(text, 0), text).toBeNaN();
});

test("zones are seconds east of Greenwich", () => {
  expect(zoneOffset_s("UTC")).toBe(0);
  expect(zoneOffset_s("+05:30")).toBe(19_800);
  expect(zoneOffset_s("-03:00")).toBe(-10_800);
});
