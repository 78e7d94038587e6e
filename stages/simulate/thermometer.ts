import { digitise } from "./digits.js";
import { normal, slowNoise } from "./random.js";
import type { Thermometer } from "./scenario.js";

/** What instruments write where a reading is over-range (SCPI-1999). */
export const OVER_RANGE = 9.9e37;

/** R(T) of a doped-germanium element: ln(R/Ohm) = Σ cᵢ(ln T/K)^i. */
export function resistance_Ohm(law: readonly number[], T_K: number): number {
  const x = Math.log(T_K);
  let sum = 0;
  for (let i = law.length - 1; i >= 0; i--) sum = sum * x + law[i]!;
  return Math.exp(sum);
}

/** The temperature at which the element has that resistance. R falls as T rises, so Newton's method needs no luck. */
export function temperature_K(law: readonly number[], R_Ohm: number, guess_K: number): number {
  const aim = Math.log(R_Ohm);
  let x = Math.log(guess_K);
  for (let round = 0; round < 100; round++) {
    let value = 0;
    let slope = 0;
    for (let i = law.length - 1; i >= 0; i--) {
      slope = slope * x + value;
      value = value * x + law[i]!;
    }
    const change = (aim - value) / slope;
    x += Math.min(0.3, Math.max(-0.3, change));
    if (Math.abs(change) < 1e-15) break;
  }
  return Math.exp(x);
}

/**
 * One reading after the other of a sensor at T, spoilt as real ones are.
 * @returns a function of the sensor's temperature and the time since the last reading
 */
export function reader(
  thermometer: Thermometer,
  random: () => number,
): (T_K: number, elapsed_s: number) => number {
  const { law, noise, spikes, overRangeShare, resolution_Ohm } = thermometer;
  const slow = thermometer.slowNoise > 0 ? slowNoise(thermometer.slowNoiseBand_s, random) : () => 0;
  return (T_K, elapsed_s) => {
    let relative = thermometer.slowNoise * slow(elapsed_s);
    if (noise > 0) relative += noise * normal(random);
    if (spikes.share > 0 && random() < spikes.share) relative += spikes.size * normal(random);
    if (overRangeShare > 0 && random() < overRangeShare) return OVER_RANGE;
    return digitise(resistance_Ohm(law, T_K) * (1 + relative), resolution_Ohm);
  };
}
