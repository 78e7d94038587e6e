import { describe, expect, test } from "vitest";
import { DomainError } from "../../../stages/errors.js";
import { pcg32 } from "../../../stages/numerics/random.js";
import { heatContent_J, heatOfCell } from "../../../stages/simulate/heat-of-cell.js";
import { type SimulatedNight, simulateNight } from "../../../stages/simulate/night.js";
import type { Scenario } from "../../../stages/simulate/scenario.js";
import { temperature_K } from "../../../stages/simulate/thermometer.js";
import { expectRelative } from "../../expect-relative.js";
import { aCell, aHeliumCell } from "./a-cell.js";

const night = (scenario: Scenario, tolerance = 1e-10): SimulatedNight =>
  simulateNight(scenario, pcg32(1), { tolerance });

function empty(): Scenario {
  return { ...aCell(), filling: null };
}

describe("one body", () => {
  test("pulse and decay are the exponentials of Bachmann et al., Rev. Sci. Instrum. 43, 205 (1972)", () => {
    const base = empty();
    const scenario: Scenario = { ...base, cell: { ...base.cell, heatLeak_W: 3e-9 } };
    const { truth, thermometer } = night(scenario);
    const C = 2e-4;
    const K = 1e-6;
    const tau_s = C / K;
    const start_s = truth.pulses.start_s[0]!;
    const end_s = start_s + 10;
    const P = truth.pulses.Q_J[0]! / 10;
    const rest_K = 0.5 + 3e-9 / K;
    const expected = [...thermometer.time_s].map((t) => {
      const on = Math.max(0, Math.min(t, end_s) - start_s);
      const off = Math.max(0, t - end_s);
      return rest_K + (P / K) * -Math.expm1(-on / tau_s) * Math.exp(-off / tau_s);
    });
    // Error per step 1e-10 of T, and some hundred steps within τ.
    expectRelative(truth.trace.body_K, expected, 1e-9);
    // The rise is a fiftieth of T: a part in 1e-7 of it.
    expect(P / K).toBeGreaterThan(1e-4);
  });

  test("the stage approaches a set point with its time constant", () => {
    const base = empty();
    const scenario = { ...base, protocol: { ...base.protocol, settings_K: [0.5, 0.6] } };
    const { truth, thermometer } = night(scenario);
    // Second set point after settling, phase, pulse and wait of the first.
    const change_s = truth.pulses.start_s[0]! + 10 + 300;
    const after = [...thermometer.time_s].flatMap((t, i) => (t > change_s ? [i] : []));
    expectRelative(
      after.map((i) => truth.trace.stage_K[i]!),
      after.map((i) => 0.6 - 0.1 * Math.exp(-(thermometer.time_s[i]! - change_s) / 10)),
      1e-9, // error per step 1e-10
    );
  });

  test("a lagging sensor trails a steady drift by drift times lag", () => {
    const base = empty();
    const scenario: Scenario = {
      ...base,
      cell: { ...base.cell, heatLeak_W: 2e-8, link: { coefficient: 0, power: 0 } },
      thermometer: { ...base.thermometer, lag_s: 2 },
      protocol: { ...base.protocol, start: "at-stage", settle_s: 100 },
    };
    const { truth, thermometer } = night(scenario);
    // 2e-8 W/2e-4 J/K = 1e-4 K/s; at 90 s the start, e^{−45}, is forgotten.
    const at = thermometer.time_s.indexOf(90);
    const sensor_K = temperature_K(scenario.thermometer.law, thermometer.resistance_Ohm[at]!, 0.5);
    expectRelative([truth.trace.body_K[at]! - sensor_K], [2e-4], 1e-6); // 2e-4 K as a difference of 0.5 K kept to 1e-10
  });
});

