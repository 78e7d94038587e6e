import { InputError } from "../errors.js";
import type { ChebyshevConfig } from "./config.js";
import { checkMonotonic } from "./monotonic.js";
import type { ResistanceCurve } from "./types.js";

/** Σ aᵢ cos(i·arccos x) by C. W. Clenshaw's recurrence (Math. Tables Aids Comput. 9, 118 (1955)); a₀ counts in full. */
function chebyshevSum(coefficients: Float64Array, x: number): number {
  let last = 0;
  let beforeLast = 0;
  for (let i = coefficients.length - 1; i >= 1; i--) {
    const next = 2 * x * last - beforeLast + coefficients[i]!;
    beforeLast = last;
    last = next;
  }
  return x * last - beforeLast + coefficients[0]!;
}

// A range worked out from the variable's own limits by exp() misses −1 and 1 by rounding only.
const ROUNDING = 1e-12;

/**
 * Chebyshev series in x = [(Z − Zl) − (Zu − Z)]/(Zu − Zl), Z the logarithm of R in Ohm.
 * @throws InputError if the resistance range reaches beyond Zl…Zu, and where the curve gives no temperature or is not
 * monotonic within its range
 */
export function chebyshev(config: ChebyshevConfig): ResistanceCurve {
  const coefficients = Float64Array.from(config.coefficients);
  const [zLow, zHigh] = config.variable_range;
  const [low, high] = [config.resistance_range[0].value, config.resistance_range[1].value];
  const perLn = config.variable === "log10 R" ? Math.LOG10E : 1;
  const scaled = (resistance: number) => (2 * Math.log(resistance) * perLn - zLow - zHigh) / (zHigh - zLow);
  for (const [i, end] of [low, high].entries())
    if (Math.abs(scaled(end)) > 1 + ROUNDING)
      throw new InputError({
        key: `calibration.resistance_range[${i}]`,
        value: config.resistance_range[i]!.text,
        expected: `a resistance whose ${config.variable} is within variable_range, ${zLow} to ${zHigh}`,
        wayOut:
          "leave resistance_range out to use all of variable_range, or check both against the certificate",
      });
  const inverse: (y: number) => number =
    config.quantity === "T"
      ? (y) => y
      : config.quantity === "ln T"
        ? Math.exp
        : (y) => Math.exp(y * Math.LN10);
  const temperature_K = (resistance: number): number =>
    resistance >= low && resistance <= high
      ? inverse(chebyshevSum(coefficients, scaled(resistance)))
      : Number.NaN;
  return {
    form: "chebyshev",
    resistanceRange_Ohm: [low, high],
    temperatureRange_K: checkMonotonic({
      key: "calibration.coefficients",
      lnRange: [Math.log(low), Math.log(high)],
      temperature_K: (resistance) => temperature_K(Math.min(Math.max(resistance, low), high)),
    }),
    temperature_K,
  };
}
