import { SampleFlag, type ThermometerLog } from "../ingest/types.js";
import { bodyTemperature_K } from "./self-heating.js";
import type { Calibration, TemperatureTrace } from "./types.js";

/**
 * Resistance → temperature of the body, sample by sample, the sensor's self-heating taken off. Readings outside the
 * calibration have no temperature, nor have those that the self-heating alone would make: they are flagged
 * OutsideCalibration, never extrapolated.
 * @returns columns as long as the log's; `time_s` is the log's own
 */
export function toTemperature(
  log: ThermometerLog,
  calibration: Pick<Calibration, "temperature_K" | "selfHeating">,
): TemperatureTrace {
  const n = log.time_s.length;
  const flag = log.flag.slice();
  const temperature_K = new Float64Array(n);
  const { selfHeating } = calibration;
  const body_K = (resistance: number): number => {
    const sensor_K = calibration.temperature_K(resistance);
    return selfHeating === null ? sensor_K : bodyTemperature_K(selfHeating, sensor_K, resistance);
  };
  for (let i = 0; i < n; i++) {
    const temperature = flag[i] === 0 ? body_K(log.resistance_Ohm[i]!) : Number.NaN;
    temperature_K[i] = temperature;
    if (flag[i] === 0 && Number.isNaN(temperature)) flag[i] = SampleFlag.OutsideCalibration;
  }
  return { time_s: log.time_s, temperature_K, flag };
}
