import { expect, test } from "vitest";
import { hasThousandsSeparators, parseNumber } from "../../../stages/ingest/number.js";

test("numbers are read as Number() reads them, to the last bit", () => {
  const texts = [
    "0",
    "-0.5",
    "+7",
    ".5",
    "5.",
    "7850.1403",
    "1e3",
    "1.25E-07",
    "-2.5e+12",
    "9007199254740993",
  ];
  texts.push(
    "0.1",
    "0.30000000000000004",
    "1794610800.123456",
    "123456789012345678901234567890",
    "9.9E37",
    "1e-300",
  );
  for (const text of texts) expect(parseNumber(text, "."), text).toBe(Number(text));
});

// Number() is the reference: ECMAScript requires the nearest double for a decimal literal of up to 20 digits.
test("random decimals of 1 to 19 digits equal Number()", () => {
  let state = 7;
  const digit = () => {
    state = (state * 1664525 + 1013904223) >>> 0;
    return Math.floor((state / 2 ** 32) * 10);
  };
  for (let k = 0; k < 20_000; k++) {
    const digits = Array.from({ length: 1 + (k % 19) }, digit).join("");
    const mark = k % (digits.length + 1);
    const text = `${digits.slice(0, mark)}.${digits.slice(mark)}e${(k % 61) - 30}`;
    if (text.startsWith(".e")) continue;
    expect(parseNumber(text, "."), text).toBe(Number(text));
  }
});

test("the decimal comma is read where it is the mark, and nowhere else", () => {
  expect(parseNumber("1234,5", ",")).toBe(1234.5);
  expect(parseNumber("1,2E+3", ",")).toBe(1200);
  expect(parseNumber("1.5", ",")).toBeNaN();
  expect(parseNumber("1,5", ".")).toBeNaN();
});

test("blanks about a number do not matter, blanks within do", () => {
  expect(parseNumber("  1.5 \t\r", ".")).toBe(1.5);
  expect(parseNumber("1 5", ".")).toBeNaN();
});

test("what is no decimal number is none", () => {
  for (const text of [
    "",
    " ",
    "-",
    "+",
    ".",
    "e5",
    "1e",
    "1e+",
    "0x10",
    "Infinity",
    "1_000",
    "1.2.3",
    "--1",
    "1-",
    "12V",
  ])
    expect(parseNumber(text, "."), text).toBeNaN();
});

test("digit groups are recognised, whatever parts them", () => {
  for (const text of ["1,234.5", "1.234,5", "12 345", "1'234'567", "1,234", "-1,234e3"])
    expect(hasThousandsSeparators(text), text).toBe(true);
  for (const text of ["1234.5", "1,5", "12,3456", "OVLD"])
    expect(hasThousandsSeparators(text), text).toBe(false);
});
