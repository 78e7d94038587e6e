import { pcg32 } from "../../../stages/numerics/random.js";
import { type HeaterPulses, heaterPulses } from "../../../stages/pulses/heater-pulses.js";
import { simulateNight } from "../../../stages/simulate/night.js";
import type { Scenario } from "../../../stages/simulate/scenario.js";
import { temperature_K } from "../../../stages/simulate/thermometer.js";
import type { TemperatureTrace } from "../../../stages/thermometry/types.js";
import { aCell } from "../simulate/a-cell.js";

/** Pulses on a body of 0.1 mJ/K with 0.6 mJ/K of liquid, at four temperatures from 0.5 K to 0.8 K. */
export interface SimulatedPulses {
  readonly interval_s: number;
  readonly clockOffset_s: number;
  readonly duration_s?: number;
  readonly pulses?: number;
  /** g in G = g·T³ between body and liquid. At 0.5 K and 3e-3 the body runs 2 mK ahead, settled within 0.2 s. */
  readonly boundary_W_per_K4?: number;
  readonly lag_s?: number;
  /** A heater log sampled at this interval; events where left out. */
  readonly heaterInterval_s?: number;
  readonly noise?: number;
  readonly seed?: number;
}

/** By the simulator, which steps the cell's equations and knows nothing of how onsets are read. */
export function simulatedPulses(wanted: SimulatedPulses): {
  readonly trace: TemperatureTrace;
  readonly heater: HeaterPulses;
} {
  const base = aCell();
  const scenario: Scenario = {
    ...base,
    cell: {
      ...base.cell,
      addenda: [{ coefficient: 1e-4, power: 0 }],
      boundary_W_per_K4: wanted.boundary_W_per_K4 ?? 10,
      heatLeak_W: 2e-8,
    },
    thermometer: { ...base.thermometer, lag_s: wanted.lag_s ?? 0, noise: wanted.noise ?? 1e-5 },
    protocol: {
      ...base.protocol,
      settings_K: [0.5, 0.6, 0.7, 0.8],
      pulsesPerSetting: (wanted.pulses ?? 12) / 4,
      settle_s: 120,
      pulseLength_s: wanted.duration_s ?? 10,
      wait_s: 120,
    },
    sampling: { ...base.sampling, interval_s: wanted.interval_s },
    heater: {
      ...base.heater,
      kind: wanted.heaterInterval_s === undefined ? "events" : "sampled",
      interval_s: wanted.heaterInterval_s ?? 1,
      clockOffset_s: wanted.clockOffset_s,
    },
  };
  // Steps good to 1e-7: a hundredth of the noise.
  const night = simulateNight(scenario, pcg32(wanted.seed ?? 1), { tolerance: 1e-7 });
  const { time_s, resistance_Ohm } = night.thermometer;
  let guess_K = 0.5;
  const temperature = resistance_Ohm.map((R) => {
    guess_K = temperature_K(scenario.thermometer.law, R, guess_K);
    return guess_K;
  });
  return {
    trace: { time_s, temperature_K: temperature, flag: new Uint8Array(time_s.length) },
    heater: heaterPulses(night.heater, { lead_resistance_Ohm: 0, lead_share: 0 }),
  };
}
