import { expect, test } from "vitest";
import { normal, pcg32 } from "../../../stages/numerics/random.js";
import { stageWindow } from "../../../stages/pulses/stage-window.js";

function log(law: (t: number) => number, noise_K: number, interval_s = 5, seed = 1) {
  const gauss = normal(pcg32(seed));
  const time_s = Float64Array.from({ length: 160 }, (_, i) => 1000 + i * interval_s);
  return { time_s, temperature_K: time_s.map((t) => law(t - 1400) + noise_K * gauss()) };
}

test("means between readings are those of straight lines", () => {
  const stage = stageWindow(
    log((t) => 0.4 + 1e-5 * t, 0),
    1400,
    -100,
    100,
    "as read",
  )!;
  expect(stage.mean_K(-31.3, 12.7)).toBeCloseTo(0.4 - 1e-5 * 9.3, 12);
  expect(stage.mean_K(3, 3)).toBeCloseTo(0.40003, 12);
});

test("reading noise is taken off a smooth log", () => {
  const slow = (t: number) => 0.4 + 2e-6 * t + 5e-9 * t * t;
  const rms = (reading: "as read" | "quietened"): number => {
    const stage = stageWindow(log(slow, 2e-5), 1400, -300, 300, reading)!;
    let sum = 0;
    for (let t = -280; t < 280; t += 5) sum += (stage.mean_K(t, t) - slow(t)) ** 2;
    return Math.sqrt(sum / 112);
  };
  expect(rms("as read")).toBeGreaterThan(1.5e-5);
  // A cubic through 120 readings would leave 2 K·10⁻⁵·√(4/120) = 3.7 µK; the log may be cut into a few parts by chance.
  expect(rms("quietened")).toBeLessThan(1.3e-5);
});

test("a step of the stage stays one", () => {
  const step = (t: number) => 0.4 + (t > 20 ? 1e-3 : 0);
  const stage = stageWindow(log(step, 2e-5), 1400, -300, 300, "quietened")!;
  // Readings every 5 s: half a millikelvin somewhere between the last before and the first after, nowhere else.
  for (let t = -250; t < 250; t += 10) {
    if (Math.abs(t - 20) > 6) expect(Math.abs(stage.mean_K(t, t) - step(t))).toBeLessThan(4e-5);
  }
});

test("no reading, no window", () => {
  const none = { time_s: Float64Array.of(1, 2), temperature_K: Float64Array.of(Number.NaN, Number.NaN) };
  expect(stageWindow(none, 0, -100, 100, "quietened")).toBeNull();
});
