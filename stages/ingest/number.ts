/** Code of the decimal mark in a log: "." or ",". */
export type DecimalMark = "." | ",";

const POWERS_OF_TEN = Float64Array.from({ length: 23 }, (_, i) => Number(`1e${i}`));
const PLAIN_NUMBER = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/;

function slowNumber(cell: string, mark: DecimalMark): number {
  const text = cell.trim();
  const pointed = mark === "," ? text.replace(",", ".") : text;
  if (mark === "," && text.includes(".")) return Number.NaN;
  return PLAIN_NUMBER.test(pointed) ? Number(pointed) : Number.NaN;
}

/**
 * The number in a cell, blanks around it allowed; NaN if it holds anything else (or nothing).
 *
 * Up to 2⁵³ with a power of ten up to 22 the quotient of two exact doubles is the nearest double (W. D. Clinger,
 * PLDI 1990), so the loop gives what Number() gives at a fraction of its cost; the rest goes to Number().
 */
export function parseNumber(cell: string, mark: DecimalMark): number {
  const n = cell.length;
  const markCode = mark === "." ? 46 : 44;
  let i = 0;
  let code = n > 0 ? cell.charCodeAt(0) : 0;
  while (code === 32 && ++i < n) code = cell.charCodeAt(i);
  const negative = code === 45;
  if (negative || code === 43) i++;
  let mantissa = 0;
  let digits = 0;
  let beforeMark = -1;
  for (; i < n; i++) {
    code = cell.charCodeAt(i);
    if (code >= 48 && code <= 57) {
      mantissa = mantissa * 10 + (code - 48);
      digits++;
    } else if (code === markCode && beforeMark < 0) beforeMark = digits;
    else break;
  }
  let power = beforeMark < 0 ? 0 : beforeMark - digits;
  if (i < n && (code === 69 || code === 101) && digits > 0) {
    let exponent = 0;
    let exponentDigits = 0;
    code = ++i < n ? cell.charCodeAt(i) : 0;
    const down = code === 45;
    if (down || code === 43) i++;
    for (; i < n; i++) {
      code = cell.charCodeAt(i);
      if (code < 48 || code > 57) break;
      exponent = exponent * 10 + (code - 48);
      exponentDigits++;
    }
    if (exponentDigits === 0) return Number.NaN;
    power += down ? -exponent : exponent;
  }
  while (i < n && (code === 32 || code === 13 || code === 9)) code = ++i < n ? cell.charCodeAt(i) : 0;
  if (i < n || digits === 0 || mantissa > Number.MAX_SAFE_INTEGER || power > 22 || power < -22)
    return slowNumber(cell, mark);
  const size = power < 0 ? mantissa / POWERS_OF_TEN[-power]! : mantissa * POWERS_OF_TEN[power]!;
  return negative ? -size : size;
}

const GROUPED = /^[+-]?\d{1,3}(?:[ '’.,_\u00a0\u202f]\d{3})+(?:[.,]\d*)?(?:[eE][+-]?\d+)?$/;

/** Whether a text that is no number looks like one with its thousands set apart: "1,234.5", "1 234,5", "1'234". */
export function hasThousandsSeparators(cell: string): boolean {
  return GROUPED.test(cell.trim());
}
