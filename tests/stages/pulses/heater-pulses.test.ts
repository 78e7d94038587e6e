import { expect, test } from "vitest";
import type { HeaterSamples } from "../../../stages/ingest/types.js";
import { normal, pcg32 } from "../../../stages/numerics/random.js";
import { flagNames } from "../../../stages/pulses/flags.js";
import { heaterPulses } from "../../../stages/pulses/heater-pulses.js";
import { expectRelative } from "../../expect-relative.js";

const WIRING = { lead_resistance_Ohm: 0, lead_share: 0.5 };

/** A 1 kΩ heater at 1 mA, 4 s every 100 s from `first_s` on, read at `interval_s`. */
function sampled(
  interval_s: number,
  first_s: number,
  edit: (I: number, V: number) => [number, number],
): HeaterSamples {
  const n = Math.floor(1000 / interval_s);
  const time_s = Float64Array.from({ length: n }, (_, i) => i * interval_s);
  const on = (t: number) => {
    const phase = (((t - first_s) % 100) + 100) % 100;
    return t >= first_s && phase < 4;
  };
  const rows = Array.from(time_s, (t) => (on(t) ? edit(1e-3, 1) : edit(0, 0)));
  return {
    kind: "sampled",
    time_s,
    current_A: Float64Array.from(rows, ([I]) => I),
    voltage_V: Float64Array.from(rows, ([, V]) => V),
  };
}

test("events: energy is VIt, and the inward part of the lead heat comes on top", () => {
  const events = {
    kind: "events",
    time_s: Float64Array.of(10),
    duration_s: Float64Array.of(4),
    current_A: Float64Array.of(1e-3),
    voltage_V: Float64Array.of(1),
  } as const;
  const pulses = heaterPulses(events, { lead_resistance_Ohm: 2.4, lead_share: 0.5 });
  // 1 mW for 4 s, and half of (1 mA)²·2.4 Ω for 4 s; products of short decimals, so rounding only.
  expectRelative(pulses.Q_J, [4e-3 + 0.5 * 2.4e-6 * 4], 1e-14);
  expectRelative(pulses.lead_heat_J, [4.8e-6], 1e-14);
});

test("sampled: pulses in step with the samples", () => {
  const pulses = heaterPulses(
    sampled(0.5, 50, (I, V) => [I, V]),
    WIRING,
  );
  expect(pulses.pulse.length).toBe(10);
  // Eight samples on; each edge is put halfway between two samples.
  expectRelative(pulses.Q_J, new Float64Array(10).fill(4e-3), 1e-12);
  expect(pulses.start_s[0]).toBeCloseTo(49.75, 9);
});

test("sampled: a length that is no multiple of the interval is shared by all pulses", () => {
  const pulses = heaterPulses(
    sampled(0.7, 50.1, (I, V) => [I, V]),
    WIRING,
  );
  const mean = pulses.Q_J.reduce((sum, Q) => sum + Q, 0) / pulses.Q_J.length;
  // Ten repeats: one sees the length to ±0.7/√6 s, their mean to 0.29/√10 = 0.09 s of 4 s.
  expect(Math.abs(mean / 4e-3 - 1)).toBeLessThan(0.05);
  expect(Math.max(...pulses.Q_J) / Math.min(...pulses.Q_J)).toBeCloseTo(1, 12);
});

test("sampled: a thermal voltage and a reading noise do not make pulses or energy", () => {
  const gaussian = normal(pcg32(5));
  const log = sampled(0.5, 50, (I, V) => [I + 1e-8 * gaussian(), V + 2e-4 + 1e-6 * gaussian()]);
  const pulses = heaterPulses(log, WIRING);
  expect(pulses.pulse.length).toBe(10);
  // 2e-4 of voltage offset would show as 2e-4; the readings' noise over eight samples leaves 4e-6.
  expectRelative(pulses.Q_J, new Float64Array(10).fill(4e-3), 3e-5);
});

test("sampled: a bias that heats all night is drift, not pulse", () => {
  const pulses = heaterPulses(
    sampled(0.5, 50, (I, V) => [I + 1e-5, V + 1e-2]),
    WIRING,
  );
  // (1.01 mA)²·1 kΩ less (0.01 mA)²·1 kΩ.
  expectRelative(pulses.Q_J, new Float64Array(10).fill(4 * (1.01e-3 * 1.01 - 1e-7)), 1e-9);
});

test("a heater that is still on when the log ends is named", () => {
  const log = sampled(0.5, 98, (I, V) => [I, V]);
  const pulses = heaterPulses(log, WIRING);
  expect(flagNames(pulses.flag[pulses.flag.length - 1]!)).toContain("heater-left-on");
});

test("sampled: how well the common length is known, and that a programmed one is taken", () => {
  const inStep = heaterPulses(
    sampled(0.5, 50, (I, V) => [I, V]),
    WIRING,
  );
  // Both edges lie anywhere within their 0.5 s, all night the same: 0.5/√6 of 4 s, and no pulse scatters by it.
  expectRelative(inStep.u_length_relative, new Float64Array(10).fill(0.5 / Math.sqrt(6) / 4), 1e-12);
  expectRelative(inStep.u_Q_J, new Float64Array(10), 0);
  const programmed = heaterPulses(
    sampled(0.7, 50.1, (I, V) => [I, V]),
    WIRING,
    { value: 4, u: 0.002 },
  );
  expectRelative(programmed.Q_J, new Float64Array(10).fill(4e-3), 1e-12);
  expectRelative(programmed.u_length_relative, new Float64Array(10).fill(5e-4), 1e-12);
});
