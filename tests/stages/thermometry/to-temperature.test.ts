import { expect, test } from "vitest";
import { SampleFlag } from "../../../stages/ingest/types.js";
import { scaleNotes } from "../../../stages/thermometry/scale.js";
import { toTemperature } from "../../../stages/thermometry/to-temperature.js";
import type { Calibration } from "../../../stages/thermometry/types.js";

const calibration: Calibration = {
  form: "table",
  scale: "ITS-90",
  resistanceRange_Ohm: [10, 100],
  temperatureRange_K: [0.7, 7],
  u_temperature_K: 0,
  u_slope: 0,
  lag_s: null,
  u_lag_s: 0,
  selfHeating: null,
  temperature_K: (resistance) => (resistance >= 10 && resistance <= 100 ? 70 / resistance : Number.NaN),
};

test("samples outside the calibration are marked, flagged ones keep their flag, the log is not touched", () => {
  const log = {
    time_s: Float64Array.of(0, 1, 2, 3),
    resistance_Ohm: Float64Array.of(20, 200, Number.NaN, 50),
    flag: Uint8Array.of(0, 0, SampleFlag.OverRange, SampleFlag.Excluded),
  };
  const trace = toTemperature(log, calibration);
  expect([...trace.temperature_K]).toEqual([3.5, Number.NaN, Number.NaN, Number.NaN]);
  expect([...trace.flag]).toEqual([
    0,
    SampleFlag.OutsideCalibration,
    SampleFlag.OverRange,
    SampleFlag.Excluded,
  ]);
  expect([...log.flag]).toEqual([0, 0, SampleFlag.OverRange, SampleFlag.Excluded]);
  expect(trace.time_s).toBe(log.time_s);
});

test("a scale is named where it does not cover the calibration or is not known", () => {
  expect(scaleNotes(calibration)).toEqual([]);
  expect(scaleNotes({ scale: "ITS-90", temperatureRange_K: [0.22, 3] })).toEqual([
    "ITS-90 is defined from 0.65 K up; the calibration, from 0.2200 K to 3.000 K, extends it (PLTS-2000 is defined below 1 K)",
  ]);
  expect(scaleNotes({ scale: "PLTS-2000", temperatureRange_K: [0.01, 0.9] })).toEqual([]);
  expect(scaleNotes({ scale: "house scale", temperatureRange_K: [1, 2] })).toEqual([
    'temperature scale "house scale" is neither ITS-90 nor PLTS-2000; its name is kept as given',
  ]);
});
