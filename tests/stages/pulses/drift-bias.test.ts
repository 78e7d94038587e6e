import { expect, test } from "vitest";
import { driftBias, smoothedLink } from "../../../stages/pulses/drift-bias.js";
import { readDriftStep } from "../../../stages/pulses/drift-step.js";
import { sensorTransient, type TransientCell } from "../../../stages/pulses/transient-model.js";
import { expectRelative } from "../../expect-relative.js";

const CONSTANT = {
  bodyPower: 0,
  bodyBend: 0,
  liquidPower: 0,
  liquidBend: 0,
  linkPower: 0,
  boundaryPower: 0,
};

/** Body and liquid with constant parts, a pulse of 8 s at 200 s, read without noise. */
function read(cell: Partial<TransientCell>) {
  const whole: TransientCell = {
    reference_K: 0.4,
    body_J_per_K: 3e-4,
    liquid_J_per_K: 7e-4,
    link_W_per_K: 1e-6,
    boundary_W_per_K: 2e-3,
    leak_W: 0,
    leakRamp_W_per_s: 0,
    lag_s: 0,
    shape: CONSTANT,
    ...cell,
  };
  const n = 2000;
  const time_s = Float64Array.from({ length: n }, (_, i) => 0.2 * i);
  const temperature_K = new Float64Array(n);
  const power_W = 1.25e-6;
  sensorTransient(
    whole,
    { body_K: 0.4, liquid_K: 0.4, sensor_K: 0.4 },
    {
      time_s,
      stage_K: new Float64Array(n).fill(0.4),
      heater: { from_s: 200.05, to_s: 208.05, power_W },
      fineStep_s: 0.1,
    },
    temperature_K,
  );
  const span = { start_s: 200.05, end_s: 208.05, earliest_s: 0, latest_s: 399 };
  const options = { settle_s: null, window_s: null, interval_s: 0.2 };
  const step = readDriftStep({ time_s, temperature_K, flag: new Uint8Array(n) }, span, options)!;
  const C = (8 * power_W) / (step.T_after_K - step.T_before_K);
  const link_per_s = whole.link_W_per_K / (whole.body_J_per_K + whole.liquid_J_per_K);
  return { C, bias: driftBias(step, span, { link_per_s, lag_s: whole.lag_s, stage: null }) };
}

test("two bodies on a link: the lines' own error is what they tell, to first order", () => {
  // C_l²/(C·G·τ) = 0.49·C/(G·τ), τ = 1000 s, C/G = 0.5 s: 2.45e-4.
  const { C, bias } = read({});
  expectRelative([bias.lag], [2.45e-4], 0.02);
  // Of second order: (ε/τ)² = 6e-8, the cubic's truncation at x = 0.19 over the window, x⁴/1680 = 8e-7 times its growth
  // towards the pulse, and trapezia over a pulse of forty samples, whose corners are cut by a quarter of a sample.
  expect(Math.abs(C / (1 + bias.lag) / 1e-3 - 1)).toBeLessThan(2e-5);
  expect(Math.abs(C / 1e-3 - 1)).toBeGreaterThan(2e-4);
});

test("one body has no lag, and a late thermometer is none", () => {
  const alone = read({ liquid_J_per_K: 0, body_J_per_K: 1e-3 });
  expect(Math.abs(alone.bias.lag)).toBeLessThan(5e-6);
  const late = read({ liquid_J_per_K: 0, body_J_per_K: 1e-3, lag_s: 0.6 });
  expect(Math.abs(late.bias.lag)).toBeLessThan(1e-5);
});

test("what is left grows with the link, until the lines say that they do not know", () => {
  const left = [3e-7, 3e-6, 3e-5].map((link_W_per_K) => read({ link_W_per_K }).bias.left);
  expect(left[0]!).toBeLessThan(1e-5);
  expect(left[1]!).toBeGreaterThan(left[0]!);
  expect(left[2]!).toBe(Number.POSITIVE_INFINITY);
});

test("a night's kinks that are noise about none make no link; a real link stays", () => {
  const T = Array.from({ length: 31 }, (_, i) => 0.35 * 1.03 ** i);
  const noise = T.map((t, i) => t * 1e-8 * Math.sin(7.3 * i * i));
  const none = smoothedLink(T, noise);
  expect(Math.max(...none.map(Math.abs))).toBeLessThan(3e-9);
  const link = smoothedLink(
    T,
    T.map((t, i) => 1e-6 * t + noise[i]!),
  );
  expectRelative(
    link,
    T.map((t) => 1e-6 * t),
    0.02,
  );
});
