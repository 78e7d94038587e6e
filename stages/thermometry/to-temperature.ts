import { SampleFlag, type ThermometerLog } from "../ingest/types.js";
import type { Calibration, TemperatureTrace } from "./types.js";

/**
 * Resistance → temperature, sample by sample. Readings outside the calibration have no temperature: they are flagged
 * OutsideCalibration, never extrapolated.
 * @returns columns as long as the log's; `time_s` is the log's own
 */
export function toTemperature(log: ThermometerLog, calibration: Calibration): TemperatureTrace {
  const n = log.time_s.length;
  const flag = log.flag.slice();
  const temperature_K = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const temperature = flag[i] === 0 ? calibration.temperature_K(log.resistance_Ohm[i]!) : Number.NaN;
    temperature_K[i] = temperature;
    if (flag[i] === 0 && Number.isNaN(temperature)) flag[i] = SampleFlag.OutsideCalibration;
  }
  return { time_s: log.time_s, temperature_K, flag };
}
