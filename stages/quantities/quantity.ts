import { InputError } from "../errors.js";
import type { Quantity } from "./types.js";
import { DIMENSIONS, type Dimension, expectedUnit, parseUnit, usualUnit } from "./units.js";

const NUMBER = String.raw`[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?`;
/** value [unit] [± uncertainty [%] [unit]], or (value ± uncertainty) unit */
const PLAIN = new RegExp(`^(${NUMBER})\\s*(.*)$`, "s");
const IN_BRACKETS = new RegExp(`^\\(\\s*(${NUMBER})\\s*±\\s*(${NUMBER})\\s*\\)\\s*(.*)$`, "s");

/**
 * Reads a quantity such as "3.015 ± 0.006 cm3", "0.5 ± 2 % mol", "8 h"; after ± a standard uncertainty (k = 1).
 * @returns value and uncertainty in the SI unit of the dimension
 * @throws InputError with the value as written, the dimension wanted and a way out
 */
export function parseQuantity(written: string, dimension: Dimension): Quantity {
  if (/\d,\d/.test(written)) {
    throw new InputError({
      value: written,
      expected: expectedUnit(dimension),
      wayOut: `write a decimal point and no thousands separator: "${written.trim().replace(/(\d),(?=\d)/g, "$1.")}"`,
    });
  }
  const text = written
    .trim()
    .replace(/[\u00a0\u202f\u2009]/g, " ")
    .replace(/\u2212/g, "-")
    .replace(/\+\s*\/\s*-/g, "±");
  try {
    const { value, u } = read(text, dimension);
    if (!Number.isFinite(value) || !Number.isFinite(u)) {
      throw refusal("the number is beyond what a computer holds; check the exponent", dimension);
    }
    if (u < 0) throw refusal("an uncertainty is not negative; drop its sign", dimension);
    return { value, u, text: written.trim() };
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    // The whole quantity is quoted, not the part that offended: that is what a search in the file finds.
    throw new InputError({ ...error.fault, value: written });
  }
}

function read(text: string, dimension: Dimension): { value: number; u: number } {
  const bracketed = IN_BRACKETS.exec(text);
  if (bracketed !== null) {
    const factor = factorOf(bracketed[3]!, dimension);
    return { value: Number(bracketed[1]) * factor, u: Number(bracketed[2]) * factor };
  }
  const [left, right, ...more] = text.split("±");
  if (more.length > 0) throw refusal("write ± once", dimension);
  const [value, valueUnit] = numberAndRest(left!, dimension);
  if (right === undefined) return { value: value * factorOf(valueUnit, dimension), u: 0 };

  const [spread, rest] = numberAndRest(right, dimension);
  if (rest.startsWith("%")) return inPercent(value, valueUnit, spread, rest.slice(1).trim(), dimension);
  const factor = factorOf(valueUnit === "" ? rest : valueUnit, dimension);
  const spreadFactor = valueUnit === "" ? factor : factorOf(rest, dimension);
  return { value: value * factor, u: spread * spreadFactor };
}

/** "0.5 ± 2 % mol" and "0.5 mol ± 2 %" are relative; percent of a plain number must say of what. */
function inPercent(
  value: number,
  valueUnit: string,
  percent: number,
  unitAfter: string,
  dimension: Dimension,
): { value: number; u: number } {
  if (dimension === "dimensionless") {
    if (valueUnit === "%" && unitAfter === "") return { value: value / 100, u: percent / 100 };
    if (valueUnit !== "" || unitAfter !== "1") {
      throw refusal(
        `say of what the percentage is: "${value} ± ${Number(((Math.abs(value) * percent) / 100).toPrecision(6))}" if of the value, ` +
          `"(${value} ± ${percent}) %" if both are percentages`,
        dimension,
      );
    }
  }
  if (valueUnit !== "" && unitAfter !== "") throw refusal("write the unit once, at the end", dimension);
  const factor = factorOf(valueUnit === "" ? unitAfter : valueUnit, dimension);
  return { value: value * factor, u: (Math.abs(value) * factor * percent) / 100 };
}

function numberAndRest(part: string, dimension: Dimension): readonly [number, string] {
  const text = part.trim();
  const match = PLAIN.exec(text);
  if (match === null) {
    throw refusal(`write a number, then its unit, such as "${DIMENSIONS[dimension].example}"`, dimension);
  }
  return [Number(match[1]), match[2]!.trim()];
}

function factorOf(unit: string, dimension: Dimension): number {
  if (unit !== "") return parseUnit(unit, dimension).factor;
  if (dimension === "dimensionless") return 1;
  throw refusal(`add the unit, such as ${usualUnit(dimension)}`, dimension);
}

function refusal(wayOut: string, dimension: Dimension): InputError {
  return new InputError({ expected: expectedUnit(dimension), wayOut });
}