describe("two bodies", () => {
  /** Both capacities constant, so small that G and K may be taken as constant: rise 1e-5 of T. */
  function gentle(boundary_W_per_K4: number): Scenario {
    const base = aCell();
    return {
      ...base,
      cell: { ...base.cell, boundary_W_per_K4 },
      protocol: { ...base.protocol, rise: 1e-5 },
    };
  }
  const Cb = 2e-4;
  const Cl = 6e-4;
  const K = 1e-6;

  // Boundary time CbCl/((Cb + Cl) G): 1 ms to 100 s.
  test.each([1e-3, 0.1, 1, 10, 100])(
    "boundary time %f s: the two exponentials of the linear cell",
    (tau_s) => {
      const G = (Cb * Cl) / (Cb + Cl) / tau_s;
      const { truth, thermometer } = night(gentle(G / 0.125), 1e-12);
      // Eigenvalues of d(Tb, Tl)/dt; Shepherd, Rev. Sci. Instrum. 56, 273 (1985).
      const [a, b, c, d] = [-(K + G) / Cb, G / Cb, G / Cl, -G / Cl];
      const root = Math.sqrt((a - d) ** 2 + 4 * b * c);
      const fast = (a + d - root) / 2;
      const slow = (a * d - b * c) / fast;
      const P = truth.pulses.Q_J[0]! / 10;
      // Body after heat P/Cb switched on at 0: ∫ of the body's impulse response.
      const share = (fast - d) / (fast - slow);
      const on = (t: number) =>
        (P / Cb) * ((share * Math.expm1(fast * t)) / fast + ((1 - share) * Math.expm1(slow * t)) / slow);
      const start_s = truth.pulses.start_s[0]!;
      const rise = [...thermometer.time_s].map((t) => {
        const since = t - start_s;
        return (since > 0 ? on(since) : 0) - (since > 10 ? on(since - 10) : 0);
      });
      // What is left is G ∝ T³: a rise of up to 4e-5 of T changes G by three times that, 1.2e-4 of a rise at most.
      const largest = Math.max(...rise);
      const worst = Math.max(...rise.map((r, i) => Math.abs(truth.trace.body_K[i]! - 0.5 - r)));
      expect(worst / largest).toBeLessThan(1.2e-4);
    },
  );

  test("a boundary of no resistance leaves one body of both capacities", () => {
    const base = aCell();
    const fast = night({ ...base, cell: { ...base.cell, boundary_W_per_K4: 1e6 } });
    const one = night({
      ...base,
      cell: { ...base.cell, addenda: [{ coefficient: Cb + Cl, power: 0 }] },
      filling: null,
    });
    // P/G = 8e-7 W/1.25e5 W/K: nothing. Tolerance of the steps.
    expectRelative(fast.truth.trace.body_K, one.truth.trace.body_K, 1e-9);
  });

  test("a boundary that conducts nothing leaves the body alone", () => {
    const base = aCell();
    const { truth } = night({
      ...base,
      cell: { ...base.cell, boundary_W_per_K4: 0, link: { coefficient: 0, power: 0 } },
      protocol: { ...base.protocol, start: "at-stage" },
    });
    const last = truth.trace.body_K.length - 1;
    expectRelative([truth.trace.body_K[last]!], [0.5 + truth.pulses.Q_J[0]! / Cb], 1e-9); // tolerance of the steps
    expectRelative([truth.trace.liquid_K[last]!], [0.5], 1e-12); // nothing happens to it
  });
});

test("the boundary passes heat as T⁴, however far apart its sides are", () => {
  const base = aCell();
  const g = 1e-4;
  const scenario: Scenario = {
    ...base,
    // A body that nothing can change, brought from 0.5 K to 0.8 K within a ms.
    cell: {
      ...base.cell,
      addenda: [{ coefficient: 1e4, power: 0 }],
      boundary_W_per_K4: g,
      link: { coefficient: 0, power: 0 },
    },
    protocol: { ...base.protocol, settle_s: 60, start: "at-stage" },
    disturbances: [{ from_s: 1, to_s: 1.001, power_W: 3e6 }],
  };
  const { truth, thermometer } = night(scenario);
  // C dT_l/dt = (g/4)(T⁴ − T_l⁴): t = (2C/gT³)[artanh(T_l/T) + arctan(T_l/T)] between the two liquid temperatures.
  const clock = (l: number) => ((2 * 6e-4) / (g * 0.8 ** 3)) * (Math.atanh(l / 0.8) + Math.atan(l / 0.8));
  const seen = (t: number) => clock(truth.trace.liquid_K[thermometer.time_s.indexOf(t)]!);
  const at = [5, 10, 20, 40];
  // The body cools by 4e-8 of its rise meanwhile; steps are kept to 1e-10 of T.
  expectRelative(
    at.map((t) => seen(t) - seen(2)),
    at.map((t) => t - 2),
    1e-6,
  );
});

