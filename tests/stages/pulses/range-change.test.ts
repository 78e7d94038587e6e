import { describe, expect, test } from "vitest";
import { analysePulses } from "../../../stages/pulses/analyse.js";
import { pulsesSchema } from "../../../stages/pulses/config.js";
import { heaterPulses } from "../../../stages/pulses/heater-pulses.js";
import { clearestJump } from "../../../stages/pulses/jump.js";
import type { PulseTable } from "../../../stages/pulses/types.js";
import { sampleRange, usableSamples } from "../../../stages/pulses/window.js";
import type { TemperatureTrace } from "../../../stages/thermometry/types.js";
import { oneBodyTemperature, traceOf } from "./transients.js";

/*
 * An instrument that changes its range reads on with a step: here 80 µK at 0.4 K, 2e-4 of T, on pulses of 15 mK. It
 * adds the same to all later readings; one that multiplies them changes every later C by 2e-4 besides, which is the
 * scale's affair and nothing a drift can tell.
 */
const BODY = { C_J_per_K: 5e-4, K_W_per_K: 5e-7, stage_K: 0.4, start_K: 0.402 };
const PULSES = [200, 400, 600, 800].map((start_s) => ({ start_s, duration_s: 4, power_W: 2e-6 }));
const STEP_K = 8e-5;
const SEEDS = Array.from({ length: 20 }, (_, i) => i + 1);

function traceWith(step_s: number, step_K: number, noise_K: number, seed: number): TemperatureTrace {
  const law = (t: number) => oneBodyTemperature(BODY, PULSES, t) + (t > step_s ? step_K : 0);
  return traceOf(law, { to_s: 1000, interval_s: 0.2, noise_K, seed });
}

function analysed(trace: TemperatureTrace): PulseTable {
  const current = Math.sqrt(2e-6 / 1000);
  const heater = heaterPulses(
    {
      kind: "events",
      time_s: Float64Array.from(PULSES, (pulse) => pulse.start_s),
      duration_s: new Float64Array(PULSES.length).fill(4),
      current_A: new Float64Array(PULSES.length).fill(current),
      voltage_V: new Float64Array(PULSES.length).fill(current * 1000),
    },
    { lead_resistance_Ohm: 0, lead_share: 0.5 },
  );
  return analysePulses({ trace, heater, verdicts: [], config: pulsesSchema.parse({}) }).table;
}

const pulls = (table: PulseTable): number[] =>
  Array.from(table.C_total_J_per_K, (C, i) => (C - 5e-4) / table.u_C_total_J_per_K[i]!);

describe("between two pulses", () => {
  // 80 pulls of unit spread: one above 4 in two hundred such tests; the spread is known to 8 %, and the choice of windows
  // on the noise that is fitted may widen it by a tenth (analyse.test.ts).
  test.each([
    ["half way between them", 300, 1],
    ["half way between them, downwards", 300, -1],
    ["46 s after one", 450, 1],
    ["50 s before one", 350, 1],
  ])("%s: no pulse is spoilt", (_, step_s, way) => {
    const all = SEEDS.flatMap((seed) => pulls(analysed(traceWith(step_s, way * STEP_K, 2e-6, seed))));
    expect(all.every(Number.isFinite)).toBe(true);
    expect(Math.max(...all.map(Math.abs))).toBeLessThan(4);
    expect(Math.hypot(...all) / Math.sqrt(all.length)).toBeLessThan(1.35);
  });

  test("5 s before a pulse too little drift is left of it: a model looks across the step, and widens what it states", () => {
    for (const seed of SEEDS.slice(0, 5)) {
      const table = analysed(traceWith(395, STEP_K, 2e-6, seed));
      expect(table.method[1]).not.toBe("drift");
      expect(Math.abs(pulls(table)[1]!)).toBeLessThan(3);
      // A step of half a per cent of the rise: ten times what the noise alone would leave.
      expect(table.u_C_total_J_per_K[1]! / table.C_total_J_per_K[1]!).toBeGreaterThan(1e-3);
      for (const i of [0, 2, 3]) expect(Math.abs(pulls(table)[i]!)).toBeLessThan(4);
    }
  });
});

/*
 * From the start of a pulse until some seconds after it, a step of the reading looks like the rise itself, or like
 * settling. The drift method skips it and reads it as a part of ΔT: C is off by step over rise, 0.5 %, and nothing says so.
 * So it does now and then up to an eighth of the window after the pulse, the least it takes for a drift.
 * What is pinned here is that nobody else is hurt, how wrong it is, and that the jump can be seen.
 */
describe("just after a pulse", () => {
  const RISE_K = (2e-6 * 4) / 5e-4;

  test.each([402, 404.5, 406, 410])(
    "at %f s (the pulse: 400 to 404 s) it goes into C of that pulse alone",
    (step_s) => {
      for (const seed of SEEDS.slice(0, 5)) {
        const table = analysed(traceWith(step_s, STEP_K, 2e-6, seed));
        // C = Q/(ΔT + step). The windows beside the pulse are as long as ever: a few parts in 1e5, twice that where the
        // window is cut at the step.
        expect(Math.abs((table.C_total_J_per_K[1]! / 5e-4) * (1 + STEP_K / RISE_K) - 1)).toBeLessThan(3e-4);
        for (const i of [0, 2, 3]) expect(Math.abs(pulls(table)[i]!)).toBeLessThan(4);
      }
    },
  );

  test.each([406, 410, 430])("at %f s the jump is seen, and no other", (step_s) => {
    const seen = (trace: TemperatureTrace, pulse: number) => {
      const end_s = PULSES[pulse]!.start_s + 4;
      return clearestJump(usableSamples(trace, sampleRange(trace.time_s, end_s, end_s + 80), end_s));
    };
    for (const seed of SEEDS) {
      const trace = traceWith(step_s, STEP_K, 2e-6, seed);
      const jump = seen(trace, 1)!;
      expect(Math.abs(jump.time_s - (step_s - 404))).toBeLessThan(0.15);
      expect(Math.abs(jump.size_K - STEP_K)).toBeLessThan(4 * jump.u_K);
      for (const pulse of [0, 2, 3]) expect(seen(trace, pulse)).toBeNull();
    }
  });
});
