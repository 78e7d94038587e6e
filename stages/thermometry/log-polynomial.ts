import type { LogPolynomialConfig } from "./config.js";
import { checkMonotonic } from "./monotonic.js";
import type { ResistanceCurve } from "./types.js";

/**
 * ln T = Σ aᵢ (ln R)ⁱ, T in K and R in Ohm, by Horner's rule.
 * @throws InputError where the curve gives no temperature or is not monotonic within its range
 */
export function logPolynomial(config: LogPolynomialConfig): ResistanceCurve {
  const coefficients = Float64Array.from(config.coefficients);
  const [low, high] = [config.resistance_range[0].value, config.resistance_range[1].value];
  const temperature_K = (resistance: number): number => {
    if (!(resistance >= low && resistance <= high)) return Number.NaN;
    const x = Math.log(resistance);
    let sum = 0;
    for (let i = coefficients.length - 1; i >= 0; i--) sum = sum * x + coefficients[i]!;
    return Math.exp(sum);
  };
  const lnT = (resistance: number) => temperature_K(Math.min(Math.max(resistance, low), high));
  return {
    form: "log-polynomial",
    resistanceRange_Ohm: [low, high],
    temperatureRange_K: checkMonotonic({
      key: "calibration.coefficients",
      lnRange: [Math.log(low), Math.log(high)],
      temperature_K: lnT,
    }),
    temperature_K,
  };
}
