import { describe, expect, test } from "vitest";
import { clockOffset, NO_OFFSET, onThermometerClock } from "../../../stages/pulses/clock-offset.js";
import { type HeaterPulses, heaterPulses } from "../../../stages/pulses/heater-pulses.js";
import type { TemperatureTrace } from "../../../stages/thermometry/types.js";
import { expectRelative } from "../../expect-relative.js";
import { type SimulatedPulses, simulatedPulses } from "./simulated-pulses.js";
import { oneBodyTemperature, traceOf } from "./transients.js";

const BODY = { C_J_per_K: 5e-4, K_W_per_K: 5e-7, stage_K: 0.4, start_K: 0.4 };

/** Five pulses of 8 mK at no two the same time between samples, as far as 1 s goes. */
const STARTS = [200.07, 400.43, 600.81, 800.18, 1000.65];

interface Bench {
  readonly starts?: readonly number[];
  readonly duration_s?: number;
  readonly interval_s?: number;
  readonly overheating_K?: number;
  /** Heater time of an event at true time t. */
  readonly heaterTime?: (t: number) => number;
}

function bench(wanted: Bench): { trace: TemperatureTrace; heater: HeaterPulses } {
  const starts = wanted.starts ?? STARTS;
  const duration_s = wanted.duration_s ?? 4;
  const pulses = starts.map((start_s) => ({ start_s, duration_s, power_W: 2e-6 }));
  const law = (t: number) =>
    oneBodyTemperature(BODY, pulses, t) +
    (pulses.some(({ start_s }) => t > start_s && t <= start_s + duration_s)
      ? (wanted.overheating_K ?? 0)
      : 0);
  const to_s = starts.at(-1)! + 200;
  const trace = traceOf(law, { to_s, interval_s: wanted.interval_s ?? 0.2, noise_K: 3e-6, seed: 3 });
  const n = pulses.length;
  const heater = heaterPulses(
    {
      kind: "events",
      time_s: Float64Array.from(starts, wanted.heaterTime ?? ((t) => t)),
      duration_s: new Float64Array(n).fill(duration_s),
      current_A: new Float64Array(n).fill(1e-3),
      voltage_V: new Float64Array(n).fill(2e-3),
    },
    { lead_resistance_Ohm: 0, lead_share: 0 },
  );
  return { trace, heater };
}

function offsetWith(shift_s: number, wanted: Bench) {
  const { trace, heater } = bench({ ...wanted, heaterTime: (t) => t - shift_s });
  return clockOffset(trace, heater);
}

describe("one body, a plain corner", () => {
  test.each(
    [0.2, 0.5, 1].flatMap((interval_s) => [-2.6, -0.7, 0.7, 2].map((shift) => [interval_s, shift] as const)),
  )("read every %f s, a heater clock that is off by %f s is put right", (interval_s, shift_s) => {
    const clock = offsetWith(shift_s, { interval_s, duration_s: 10 });
    expect(clock.applied).toBe(true);
    // The corner is the crossing of two lines, each known to 3 µK on a rise of 4 mK/s: a millisecond. A hundredth of a
    // second for the leak's higher orders; 0.1 s is what is asked.
    expect(Math.abs(clock.offset_s - shift_s)).toBeLessThan(0.02);
    expect(Math.abs(clock.offset_s - shift_s)).toBeLessThan(clock.u_s);
  });

  test("clocks that agree are left alone, and a pulse of two samples is enough", () => {
    expect(offsetWith(0, {}).applied).toBe(false);
    const short = offsetWith(0.7, { duration_s: 2, interval_s: 1 });
    expect(Math.abs(short.estimate_s - 0.7)).toBeLessThan(0.05);
  });

  test("in step with the samples a whole interval stays unseen, whatever the corner says", () => {
    const inStep = { starts: [200.3, 400.3, 600.3, 800.3, 1000.3], interval_s: 1 };
    const clock = offsetWith(0.2, inStep);
    expect(Math.abs(clock.estimate_s - 0.2)).toBeLessThan(0.05);
    // Anything that lifts or delays the trace by less than a sample looks the same: 1/√12 s, and no less.
    expect(clock.u_s).toBeGreaterThan(1 / Math.sqrt(12));
    // Heater times 200.1 s and so on: a body that jumps ahead at once, with clocks that agree, reads just the same.
    expect(clock.applied).toBe(false);
    // At 199.9 s the sample of 200 s would have seen it.
    expect(offsetWith(0.4, inStep).applied).toBe(true);
  });

  test("a body that overheats at once does not look like a clock that is off", () => {
    expect(offsetWith(0, { overheating_K: 0.01 }).applied).toBe(false);
    const clock = offsetWith(0.7, { overheating_K: 0.01 });
    // Between the last sample before any onset and the first after any, 0.05 s apart, nothing tells.
    expect(Math.abs(clock.offset_s - 0.7)).toBeLessThan(0.05);
  });

  test("a spike, a gap and a door do not turn the clock", () => {
    const { trace, heater } = bench({ heaterTime: (t) => t - 0.7 });
    trace.temperature_K[1003]! += 5e-3;
    for (let i = 2010; i < 2030; i++) trace.flag[i] = 1;
    for (let i = 2995; i < trace.time_s.length; i++) trace.temperature_K[i]! += 5e-3;
    const clock = clockOffset(trace, heater);
    expect(Math.abs(clock.offset_s - 0.7)).toBeLessThan(0.05);
  });

  test("without three pulses nothing is told", () => {
    const { trace, heater } = bench({ starts: STARTS.slice(0, 2) });
    expect(clockOffset(trace, heater)).toEqual(NO_OFFSET);
  });
});