describe("helium and real addenda", () => {
  test("energy is conserved: heat in equals heat content gained", () => {
    const base = aHeliumCell();
    const scenario: Scenario = {
      ...base,
      cell: { ...base.cell, heatLeak_W: 2e-9, link: { coefficient: 0, power: 1 } },
      protocol: { ...base.protocol, start: "at-stage", pulsesPerSetting: 10, rise: 0.05 },
      disturbances: [{ from_s: 12.5, to_s: 13.25, power_W: 4e-7 }],
    };
    const heat = heatOfCell(scenario);
    const { truth, thermometer } = simulateNight(scenario, pcg32(1), { tolerance: 1e-10, heat });
    const last = thermometer.time_s.length - 1;
    const content = (i: number) => heatContent_J(heat, truth.trace.body_K[i]!, truth.trace.liquid_K[i]!);
    const in_J =
      truth.pulses.Q_J.reduce((sum, Q) => sum + Q, 0) + 2e-9 * thermometer.time_s[last]! + 4e-7 * 0.75;
    // Temperatures kept to 1e-10 a step; C T is some three times the heat in.
    expectRelative([content(last) - content(0)], [in_J], 1e-7);
  });

  test.each([-1, 0, 1, 2, 3])("what the link carries off is what is missing, K ∝ T^%i", (power) => {
    const base = aHeliumCell();
    const scenario: Scenario = {
      ...base,
      cell: { ...base.cell, heatLeak_W: 0, link: { coefficient: 2e-5, power } },
      protocol: { ...base.protocol, pulsesPerSetting: 1 },
    };
    const heat = heatOfCell(scenario);
    const { truth, thermometer } = simulateNight(scenario, pcg32(1), { tolerance: 1e-10, heat });
    const { body_K, liquid_K, stage_K } = truth.trace;
    const from = [...thermometer.time_s].findIndex((t) => t > truth.pulses.start_s[0]! + 15);
    // ∫K dT in closed form, integrated over the decay by Simpson's rule on readings 0.2 s apart.
    const potential = (T: number) => (power === -1 ? Math.log(T) : T ** (power + 1) / (power + 1));
    const flow = (i: number) => 2e-5 * (potential(body_K[i]!) - potential(stage_K[i]!));
    let carried_J = 0;
    const last = from + 2 * Math.floor((thermometer.time_s.length - 1 - from) / 2);
    for (let i = from; i < last; i += 2) carried_J += (0.4 / 6) * (flow(i) + 4 * flow(i + 1) + flow(i + 2));
    const content = (i: number) => heatContent_J(heat, body_K[i]!, liquid_K[i]!);
    // Simpson: (0.2 s/τ)⁴/180 with τ of minutes is nothing; digits of the difference of two contents, 1e-10·100.
    expectRelative([content(from) - content(last)], [carried_J], 1e-7);
  });

  // g from 1e-3 (boundary of 10 s) to 1e3 (of µs).
  test.each([1e-3, 0.1, 10, 1e3])("finer steps change nothing beyond 1e-8, g = %f W/K⁴", (g) => {
    const base = aHeliumCell();
    const scenario = { ...base, cell: { ...base.cell, boundary_W_per_K4: g } };
    // 1e-13 takes five times as many steps; the method being of order 4, it is 1000 times nearer to the limit.
    expectRelative(night(scenario).truth.trace.body_K, night(scenario, 1e-13).truth.trace.body_K, 1e-8);
  });

  test("lead heat warms the cell and is not in V·I", () => {
    const base = aHeliumCell();
    const scenario: Scenario = {
      ...base,
      cell: {
        ...base.cell,
        leadResistance_Ohm: 40,
        leadShare: 0.5,
        heatLeak_W: 0,
        link: { coefficient: 0, power: 1 },
      },
      protocol: { ...base.protocol, start: "at-stage", pulsesPerSetting: 1 },
    };
    const heat = heatOfCell(scenario);
    const { truth, heater, thermometer } = simulateNight(scenario, pcg32(1), { tolerance: 1e-10, heat });
    if (heater.kind !== "events") throw new Error("one row a pulse was asked for");
    const VIt = heater.voltage_V[0]! * heater.current_A[0]! * heater.duration_s[0]!;
    expectRelative([truth.pulses.lead_heat_J[0]!], [VIt * 0.02], 1e-9); // 0.5·40 Ohm of 1000 Ohm; times in whole ms
    expectRelative([truth.pulses.Q_J[0]!], [VIt * 1.02], 1e-9);
    const last = thermometer.time_s.length - 1;
    const content = (i: number) => heatContent_J(heat, truth.trace.body_K[i]!, truth.trace.liquid_K[i]!);
    expectRelative([content(last) - content(0)], [VIt * 1.02], 1e-6); // a content a hundred times Q, kept to 1e-9
  });

  test("a pulse is as large as was wanted, to the five digits of its source", () => {
    const { pulses } = night(aHeliumCell()).truth;
    const rise = [...pulses.T_before_K].map((T, i) => pulses.T_after_K[i]! / T - 1);
    expectRelative(
      rise,
      rise.map(() => 0.02),
      2e-4,
    ); // twice 5e-5 in the current, C rising within the step
    // And C at the middle is Q/ΔT but for C″ΔT²/24.
    const mean = [...pulses.Q_J].map((Q, i) => Q / (pulses.T_after_K[i]! - pulses.T_before_K[i]!));
    expectRelative(pulses.C_total_J_per_K, mean, 3e-4);
  });
});

