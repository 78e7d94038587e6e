/** A value rounded as its uncertainty deserves: two significant digits of u, as many decimals in both. */
export interface Rounded {
  readonly value: string;
  readonly u: string;
  /** Power of ten that multiplies both; 0 for numbers of ordinary size. */
  readonly exponent: number;
}

const SUPERSCRIPTS: Readonly<Record<string, string>> = {
  "0": "⁰",
  "1": "¹",
  "2": "²",
  "3": "³",
  "4": "⁴",
  "5": "⁵",
  "6": "⁶",
  "7": "⁷",
  "8": "⁸",
  "9": "⁹",
  "-": "⁻",
  "+": "",
  ".": "·",
};

/** −3 as ⁻³. */
export function superscript(exponent: number | string): string {
  return [...String(exponent)].map((sign) => SUPERSCRIPTS[sign] ?? sign).join("");
}

/** Decimal exponent of the leading digit once x is rounded to `digits`: 0.0996 to two digits is 0.10, so −1. */
function leadingExponent(x: number, digits: number): number {
  return Number(x.toExponential(digits - 1).split("e")[1]);
}

/** To a decimal place that may stand left of the point. */
function toPlace(x: number, decimals: number): string {
  if (decimals >= 0) return x.toFixed(decimals);
  const step = 10 ** -decimals;
  return String(Math.round(x / step) * step);
}

/**
 * Rounds by the uncertainty, as JCGM 100:2008, 7.2.6 advises: two digits of u are enough.
 * @param u standard uncertainty, finite and > 0
 */
export function rounded(value: number, u: number): Rounded {
  const leading = value === 0 ? leadingExponent(u, 2) : leadingExponent(Math.max(Math.abs(value), u), 2);
  const exponent = leading < -3 || leading > 5 ? leading : 0;
  const scale = 10 ** -exponent;
  const decimals = 1 - leadingExponent(u, 2) + exponent;
  return {
    value: toPlace(value * scale, decimals),
    u: toPlace(u * scale, decimals),
    exponent,
  };
}

/** "concise": 238.10(60); "plus-minus": 238.10 ± 0.60. */
export type RoundingStyle = "concise" | "plus-minus";

/**
 * A value with its standard uncertainty, both to two significant digits of u.
 * Where u is 0 the value stands alone with up to six digits; a value that is no number gives a dash.
 */
export function roundToUncertainty(value: number, u: number, style: RoundingStyle = "plus-minus"): string {
  if (!Number.isFinite(value)) return "–";
  if (!Number.isFinite(u) || u <= 0) return significant(value, 6);
  const { value: v, u: w, exponent } = rounded(value, u);
  const power = exponent === 0 ? "" : `×10${superscript(exponent)}`;
  // In brackets the digits of u count in units of the last digit of the value: 238.10(60), 8.6500(95), 12340(120).
  if (style === "concise") return `${v}(${bracketDigits(w)})${power}`;
  return exponent === 0 ? `${v} ± ${w}` : `(${v} ± ${w})${power}`;
}

/** 0.060 → 60; an uncertainty above 1 keeps its point: 238.1(1.2). */
function bracketDigits(u: string): string {
  return u.startsWith("0.") ? u.slice(2).replace(/^0+/, "") : u;
}

/** A number to so many significant digits, without trailing zeros; a dash for what is no number. */
export function significant(x: number, digits: number): string {
  if (!Number.isFinite(x)) return "–";
  const short = Number(x.toPrecision(digits));
  const size = Math.abs(short);
  if (size !== 0 && (size < 1e-4 || size >= 1e7)) {
    const [mantissa, exponent] = short.toExponential().split("e");
    return `${mantissa}×10${superscript(Number(exponent))}`;
  }
  return String(short);
}

/** The same, with the zeros that make columns of numbers alike: 0.3200. */
export function withZeros(x: number, digits: number): string {
  if (!Number.isFinite(x)) return "–";
  const text = x.toPrecision(digits);
  return text.includes("e") ? significant(x, digits) : text;
}
