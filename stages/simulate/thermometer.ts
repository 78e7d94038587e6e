import { normal, slowNoise } from "./random.js";
import type { Thermometer } from "./scenario.js";

/** What instruments write where a reading is over-range (SCPI-1999, volume 1, 7.2.1.4). */
export const OVER_RANGE = 9.9e37;

/** R(T) of a doped-germanium element: ln(R/Ohm) = Σ cᵢ(ln T/K)^i. */
export function resistance_Ohm(law: readonly number[], T_K: number): number {
  const x = Math.log(T_K);
  let sum = 0;
  for (let i = law.length - 1; i >= 0; i--) sum = sum * x + law[i]!;
  return Math.exp(sum);
}

/** d ln R/d ln T, how many per cent of R a per cent of T makes. */
export function sensitivity(law: readonly number[], T_K: number): number {
  const x = Math.log(T_K);
  let sum = 0;
  for (let i = law.length - 1; i >= 1; i--) sum = sum * x + i * law[i]!;
  return sum;
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
    const read_Ohm = resistance_Ohm(law, T_K) * (1 + relative);
    return resolution_Ohm > 0 ? Math.round(read_Ohm / resolution_Ohm) * resolution_Ohm : read_Ohm;
  };
}
