import { brentRoot } from "../numerics/brent.js";
import type { Quantity } from "../quantities/types.js";
import type { SelfHeatingConfig } from "./config.js";
import type { Calibration, SelfHeating } from "./types.js";

/** P and the thermal resistance as configured; the ± of both is one, since only their product shows. */
export function selfHeatingOf(config: SelfHeatingConfig): SelfHeating {
  const { thermal_resistance, at, power_law } = config;
  const relative = ({ value, u }: Quantity): number => u / value;
  const { power_W, u_power } = excitation(config);
  return {
    power_W,
    resistance_K_per_W: (temperature_K) => thermal_resistance.value * (temperature_K / at.value) ** power_law,
    powerLaw: power_law,
    u_relative: Math.hypot(
      u_power,
      relative(thermal_resistance),
      // A reference temperature that is off puts the whole power law off.
      power_law * relative(at),
    ),
  };
}

/** Power into the sensor against its resistance, and the relative standard uncertainty of it. */
function excitation({ current, voltage, power }: SelfHeatingConfig): {
  power_W: (resistance_Ohm: number) => number;
  u_power: number;
} {
  if (current !== undefined)
    return { power_W: (R) => current.value ** 2 * R, u_power: (2 * current.u) / current.value };
  if (voltage !== undefined)
    return { power_W: (R) => voltage.value ** 2 / R, u_power: (2 * voltage.u) / voltage.value };
  // The schema asks for one of the three.
  const given = power!;
  return { power_W: () => given.value, u_power: given.u / given.value };
}

/** Far more than Newton's method takes on any sensor that is fit for use; two do where the excess is 10⁻³ of T. */
const ROUNDS = 50;

/**
 * The body's temperature T from T + P·R_th(T) = T_sensor, by Newton's method from T_sensor on.
 *
 * With x the excess over T, p the power law, one round leaves (p(p − 1)/2)·x³ of T: 6·10⁻⁹ at p = −3 and x = 10⁻³,
 * which the next brings below rounding.
 * @returns K; NaN where no body is so cold: for p = −3 the excess is never above a quarter of the sensor's temperature
 */
export function bodyTemperature_K(heating: SelfHeating, sensor_K: number, resistance_Ohm: number): number {
  const power_W = heating.power_W(resistance_Ohm);
  let T = sensor_K;
  for (let round = 0; round < ROUNDS; round++) {
    const excess_K = power_W * heating.resistance_K_per_W(T);
    const slope = 1 + (heating.powerLaw * excess_K) / T;
    if (!(slope > 0)) return Number.NaN;
    const next = T - (T + excess_K - sensor_K) / slope;
    if (!(next > 0)) return Number.NaN;
    // Each round squares what is left.
    if (Math.abs(next - T) <= 1e-8 * T) return next;
    T = next;
  }
  return Number.NaN;
}

/** What one standard uncertainty of the self-heating does to pulses. Every column has length n. */
export interface SelfHeatingEffect {
  /** Change of Q/ΔT over Q/ΔT, for it moves the two ends of a pulse unlike. */
  readonly relative: Float64Array;
  /** Change of T. */
  readonly shift_K: Float64Array;
}

/**
 * Effect on each pulse of power times thermal resistance taken larger by one standard uncertainty: one source, common
 * to all pulses of this thermometer. Both columns have the sign of that change, so they belong together.
 *
 * At a fixed reading T moves by −g(T) per unit of the product, g = δ/(1 + pδ/T), δ = P·R_th(T) (the derivative of
 * the equation solved in {@link bodyTemperature_K}); ΔT by the difference of g over the pulse, and C against ΔT.
 * @param T_K middle of each pulse, as corrected; length n
 * @param dT_K rise of each pulse, as corrected; length n
 */
export function selfHeatingEffect(
  calibration: Calibration,
  T_K: Float64Array,
  dT_K: Float64Array,
): SelfHeatingEffect {
  const { selfHeating: heating } = calibration;
  if (heating === null)
    return { relative: new Float64Array(T_K.length), shift_K: new Float64Array(T_K.length) };
  const g = (T: number): number => {
    const excess_K = heating.power_W(resistanceAt(calibration, heating, T)) * heating.resistance_K_per_W(T);
    return excess_K / (1 + (heating.powerLaw * excess_K) / T);
  };
  return {
    relative: T_K.map(
      (T, i) => ((g(T + dT_K[i]! / 2) - g(T - dT_K[i]! / 2)) / dT_K[i]!) * heating.u_relative,
    ),
    shift_K: T_K.map((T) => -g(T) * heating.u_relative),
  };
}

/** The sensor's resistance on a body at T; that of the nearer end where T is beyond the calibration. */
function resistanceAt(calibration: Calibration, heating: SelfHeating, T_K: number): number {
  if (Number.isNaN(T_K)) return Number.NaN;
  const [low, high] = calibration.resistanceRange_Ohm;
  const perWatt_K = heating.resistance_K_per_W(T_K);
  const off_K = (R: number): number => calibration.temperature_K(R) - T_K - heating.power_W(R) * perWatt_K;
  const [atLow, atHigh] = [off_K(low), off_K(high)];
  if (atLow * atHigh > 0) return Math.abs(atLow) < Math.abs(atHigh) ? low : high;
  return brentRoot(off_K, low, high, atLow, atHigh);
}
