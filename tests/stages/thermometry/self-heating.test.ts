import { expect, test } from "vitest";
import { SampleFlag } from "../../../stages/ingest/types.js";
import { calibrationOf } from "../../../stages/thermometry/calibration.js";
import { thermometerSchema } from "../../../stages/thermometry/config.js";
import { bodyTemperature_K, selfHeatingEffect } from "../../../stages/thermometry/self-heating.js";
import { toTemperature } from "../../../stages/thermometry/to-temperature.js";
import type { Calibration } from "../../../stages/thermometry/types.js";
import { expectRelative } from "../../expect-relative.js";

const MOUNT = { current: "1 nA", thermal_resistance: "2e9 K/W", at: "0.5 K" };

/** A sensor of R = 500 Ohm·(1 K/T)², ln T = (ln 500 − ln R)/2, from 0.2 K to 5 K. */
function sensor(self_heating: object | undefined): Calibration {
  const config = thermometerSchema.parse({
    thermometer: "ge-31",
    scale: "ITS-90",
    calibration: {
      form: "log-polynomial",
      coefficients: [Math.log(500) / 2, -0.5],
      resistance_range: ["20 Ohm", "12.5 kOhm"],
      standard_uncertainty: "0 mK",
    },
    self_heating,
  });
  return calibrationOf(config, null);
}

const resistanceOf = (T: number): number => 500 / T ** 2;

function bodyOf(resistance: readonly number[], calibration: Calibration): Float64Array {
  const n = resistance.length;
  const log = {
    time_s: Float64Array.from(resistance, (_, i) => i),
    resistance_Ohm: Float64Array.from(resistance),
    flag: new Uint8Array(n),
  };
  return toTemperature(log, calibration).temperature_K;
}

// What the sensor shows is put together here the other way about: from a body at T to the resistance read. Newton's
// method stops where the next round is below rounding.
test.each([
  ["current, T^-3", MOUNT, (T: number, R: number) => 1e-18 * R * 2e9 * (0.5 / T) ** 3],
  [
    "voltage",
    { ...MOUNT, current: undefined, voltage: "50 µV" },
    (T: number, R: number) => (2.5e-9 / R) * 2e9 * (0.5 / T) ** 3,
  ],
  ["power", { ...MOUNT, current: undefined, power: "50 fW" }, (T: number) => 5e-14 * 2e9 * (0.5 / T) ** 3],
  ["T^1", { ...MOUNT, power_law: 1 }, (T: number, R: number) => 1e-18 * R * 2e9 * (T / 0.5)],
  ["T^0", { ...MOUNT, power_law: 0 }, (_: number, R: number) => 1e-18 * R * 2e9],
] as const)("the body's temperature comes back: %s", (_, config, excess_K) => {
  const calibration = sensor(config);
  const body = [0.3, 0.5, 0.7, 1, 1.6];
  const read = body.map((T) => {
    // T_sensor = T + excess(T, R(T_sensor)), by plain iteration to the last digit: the excess is 10⁻² of T at most.
    let sensor_K = T;
    for (let i = 0; i < 40; i++) sensor_K = T + excess_K(T, resistanceOf(sensor_K));
    return resistanceOf(sensor_K);
  });
  const bare = bodyOf(read, sensor(undefined));
  expect(bare.every((T, i) => T > body[i]! * (1 + 1e-9))).toBe(true);
  expectRelative(bodyOf(read, calibration), body, 1e-13);
});

// T + a/T = T_s has the closed root (T_s + √(T_s² − 4a))/2; a = P·R_th·T.
test.each([1e-4, 1e-2, 0.2])("p = −1 against the closed root of a quadratic, a = %f of T_s²", (a) => {
  const heating = {
    power_W: () => 1,
    resistance_K_per_W: (T: number) => a / T,
    powerLaw: -1,
    u_relative: 0,
  };
  expectRelative([bodyTemperature_K(heating, 1, 0)], [(1 + Math.sqrt(1 - 4 * a)) / 2], 1e-13);
});