/*
 * Nights of the simulator, which integrates body and liquid and lets the sensor follow; twelve pulses of 10 s. The
 * estimates are to be within 3 of their standard uncertainties: with these few dozen seeds one in 370 would not be.
 */
describe("two bodies and a sensor that lags", () => {
  function pull(wanted: SimulatedPulses, lag_s: number | null = null) {
    const { trace, heater } = simulatedPulses(wanted);
    const clock = clockOffset(trace, heater, lag_s);
    return { clock, z: (clock.estimate_s - wanted.clockOffset_s) / clock.u_s };
  }

  test.each([0.03, 0.01, 3e-3, 1e-3, 3e-4])("boundary of %f W/K4: no offset is seen where none is", (g) => {
    for (const interval_s of [0.2, 1]) {
      const { clock, z } = pull({ interval_s, clockOffset_s: 0, boundary_W_per_K4: g });
      expect(clock.applied).toBe(false);
      expect(Math.abs(z)).toBeLessThan(3);
    }
    const { clock, z } = pull({ interval_s: 0.5, clockOffset_s: 0.7, boundary_W_per_K4: g, seed: 2 });
    expect(clock.applied).toBe(true);
    expect(Math.abs(clock.offset_s - 0.7)).toBeLessThan(0.1);
    expect(Math.abs(z)).toBeLessThan(3);
  });

  test.each([0.2, 0.5, 1, 2])("a sensor %f s behind is not taken for a clock", (lag_s) => {
    for (const interval_s of [0.2, 1]) {
      const { clock, z } = pull({ interval_s, clockOffset_s: 0, lag_s });
      expect(clock.applied).toBe(false);
      expect(Math.abs(z)).toBeLessThan(3);
    }
    const { clock } = pull({ interval_s: 0.5, clockOffset_s: 0.7, lag_s, seed: 2 });
    expect(clock.applied).toBe(true);
    expect(Math.abs(clock.offset_s - 0.7)).toBeLessThan(0.1);
  });

  test("both at once need the lag to be given", () => {
    for (const seed of [1, 2, 3]) {
      const night = { interval_s: 0.5, clockOffset_s: 0, boundary_W_per_K4: 3e-3, lag_s: 1, seed };
      const { clock, z } = pull(night, 1);
      expect(clock.applied).toBe(false);
      expect(Math.abs(z)).toBeLessThan(3);
      // One exponential for two: late by a fifth of what the body runs ahead, 0.55 s.
      expect(Math.abs(pull(night).clock.estimate_s)).toBeLessThan(0.2);
    }
  });

  test.each([
    [0.2, 0.5],
    [0.2, 2],
    [0.5, 1],
    [1, 3],
  ])("read every %f s, heater every %f s", (interval_s, heaterInterval_s) => {
    for (const seed of [1, 2, 3]) {
      const still = pull({ interval_s, heaterInterval_s, clockOffset_s: 0, seed });
      expect(still.clock.applied).toBe(false);
      expect(Math.abs(still.z)).toBeLessThan(3);
      const off = pull({ interval_s, heaterInterval_s, clockOffset_s: -2, seed });
      expect(off.clock.applied).toBe(true);
      expect(Math.abs(off.z)).toBeLessThan(3);
    }
  });

  test("no more is stated than is known, on the average of many nights", () => {
    const pulls: number[] = [];
    for (let seed = 1; seed <= 40; seed++) {
      const even = seed % 2 === 0;
      const { z } = pull({
        seed,
        interval_s: [0.2, 0.5, 1, 2][seed % 4]!,
        clockOffset_s: -2 + ((seed * 0.37) % 4),
        duration_s: [4, 10, 20][seed % 3]!,
        boundary_W_per_K4: even ? 10 ** (-3.5 + ((seed * 0.53) % 3)) : 10,
        lag_s: even ? 0 : (seed * 0.29) % 2,
        noise: 10 ** (-5.5 + ((seed * 0.71) % 2)),
      });
      pulls.push(z);
    }
    const mean = pulls.reduce((sum, z) => sum + z, 0) / pulls.length;
    const rms = Math.hypot(...pulls) / Math.sqrt(pulls.length);
    // Unit pulls would have a mean within 3/√40 and a root mean square within 1 ± 3/√80. The uncertainty allows for bends
    // that most nights do not have, so it is no wonder if they are smaller.
    expect(Math.abs(mean)).toBeLessThan(0.47);
    expect(rms).toBeLessThan(1.33);
    expect(rms).toBeGreaterThan(0.2);
  });
});