test("same generator, same night; another, another", () => {
  const base = aHeliumCell();
  const noisy = { ...base, thermometer: { ...base.thermometer, noise: 1e-4 } };
  const R = (seed: number) => simulateNight(noisy, pcg32(seed)).thermometer.resistance_Ohm;
  expect(R(5)).toEqual(R(5));
  expect(R(5)).not.toEqual(R(6));
});

test("gaps have no readings, and the cell lives on in them", () => {
  const base = aHeliumCell();
  const whole = night(base);
  const holed = night({ ...base, sampling: { ...base.sampling, gaps: [{ from_s: 30, to_s: 40 }] } });
  expect([...holed.thermometer.time_s].some((t) => t >= 30 && t < 40)).toBe(false);
  expect(whole.thermometer.time_s.length - holed.thermometer.time_s.length).toBe(50);
  expect(holed.truth.trace.body_K.at(-1)).toBe(whole.truth.trace.body_K.at(-1));
});

test("late readings are late by no more than said, in order, in whole ms, and where they say they are", () => {
  const base = empty();
  const { thermometer, truth } = night({ ...base, sampling: { interval_s: 1, jitter_s: 0.3, gaps: [] } });
  const late = [...thermometer.time_s].map((t, i) => t - i);
  expect(Math.max(...late)).toBeLessThanOrEqual(0.3001);
  expect(Math.min(...late.slice(1))).toBeGreaterThanOrEqual(0);
  expect(new Set(late.map((x) => x.toFixed(3))).size).toBeGreaterThan(100);
  for (const t of thermometer.time_s) expect(Math.abs(t * 1000 - Math.round(t * 1000))).toBeLessThan(1e-6);
  const i = thermometer.time_s.length - 1;
  const end_s = truth.pulses.start_s[0]! + 10;
  const K = 1e-6;
  const rise =
    (truth.pulses.Q_J[0]! / 10 / K) *
    -Math.expm1(-10 / 200) *
    Math.exp(-(thermometer.time_s[i]! - end_s) / 200);
  expectRelative([truth.trace.body_K[i]!], [0.5 + rise], 1e-9); // as in the closed form above
});

test("a cell that runs away is refused", () => {
  const base = aHeliumCell();
  const scenario: Scenario = { ...base, cell: { ...base.cell, heatLeak_W: 1 } };
  expect(() => night({ ...scenario, protocol: { ...base.protocol, start: "at-stage" } })).toThrow(
    DomainError,
  );
});
