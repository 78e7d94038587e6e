import { expect, test } from "vitest";
import { normal, pcg32 } from "../../../stages/numerics/random.js";
import { analysePulses } from "../../../stages/pulses/analyse.js";
import type { Contents } from "../../../stages/pulses/cell-laws.js";
import { pulsesSchema } from "../../../stages/pulses/config.js";
import { heaterPulses } from "../../../stages/pulses/heater-pulses.js";
import { sensorTransient } from "../../../stages/pulses/transient-model.js";

const BODY_J_PER_K = 3e-4;
const CONTENTS: Contents = { kind: "filled", body: () => BODY_J_PER_K, shape: () => 1 };
const STARTS = [150.1, 400.3, 650.2];

/** A night of three pulses in a cell of constant parts: τ = 1 mJ/K over the link. */
function night(link_W_per_K: number, boundary_W_per_K: number, seed: number) {
  const n = 1800;
  const time_s = Float64Array.from({ length: n }, (_, i) => 0.5 * i);
  const temperature_K = new Float64Array(n);
  const gauss = normal(pcg32(seed));
  let state = { body_K: 0.4, liquid_K: 0.4, sensor_K: 0.4 };
  const shape = { bodyPower: 0, bodyBend: 0, liquidPower: 0, liquidBend: 0, linkPower: 1, boundaryPower: 3 };
  for (const [k, start] of STARTS.entries()) {
    const from = k === 0 ? 0 : Math.floor((start - 125) / 0.5);
    const to = k === STARTS.length - 1 ? n : Math.floor((STARTS[k + 1]! - 125) / 0.5) + 1;
    const part = new Float64Array(to - from);
    const end = sensorTransient(
      {
        reference_K: 0.4,
        body_J_per_K: BODY_J_PER_K,
        liquid_J_per_K: 7e-4,
        link_W_per_K,
        boundary_W_per_K,
        leak_W: 0,
        leakRamp_W_per_s: 0,
        lag_s: 0,
        shape,
      },
      state,
      {
        time_s: time_s.subarray(from, to),
        stage_K: new Float64Array(to - from).fill(0.4),
        heater: { from_s: start, to_s: start + 8, power_W: 1e-6 },
        fineStep_s: 0.1,
      },
      part,
    );
    temperature_K.set(part, from);
    state = { ...end, body_K: end.body_K, liquid_K: end.liquid_K, sensor_K: end.body_K };
  }
  for (let i = 0; i < n; i++) temperature_K[i]! += 2e-5 * gauss();
  const heater = heaterPulses(
    {
      kind: "events",
      time_s: Float64Array.from(STARTS),
      duration_s: new Float64Array(3).fill(8),
      current_A: new Float64Array(3).fill(Math.sqrt(1e-9)),
      voltage_V: new Float64Array(3).fill(Math.sqrt(1e-9) * 1000),
    },
    { lead_resistance_Ohm: 0, lead_share: 0.5 },
  );
  const stage = { time_s: Float64Array.of(0, 900), temperature_K: Float64Array.of(0.4, 0.4) };
  return { trace: { time_s, temperature_K, flag: new Uint8Array(n) }, heater, stage };
}

function read(inputs: ReturnType<typeof night>, method: string) {
  return analysePulses({
    ...inputs,
    contents: CONTENTS,
    u_clock_s: 0.05,
    lag_s: 0,
    verdicts: [],
    config: pulsesSchema.parse({ method }),
  }).table;
}

// From hardly any link to a strong one, from a boundary that cannot be seen to one that cannot be overlooked: somewhere
// on the way each choice turns into another.
const LINKS = [2e-7, 1e-6, 3e-6, 8e-6];
const BOUNDARIES = [1, 0.02, 4e-3, 8e-4];

test("near-ties: auto's C is that of the most general model, within its uncertainty, wherever the choice falls", () => {
  const chosen = new Set<string>();
  for (const [i, link] of LINKS.entries()) {
    for (const [j, boundary] of BOUNDARIES.entries()) {
      const inputs = night(link, boundary, 10 * i + j + 1);
      const auto = read(inputs, "auto");
      const general = read(inputs, "two-body");
      const apart = Array.from(auto.C_total_J_per_K, (C, k) => {
        chosen.add(auto.method[k]!);
        const u = Math.max(auto.u_C_total_J_per_K[k]!, general.u_C_total_J_per_K[k]!);
        return (C - general.C_total_J_per_K[k]!) / u;
      });
      const where = `link ${link}, boundary ${boundary}: ${apart.map((z) => z.toFixed(2)).join(" ")}`;
      // Drift lines and a model weigh the same noise differently, by 0.8 u (as found); what the choice itself does is in
      // the mean of the three.
      expect(Math.max(...apart.map(Math.abs)), where).toBeLessThan(3 * 0.8);
      expect(Math.abs(apart.reduce((sum, z) => sum + z, 0) / 3), where).toBeLessThan(1.1);
    }
  }
  // The walk really crosses the borders.
  expect(chosen.size).toBeGreaterThanOrEqual(2);
});

test("each method can be forced, and says so; a liquid that lags makes one body and drift lines wrong", () => {
  const inputs = night(8e-6, 8e-4, 5);
  const found = (method: string) => {
    const table = read(inputs, method);
    expect(new Set(table.method)).toEqual(new Set([method]));
    return table.C_total_J_per_K[1]! / 1e-3 - 1;
  };
  // C_l²/(C·G·τ) = 0.49 %: what the boundary hides from a model without one.
  expect(Math.abs(found("two-body"))).toBeLessThan(2e-3);
  expect(Math.abs(found("relaxation"))).toBeGreaterThan(3e-3);
});

test("evidence stands beside the choice: zero for the best, NaN for what was not tried", () => {
  const leaky = read(night(8e-6, 8e-4, 6), "auto");
  leaky.method.forEach((method, k) => {
    expect(method).toBe("two-body");
    expect(Math.min(leaky.aic_drift[k]!, leaky.aic_two_body[k]!, leaky.aic_relaxation[k]!)).toBe(0);
  });
  const quiet = read(night(1e-9, 1, 7), "auto");
  quiet.method.forEach((method, k) => {
    expect(method).toBe("drift");
    expect(quiet.aic_two_body[k]).toBeNaN();
    expect(quiet.drift_bias[k]!).toBeLessThan(1e-4);
  });
});

test("the boundary's time and conductance are those of the cell", () => {
  const table = read(night(8e-6, 8e-4, 8), "auto");
  // C_b·C_l/(C·G) at 0.4 K; the pulse lies half a rise above.
  const pull = (table.boundary_time_s[1]! - 0.2625) / table.u_boundary_time_s[1]!;
  expect(Math.abs(pull)).toBeLessThan(4);
  expect(table.u_boundary_time_s[1]!).toBeLessThan(0.05);
  expect(Math.abs(table.boundary_W_per_K[1]! / 8e-4 - 1)).toBeLessThan(0.2);
});
