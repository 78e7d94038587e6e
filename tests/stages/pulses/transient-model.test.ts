import { expect, test } from "vitest";
import {
  restingLead_K,
  sensorTransient,
  type TransientCell,
  type TransientPlan,
} from "../../../stages/pulses/transient-model.js";
import { cellEquations } from "../../../stages/simulate/cell-equations.js";
import { tabulateHeat } from "../../../stages/simulate/heat-table.js";
import { rodas4 } from "../../../stages/simulate/rodas4.js";
import { expectRelative } from "../../expect-relative.js";
import { linearResponse } from "./linear-system.js";
import { oneBodyTemperature } from "./transients.js";

const CONSTANT = {
  bodyPower: 0,
  bodyBend: 0,
  liquidPower: 0,
  liquidBend: 0,
  linkPower: 0,
  boundaryPower: 0,
};
const CELL: TransientCell = {
  reference_K: 0.4,
  body_J_per_K: 2e-4,
  liquid_J_per_K: 3e-4,
  link_W_per_K: 5e-6,
  boundary_W_per_K: 6e-5,
  leak_W: 0,
  leakRamp_W_per_s: 0,
  lag_s: 0,
  shape: CONSTANT,
};
const HEAT = { from_s: 10.3, to_s: 14.3, power_W: 2e-6 };

function planOf(interval_s: number, to_s: number, stage_K: number): TransientPlan {
  const n = Math.round(to_s / interval_s) + 1;
  return {
    time_s: Float64Array.from({ length: n }, (_, i) => i * interval_s),
    stage_K: new Float64Array(n).fill(stage_K),
    heater: HEAT,
    fineStep_s: 0.25,
  };
}

function run(
  cell: TransientCell,
  plan: TransientPlan,
  start = { body_K: 0.401, liquid_K: 0.4012, sensor_K: 0.401 },
) {
  const out = new Float64Array(plan.time_s.length);
  sensorTransient(cell, start, plan, out);
  return out;
}

test("one body: the closed form, at any step", () => {
  // Bachmann et al., Rev. Sci. Instrum. 43, 205 (1972).
  const body = { C_J_per_K: 5e-4, K_W_per_K: 5e-6, stage_K: 0.4, start_K: 0.401 };
  for (const interval_s of [0.2, 7]) {
    const plan = planOf(interval_s, 140, 0.4);
    const found = run({ ...CELL, body_J_per_K: 5e-4, liquid_J_per_K: 0 }, plan);
    const heat = { start_s: HEAT.from_s, duration_s: 4, power_W: HEAT.power_W };
    const exact = plan.time_s.map((t) => oneBodyTemperature(body, [heat], t));
    // Exact steps of a linear system: rounding of 700 of them.
    expectRelative(found, exact, 1e-13);
  }
});

test("body, liquid and a slow sensor: the linear response, for boundary times from 0.2 ms to a minute", () => {
  // The response of two bodies: Shepherd, Rev. Sci. Instrum. 56, 273 (1985); here by the exponential of its matrix.
  for (const boundary of [0.6, 6e-5, 2e-6]) {
    for (const lag_s of [0, 0.5, 3]) {
      const cell = { ...CELL, boundary_W_per_K: boundary, lag_s, leak_W: 3e-9 };
      const plan = planOf(2, 60, 0.4);
      const found = run(cell, plan);
      const { body_J_per_K: b, liquid_J_per_K: l, link_W_per_K: K } = cell;
      const sensor = lag_s > 0 ? 1 / lag_s : 0;
      const A = [
        [-(K + boundary) / b, boundary / b, 0],
        [boundary / l, -boundary / l, 0],
        [sensor, 0, -sensor],
      ];
      const drive = (power_W: number) => [(power_W + cell.leak_W + K * 0.4) / b, 0, 0];
      const at = (t: number): number => {
        let x = linearResponse(A, drive(0), [0.401, 0.4012, 0.401], Math.min(t, HEAT.from_s));
        if (t > HEAT.from_s)
          x = linearResponse(A, drive(HEAT.power_W), x, Math.min(t, HEAT.to_s) - HEAT.from_s);
        if (t > HEAT.to_s) x = linearResponse(A, drive(0), x, t - HEAT.to_s);
        return lag_s > 0 ? x[2]! : x[0]!;
      };
      // Squaring a matrix of norm 1e4 fifteen times over costs the reference five digits of sixteen.
      expectRelative(found, plan.time_s.map(at), boundary > 0.1 ? 1e-10 : 1e-12);
    }
  }
});

test("power laws: against the simulator's Rosenbrock integrator, which shares nothing with this one", () => {
  const T0 = 0.4;
  const law = (value: number, power: number) => (T: Float64Array) => T.map((t) => value * (t / T0) ** power);
  const cell: TransientCell = {
    ...CELL,
    leak_W: 2e-9,
    lag_s: 0.4,
    shape: { ...CONSTANT, bodyPower: 1, liquidPower: 3, linkPower: 1, boundaryPower: 3 },
  };
  const equations = cellEquations(
    {
      addenda: [],
      parts: [],
      boundary_W_per_K4: cell.boundary_W_per_K / T0 ** 3,
      link: { coefficient: cell.link_W_per_K / T0, power: 1 },
      heatLeak_W: cell.leak_W,
      heaterResistance_Ohm: 1,
      leadResistance_Ohm: 0,
      leadShare: 0,
    },
    {
      body: tabulateHeat(law(cell.body_J_per_K, 1), 0.2, 1, 4000),
      liquid: tabulateHeat(law(cell.liquid_J_per_K, 3), 0.2, 1, 4000),
    },
    { stage_s: 1, lag_s: cell.lag_s },
  );
  equations.drive.setting_K = T0;
  const integrator = rodas4(equations, 1e-11);
  const y = Float64Array.of(T0, 0.401, 0.4012, 0.401);
  const plan = planOf(0.5, 60, T0);
  // A rise of 4 %, 16 mK.
  const found = run(cell, plan);
  let now = 0;
  const until = (t: number, power_W: number) => {
    equations.drive.heater_W = power_W;
    if (t > now) integrator.advance(y, t - now);
    now = Math.max(now, t);
  };
  const exact = plan.time_s.map((t) => {
    until(Math.min(t, HEAT.from_s), 0);
    if (t > HEAT.from_s) until(Math.min(t, HEAT.to_s), HEAT.power_W);
    if (t > HEAT.to_s) until(t, 0);
    return y[3]!;
  });
  const off = found.map((T, i) => Math.abs(T - exact[i]!));
  // The body overheats by 12 mK, 3 % of T, within 2 s of boundary time, so G changes by 9 % over a few steps. Midpoint
  // coefficients are of second order: a quarter of a second of step costs a part in 10⁴ of that, 1.4 µK as
  // found, and a fifth of the step 30 times less.
  expect(Math.max(...off)).toBeLessThan(2e-6);
});

test("at rest in a drift the liquid lags by its own heat", () => {
  // The whole drifts by a ramp of the leak; after many boundary times the liquid is behind by C_l·slope/G.
  const cell = { ...CELL, link_W_per_K: 0, leak_W: 5e-10 };
  const plan = { ...planOf(1, 60, 0.4), heater: { from_s: 1e9, to_s: 1e9, power_W: 0 } };
  const end = sensorTransient(
    cell,
    { body_K: 0.4, liquid_K: 0.4, sensor_K: 0.4 },
    plan,
    new Float64Array(61),
  );
  const slope = 5e-10 / 5e-4;
  // 60 s are 30 boundary times of 2 s.
  expectRelative([end.liquid_K - end.body_K], [restingLead_K(cell, slope)], 1e-8);
});
