import { expect, test } from "vitest";
import { normal, pcg32 } from "../../../stages/numerics/random.js";
import { clearestJump, type Jump } from "../../../stages/pulses/jump.js";

const STEP_K = 8e-5;
const SEEDS = Array.from({ length: 40 }, (_, i) => i + 1);

/** 80 s at 5 samples a second at 0.4 K, jumping by 80 µK where asked. */
function found(
  law: (t: number) => number,
  noise_K: number,
  jump_s: number | null,
  seed: number,
): Jump | null {
  const gaussian = normal(pcg32(seed));
  const time_s = Float64Array.from({ length: 400 }, (_, i) => 0.1 + 0.2 * i);
  const temperature_K = time_s.map(
    (t) => 0.4 + law(t) + (jump_s !== null && t > jump_s ? STEP_K : 0) + noise_K * gaussian(),
  );
  return clearestJump({ time_s, temperature_K, missing: 0 });
}

const decay = (tau: number) => (t: number) => 1e-3 * Math.exp(-t / tau);
const LAWS: readonly [string, (t: number) => number][] = [
  ["a drift", (t) => 1e-6 * t],
  ["settling within 2 s", decay(2)],
  ["settling within 20 s", decay(20)],
];

// 7 standard deviations at 400 places in four sizes and 240 draws: nothing by noise. All smooth laws bend one way.
test.each(LAWS)("no jump is seen in %s", (_, law) => {
  for (const noise_K of [2e-6, 1e-5]) {
    for (const seed of SEEDS) expect(found(law, noise_K, null, seed)).toBeNull();
  }
});

test.each(LAWS)("a jump of 40 times the noise is seen in %s, its place to the sample", (_, law) => {
  for (const jump_s of [1, 2, 6, 30, 79]) {
    for (const seed of SEEDS) {
      const jump = found(law, 2e-6, jump_s, seed)!;
      expect(jump.time_s).toBeCloseTo(jump_s, 6);
      // The bend of 1 mK settling in 2 s takes part of a jump for its own: e^(−1/2)·0.2 s/2 s·0.2 s/2 s of it, 6 µK.
      expect(Math.abs(jump.size_K - STEP_K)).toBeLessThan(4 * jump.u_K + 7e-6);
    }
  }
});

test("a jump of 8 times the noise is seen among a hundred quiet samples", () => {
  // Blocks of four scatter by √(6/4) of a sample: 6.5 standard deviations there, 9 in blocks of eight.
  const seen = SEEDS.filter((seed) => found(LAWS[0]![1], 1e-5, 30, seed) !== null).length;
  expect(seen).toBeGreaterThan(0.6 * SEEDS.length);
});

test("a spike is no jump, nor is a door that opens and shuts", () => {
  for (const seed of SEEDS) {
    for (const length of [0.1, 0.3]) {
      const law = (t: number) => (t > 20 && t < 20 + length ? 1e-3 : 0);
      expect(found(law, 2e-6, null, seed)).toBeNull();
    }
  }
});