test("an excess that no body explains leaves no temperature, and says so", () => {
  // T + x·T_s⁴/T³ is least at T = (3x)^¼ T_s, where it is T_s·(3x)^¼·4/3: above T_s from x = (3/4)⁴/3 = 0.1055 on.
  const heating = (x: number) => ({
    power_W: () => 1,
    resistance_K_per_W: (T: number) => x / T ** 3,
    powerLaw: -3,
    u_relative: 0,
  });
  expect(bodyTemperature_K(heating(0.1054), 1, 0)).toBeCloseTo(0.75, 1);
  expect(bodyTemperature_K(heating(0.1056), 1, 0)).toBeNaN();
  const log = { time_s: Float64Array.of(0), resistance_Ohm: Float64Array.of(9000), flag: new Uint8Array(1) };
  const trace = toTemperature(log, sensor({ ...MOUNT, thermal_resistance: "2e12 K/W" }));
  expect(trace.temperature_K[0]).toBeNaN();
  expect(trace.flag[0]).toBe(SampleFlag.OutsideCalibration);
});

test("every ± of the self-heating is one source", () => {
  // 2·3 % of the current, 4 % of the resistance, 3·2 % of the temperature at which it holds: √(36 + 16 + 36) %.
  const { selfHeating } = sensor({
    current: "1 ± 0.03 nA",
    thermal_resistance: "2e9 ± 4 % K/W",
    at: "0.5 ± 0.01 K",
  });
  expectRelative([selfHeating!.u_relative], [Math.sqrt(88) / 100], 1e-12);
});

test.each([
  ["a constant current", MOUNT],
  ["a constant voltage", { ...MOUNT, current: undefined, voltage: "50 µV" }],
  ["a constant power, R_th ∝ 1/T", { ...MOUNT, current: undefined, power: "50 fW", power_law: -1 }],
])("what the thermal resistance does to C is what a pulse reduced twice shows: %s", (_, config) => {
  const u = 0.05;
  const plain = sensor({ ...config, thermal_resistance: "2e9 ± 5 % K/W" });
  const h = 1e-3;
  const changed = (by: number) => sensor({ ...config, thermal_resistance: `${2e9 * (1 + by)} K/W` });
  for (const [T, dT] of [
    [0.4, 0.02],
    [1, 0.05],
  ] as const) {
    // The resistances read before and after the pulse, whatever bodies they stand for.
    const read = [T - dT / 2, T + dT / 2].map(resistanceOf);
    const ends = (calibration: Calibration) => bodyOf(read, calibration);
    const [before, after] = ends(plain) as unknown as [number, number];
    const [low, high] = [ends(changed(-h)), ends(changed(h))];
    const rise = (pair: Float64Array) => pair[1]! - pair[0]!;
    const middle = (pair: Float64Array) => (pair[0]! + pair[1]!) / 2;
    const relativeC = (-(rise(high) - rise(low)) / (2 * h) / (after - before)) * u;
    const shift = ((middle(high) - middle(low)) / (2 * h)) * u;
    const effect = selfHeatingEffect(
      plain,
      Float64Array.of((before + after) / 2),
      Float64Array.of(after - before),
    );
    // Central differences err by h². The least excess here is 1e-7 of T, its change h of that and the change of ΔT a
    // tenth of it, known to a rounding of 1e-16: 1e-5. The mean of the two ends' shifts is not that at the middle: (dT/T)².
    expectRelative(effect.relative, [relativeC], 1e-5);
    expectRelative(effect.shift_K, [shift], 20 * (dT / T) ** 2);
    expect(Math.abs(relativeC)).toBeGreaterThan(1e-8);
  }
});

test("an error of the self-heating hardly shows in C of a T³ body at its own temperature", () => {
  // At constant power δ ∝ T⁻³: ΔT is off by −3δ/T, and so is C; a C ∝ T³ at a T that is off by δ makes up for it.
  const calibration = sensor({ power: "50 fW", thermal_resistance: "2e9 ± 5 % K/W", at: "0.5 K" });
  const { relative, shift_K } = selfHeatingEffect(calibration, Float64Array.of(0.5), Float64Array.of(0.005));
  // To first order in δ/T = 2e-4, and in (dT/T)².
  expectRelative([relative[0]!], [(3 * shift_K[0]!) / 0.5], 2e-3);
});

test("without self-heating there is no source", () => {
  const effect = selfHeatingEffect(sensor(undefined), Float64Array.of(0.5), Float64Array.of(0.01));
  expect([effect.relative[0], effect.shift_K[0]]).toEqual([0, 0]);
});
