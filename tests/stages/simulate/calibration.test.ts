import { expect, test } from "vitest";
import { parse } from "yaml";
import { formatSchema } from "../../../stages/ingest/config.js";
import { readTable } from "../../../stages/ingest/table.js";
import { issueCalibration } from "../../../stages/simulate/calibration.js";
import { resistance_Ohm } from "../../../stages/simulate/thermometer.js";
import { calibrationOf } from "../../../stages/thermometry/calibration.js";
import { thermometerSchema } from "../../../stages/thermometry/config.js";
import type { Calibration } from "../../../stages/thermometry/types.js";
import { expectRelative } from "../../expect-relative.js";
import { aScenario } from "./a-scenario.js";

const T = Float64Array.of(0.26, 0.4, 0.8, 1.2, 1.55);

/** The calibration as issued, read back by the stage that reads those of real laboratories. */
async function readBack(
  form: string,
  error_K: number,
  points?: number,
): Promise<{ calibration: Calibration; law: readonly number[] }> {
  const base = aScenario().thermometer;
  const thermometer = { ...base, calibration: { ...base.calibration, form, points } } as typeof base;
  const issued = issueCalibration(thermometer, error_K);
  const yaml = [
    "thermometer: ge-4",
    "scale: ITS-90",
    "calibration:",
    ...issued.yaml("t.csv").map((l) => `  ${l}`),
  ];
  const config = thermometerSchema.parse(parse(yaml.join("\n")));
  if (config.calibration.form !== "table") return { calibration: calibrationOf(config, null), law: base.law };
  const { resistance, temperature } = config.calibration;
  const table = await readTable(
    issued.table!,
    "t.csv",
    [resistance, temperature],
    formatSchema.parse(undefined),
  );
  const [R, T_K] = table.columns as [Float64Array, Float64Array];
  const points_ = { file: "t.csv", line: table.line, resistance_Ohm: R, temperature_K: T_K };
  return { calibration: calibrationOf(config, points_), law: base.law };
}

// A spline through 40 points of a smooth law, R to eight digits: 1e-6 in T. Series of 9 coefficients leave 1e-6, of 12
// 1e-8, as their last coefficients show; the powers of ln R lose ten digits of sixteen to each other.
test.each([
  ["table", undefined, 2e-6],
  ["chebyshev", 9, 5e-6],
  ["chebyshev", 12, 1e-7],
  ["log-polynomial", 9, 5e-6],
] as const)("%s (%s points) gives back the temperature", async (form, points, tolerance) => {
  const { calibration, law } = await readBack(form, 0, points);
  expectRelative(
    T.map((t) => calibration.temperature_K(resistance_Ohm(law, t))),
    T,
    tolerance,
  );
});

test.each(["table", "chebyshev", "log-polynomial"])(
  "%s carries its one error at every temperature",
  async (form) => {
    const right = await readBack(form, 0);
    const wrong = await readBack(form, 1e-3);
    const shift = T.map((t) => {
      const R = resistance_Ohm(right.law, t);
      return wrong.calibration.temperature_K(R) - right.calibration.temperature_K(R);
    });
    expectRelative(shift, [1e-3, 1e-3, 1e-3, 1e-3, 1e-3], 0.01); // 1e-3 K between curves each good to 5e-6 of 1 K
  },
);

test("a series is not used outside the temperatures it was made for", async () => {
  const { calibration, law } = await readBack("chebyshev", 0, 9);
  const at = (t: number) => calibration.temperature_K(resistance_Ohm(law, t));
  expect(at(0.24)).toBeNaN();
  expect(at(1.7)).toBeNaN();
});
