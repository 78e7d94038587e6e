import { expect, test } from "vitest";
import { pcg32 } from "../../../stages/numerics/random.js";
import { readHeater } from "../../../stages/simulate/heater-log.js";
import type { HeaterReading } from "../../../stages/simulate/scenario.js";
import { expectRelative } from "../../expect-relative.js";
import { aCell } from "./a-cell.js";

const { cell, heater } = aCell();
const PULSES = [
  { start_s: 20.3, end_s: 30.3, current_A: 1e-5 },
  { start_s: 60, end_s: 70, current_A: 2e-5 },
];
const read = (reading: Partial<HeaterReading>) =>
  readHeater(PULSES, 100, cell, { ...heater, ...reading }, pcg32(1));

test("events: what was driven, on the heater's own clock, with the gains of its meters", () => {
  const log = read({ clockOffset_s: 1.5, currentGain: 1.01, voltageGain: 0.98 });
  if (log.kind !== "events") throw new Error("events were asked for");
  // Adding the offset to the heater's clock gives the thermometer's.
  expectRelative(log.time_s, [18.8, 58.5], 1e-14);
  expectRelative(log.duration_s, [10, 10], 1e-13);
  expectRelative(log.current_A, [1.01e-5, 2.02e-5], 1e-14);
  expectRelative(log.voltage_V, [9.8e-3, 1.96e-2], 1e-14);
});

test("sampled: as many samples in a pulse as its length holds, whatever the phase", () => {
  for (const clockOffset_s of [0, 0.3, -2.7]) {
    const log = read({ kind: "sampled", interval_s: 0.5, clockOffset_s });
    const on = [...log.current_A]
      .map((I, i) => [I, log.time_s[i]! + clockOffset_s] as const)
      .filter(([I]) => I > 0);
    expect(on.filter(([I]) => I === 1e-5)).toHaveLength(20);
    expect(on.filter(([I]) => I === 2e-5)).toHaveLength(20);
    for (const [, t] of on) {
      expect(PULSES.some(({ start_s, end_s }) => t >= start_s - 1e-5 && t < end_s)).toBe(true);
    }
  }
});

test("sampled: offsets, noise and digitising show at rest", () => {
  const log = read({
    kind: "sampled",
    interval_s: 0.01,
    currentOffset_A: 4e-10,
    voltageOffset_V: 3e-6,
    currentNoise_A: 1e-9,
    voltageNoise_V: 1e-6,
    relativeNoise: 1e-3,
    currentResolution_A: 1e-10,
  });
  const rest = [...log.time_s.keys()].filter((i) => log.time_s[i]! > 75);
  const mean = (column: Float64Array) => rest.reduce((sum, i) => sum + column[i]!, 0) / rest.length;
  // 2500 samples: means known to 2 % of the noise; four of them. Nothing in proportion to a reading of nothing.
  expect(Math.abs(mean(log.current_A) - 4e-10)).toBeLessThan(8e-11);
  expect(Math.abs(mean(log.voltage_V) - 3e-6)).toBeLessThan(8e-8);
  // Whole tenths of a nA.
  for (const I of log.current_A.slice(0, 50)) {
    expect(Math.abs(I / 1e-10 - Math.round(I / 1e-10))).toBeLessThan(1e-6);
  }
});
