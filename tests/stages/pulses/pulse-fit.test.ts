import { expect, test } from "vitest";
import { normal, pcg32 } from "../../../stages/numerics/random.js";
import { pulseFit } from "../../../stages/pulses/pulse-fit.js";
import type { Samples } from "../../../stages/pulses/window.js";

const DURATION_S = 10;
const START_S = 0.37;

/** A ramp of 1 mK/s for 10 s from START_S on, as a law makes it of the time since then. */
function samples(answer: (x: number) => number, interval_s: number, noise_K = 1e-7): Samples {
  const gaussian = normal(pcg32(1));
  const n = Math.round(40 / interval_s);
  const time_s = Float64Array.from({ length: n }, (_, i) => -15 + i * interval_s);
  const law = (t: number) => answer(t - START_S) - answer(t - START_S - DURATION_S);
  return {
    time_s,
    temperature_K: time_s.map((t) => 0.5 + 1e-5 * t + 1e-3 * law(t) + noise_K * gaussian()),
    missing: 0,
  };
}

const ramp = (x: number): number => Math.max(0, x);
const bend = (x: number, tau: number): number => (x > 0 ? -Math.expm1(-x / tau) : 0);

function mostLikely(read: Samples, lag_s: number): number {
  const pulse = pulseFit(read, { duration_s: DURATION_S, lag_s });
  let [best, most] = [Number.NaN, Number.NEGATIVE_INFINITY];
  for (let start = -1; start < 2; start += 0.01) {
    const value = pulse.at(start).plain;
    if (value > most) [best, most] = [start, value];
  }
  return best;
}

// Steps of 0.01 s, and what they leave. The fit takes a misfit of 5e-4 of the rise, 5 µK, for none: 5 ms of the ramp a
// sample, less for many. Where the lag is not known, start, amount and time of the exponential trade against each other: a
// start off by δ leaves 1 mK/s·δ³/λ², which reaches those 5 µK at 0.15 s.
test.each<[string, number, number, (x: number) => number, number]>([
  ["a plain corner", 0, 0.2, ramp, 0.015],
  ["a body 0.5 s ahead, after 0.4 s", 0, 0.2, (x) => ramp(x) + 0.5 * bend(x, 0.4), 0.015],
  ["a sensor 0.8 s behind", 0, 0.2, (x) => ramp(x) - 0.8 * bend(x, 0.8), 0.15],
  ["a sensor 0.8 s behind, which is known", 0.8, 0.2, (x) => ramp(x) - 0.8 * bend(x, 0.8), 0.015],
  ["samples of 5 ms, of which most are thinned", 0, 0.005, ramp, 0.015],
])("the start is found: %s", (_, lag_s, interval_s, answer, tolerance_s) => {
  expect(Math.abs(mostLikely(samples(answer, interval_s), lag_s) - START_S)).toBeLessThan(tolerance_s);
});

test("a known lag and a body that runs ahead, each with its own time", () => {
  // The answer of a lag λ to 1 − e^(−x/τ) by its convolution, summed in steps of 1 ms: an independent way to the closed form.
  const [lag, tau] = [0.8, 0.3];
  const steps = Float64Array.from({ length: 40_000 }, (_, i) => (i + 0.5) * 1e-3);
  let sensor = 0;
  const late = steps.map((x) => {
    sensor += (1e-3 * (ramp(x) + 0.5 * bend(x, tau) - sensor)) / lag;
    return sensor;
  });
  const answer = (x: number): number => (x <= 0 ? 0 : late[Math.min(late.length - 1, Math.floor(x / 1e-3))]!);
  expect(Math.abs(mostLikely(samples(answer, 0.2), lag) - START_S)).toBeLessThan(0.015);
});

test("between two samples a body that jumps ahead and a later start are one", () => {
  // Samples at whole seconds: the corner at 0.37 s lies between 0 s and 1 s.
  const pulse = pulseFit(samples(ramp, 1), { duration_s: DURATION_S, lag_s: 0 });
  const logs = [0.4, 0.6, 0.8, 0.95].map((start) => pulse.at(start).bent);
  for (const log of logs) expect(Math.abs(log - pulse.at(START_S).bent)).toBeLessThan(0.5);
  // After the sample that has risen, or long before it did, it did not begin.
  expect(pulse.at(1.2).bent).toBeLessThan(pulse.at(START_S).bent - 10);
  expect(pulse.at(-1).bent).toBeLessThan(pulse.at(START_S).bent - 10);
  // The plain corner tells, and is chosen.
  expect(pulse.at(START_S).bends).toBe(false);
  expect(pulse.at(0.6).plain).toBeLessThan(pulse.at(START_S).plain - 4);
});
