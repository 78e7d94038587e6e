import { digitise } from "./digits.js";
import { normal } from "./random.js";
import type { Cell, HeaterReading } from "./scenario.js";

/** A pulse as it was driven, on the thermometer's clock. */
export interface DrivenPulse {
  readonly start_s: number;
  readonly end_s: number;
  readonly current_A: number;
}

/** One row a pulse. Every column has length n; times on the heater's clock. */
export interface EventColumns {
  readonly kind: "events";
  readonly time_s: Float64Array;
  readonly duration_s: Float64Array;
  readonly current_A: Float64Array;
  readonly voltage_V: Float64Array;
}

/** Current and voltage against time. Every column has length n; times on the heater's clock. */
export interface SampleColumns {
  readonly kind: "sampled";
  readonly time_s: Float64Array;
  readonly current_A: Float64Array;
  readonly voltage_V: Float64Array;
}
export type HeaterColumns = EventColumns | SampleColumns;

/** What the heater's meters write down. The voltage taps sit at the heater: lead heat is not in V·I. */
export function readHeater(
  pulses: readonly DrivenPulse[],
  end_s: number,
  cell: Cell,
  reading: HeaterReading,
  random: () => number,
): HeaterColumns {
  const read = (current_A: number) => ({
    current_A: digitise(
      reading.currentGain * current_A * (1 + reading.relativeNoise * normal(random)) +
        reading.currentOffset_A +
        reading.currentNoise_A * normal(random),
      reading.currentResolution_A,
    ),
    voltage_V: digitise(
      reading.voltageGain *
        current_A *
        cell.heaterResistance_Ohm *
        (1 + reading.relativeNoise * normal(random)) +
        reading.voltageOffset_V +
        reading.voltageNoise_V * normal(random),
      reading.voltageResolution_V,
    ),
  });
  if (reading.kind === "events") {
    const rows = pulses.map((pulse) => read(pulse.current_A));
    return {
      kind: "events",
      time_s: Float64Array.from(pulses, (pulse) => pulse.start_s - reading.clockOffset_s),
      duration_s: Float64Array.from(pulses, (pulse) => pulse.end_s - pulse.start_s),
      current_A: Float64Array.from(rows, (row) => row.current_A),
      voltage_V: Float64Array.from(rows, (row) => row.voltage_V),
    };
  }
  const count = Math.floor(end_s / reading.interval_s);
  const time_s = new Float64Array(count);
  const current_A = new Float64Array(count);
  const voltage_V = new Float64Array(count);
  let next = 0;
  for (let i = 0; i < count; i++) {
    time_s[i] = i * reading.interval_s;
    // All times are whole ms; the µs keeps rounding from deciding on which side of an edge a sample falls.
    const true_s = time_s[i]! + reading.clockOffset_s + 1e-6;
    while (next < pulses.length && pulses[next]!.end_s <= true_s) next++;
    const pulse = pulses[next];
    const row = read(pulse !== undefined && pulse.start_s <= true_s ? pulse.current_A : 0);
    current_A[i] = row.current_A;
    voltage_V[i] = row.voltage_V;
  }
  return { kind: "sampled", time_s, current_A, voltage_V };
}
