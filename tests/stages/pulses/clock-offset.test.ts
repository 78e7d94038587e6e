import { expect, test } from "vitest";
import { clockOffset } from "../../../stages/pulses/clock-offset.js";
import { heaterPulses } from "../../../stages/pulses/heater-pulses.js";
import { oneBodyTemperature, traceOf } from "./transients.js";

const BODY = { C_J_per_K: 5e-4, K_W_per_K: 5e-7, stage_K: 0.4, start_K: 0.4 };
const starts = [200.07, 400.13, 600.01, 800.18, 1000.05];

function offsetWith(shift_s: number, overheating_K: number) {
  const pulses = starts.map((start_s) => ({ start_s, duration_s: 4, power_W: 2e-6 }));
  const law = (t: number) =>
    oneBodyTemperature(BODY, pulses, t) +
    (pulses.some(({ start_s }) => t > start_s && t <= start_s + 4) ? overheating_K : 0);
  const trace = traceOf(law, { to_s: 1200, interval_s: 0.2, noise_K: 3e-6, seed: 3 });
  const n = pulses.length;
  const heater = heaterPulses(
    {
      kind: "events",
      time_s: Float64Array.from(starts, (t) => t - shift_s),
      duration_s: new Float64Array(n).fill(4),
      current_A: new Float64Array(n).fill(1e-3),
      voltage_V: new Float64Array(n).fill(2e-3),
    },
    { lead_resistance_Ohm: 0, lead_share: 0 },
  );
  return clockOffset(trace, heater);
}

test.each([0.7, -2.6])("a heater clock that is off by %f s is found and put right", (shift_s) => {
  const clock = offsetWith(shift_s, 0);
  expect(clock.applied).toBe(true);
  // Between two samples, 0.2 s, nothing is seen of where the corner is: its stated uncertainty is 0.2/√12.
  expect(Math.abs(clock.offset_s - shift_s)).toBeLessThan(0.2);
  expect(clock.u_s).toBeGreaterThan(0.05);
});

test("clocks that agree are left alone", () => {
  expect(offsetWith(0, 0).applied).toBe(false);
});

test("a body that overheats at once does not look like a clock that is off", () => {
  const clock = offsetWith(0, 0.01);
  expect(clock.applied).toBe(false);
  expect(offsetWith(0.7, 0.01).offset_s).toBeGreaterThan(0.5);
});