describe("a heater clock that runs fast or slow", () => {
  // 16 pulses over 8 h, nowhere in step with the samples.
  const night = Array.from({ length: 16 }, (_, i) => 1000 + 1800 * i + ((i * 0.377) % 1));
  const middle = night.reduce((sum, t) => sum + t, 0) / night.length;

  test.each([1e-4, -4e-5])("by %f is found, and put right all night", (rate) => {
    // The heater's own time when the thermometer's is t: 0.4 s and the rate behind.
    const heaterTime = (t: number) => t - 0.4 - rate * (t - middle);
    const { trace, heater } = bench({ starts: night, heaterTime, interval_s: 0.5 });
    const clock = clockOffset(trace, heater);
    expect(clock.applied).toBe(true);
    expect(Math.abs(clock.rate - rate)).toBeLessThan(clock.u_rate);
    expect(clock.u_rate).toBeLessThan(Math.abs(rate) / 4);
    const moved = onThermometerClock(heater, clock);
    // 3 s of drift between the ends at 1e-4; what is left is what an offset alone leaves.
    for (const [i, t] of night.entries()) expect(Math.abs(moved.start_s[i]! - t)).toBeLessThan(0.02);
  });

  test("that is right, or off by an offset alone, is left without a rate", () => {
    for (const shift of [0, 0.7]) {
      const { trace, heater } = bench({ starts: night, heaterTime: (t) => t - shift, interval_s: 0.5 });
      const clock = clockOffset(trace, heater);
      expect(clock.rate).toBe(0);
      expect(Math.abs(clock.rate_estimate)).toBeLessThan(clock.u_rate);
      expect(clock.applied).toBe(shift !== 0);
    }
  });

  test("is not told by few pulses, nor by pulses of a part of the night", () => {
    const heaterTime = (t: number) => t - 1e-4 * (t - middle);
    const few = bench({ starts: night.slice(0, 7), heaterTime });
    expect(clockOffset(few.trace, few.heater).rate_estimate).toBeNaN();
    const part = bench({ starts: night, heaterTime });
    // Readings of an instrument that was started two thirds into the night.
    for (let i = 0; part.trace.time_s[i]! < night[7]! - 100; i++) part.trace.flag[i] = 1;
    const clock = clockOffset(part.trace, part.heater);
    expect(clock.pulses).toBeGreaterThan(7);
    expect(clock.rate_estimate).toBeNaN();
  });

  test("is not seen in a sampled log whose edges creep against the pulses", () => {
    // Starts 0.1 s later in each interval of 2 s: the edges halfway drift by 1.1 s in twelve pulses.
    for (const seed of [1, 2, 3, 4]) {
      const { trace, heater } = simulatedPulses({
        interval_s: 0.2,
        heaterInterval_s: 2,
        clockOffset_s: 0,
        seed,
      });
      expect(clockOffset(trace, heater).rate).toBe(0);
    }
  });

  test("onThermometerClock: offset + rate·(t − reference), or the pulses as they are", () => {
    const { heater } = bench({});
    expect(onThermometerClock(heater, NO_OFFSET)).toBe(heater);
    const moved = onThermometerClock(heater, { offset_s: 2, rate: 1e-3, reference_s: 100 });
    // Decimal fractions of thousands: rounding only.
    expectRelative(
      moved.start_s,
      STARTS.map((t) => t + 2 + 1e-3 * (t - 100)),
      1e-14,
    );
    expect(moved.duration_s).toBe(heater.duration_s);
  });
});
