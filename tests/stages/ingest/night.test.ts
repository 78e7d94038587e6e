import { expect, test } from "vitest";
import { SampleFlag } from "../../../stages/ingest/types.js";
import { elapsed, nightOf } from "./night-of.js";

test("relative times stay as written", async () => {
  const night = await nightOf({ thermometer: "t,R\n5,100\n6,100\n", heater: "t,duration,I,V\n5.5,1,1,1\n" });
  expect(night.origin_epoch_s).toBeNull();
  expect([...night.thermometer.time_s]).toEqual([5, 6]);
  expect(night.heater.time_s[0]).toBe(5.5);
});

test("absolute times count from the first usable thermometer sample, whatever each log's unit", async () => {
  const night = await nightOf({
    thermometer: "t,R\n2026-11-14 22:00:00.0,NaN\n2026-11-14 22:00:00.5,100\n2026-11-14 22:00:01.5,101\n",
    time: { unit: "iso8601", zone: "+01:00" },
    heater: `t,duration,I,V\n${Date.parse("2026-11-14T21:00:10Z")},1,1,1\n`,
    heaterTime: { unit: "epoch-ms" },
    exclude: [elapsed(0.9, 1.1)],
  });
  expect(night.origin_epoch_s).toBe(Date.parse("2026-11-14T21:00:00.5Z") / 1000);
  expect([...night.thermometer.time_s]).toEqual([-0.5, 0, 1]);
  expect(night.heater.time_s[0]).toBe(9.5);
  expect([...night.thermometer.flag]).toEqual([SampleFlag.NotANumber, 0, SampleFlag.Excluded]);
});

test("an excluded span may be given by the clock", async () => {
  const epoch_s = Date.parse("2026-11-14T21:00:00Z") / 1000;
  const night = await nightOf({
    thermometer: `t,R\n${epoch_s},100\n${epoch_s + 1},100\n${epoch_s + 2},100\n`,
    time: { unit: "epoch" },
    exclude: [
      {
        from: { kind: "instant", epoch_s: epoch_s + 1, text: "" },
        to: { kind: "instant", epoch_s: epoch_s + 1.5, text: "" },
        reason: "helium transfer",
      },
    ],
  });
  expect([...night.thermometer.flag]).toEqual([0, SampleFlag.Excluded, 0]);
});

test("pulses out of order are sorted with a note; gaps in a pulse stay NaN", async () => {
  const night = await nightOf({
    thermometer: "t,R\n0,100\n",
    heater: "t,duration,I,V\n30,4,1,\n10,4,2,2\n,4,3,3\n",
  });
  expect(night.heater).toMatchObject({
    time_s: Float64Array.of(10, 30, Number.NaN),
    current_A: Float64Array.of(0.002, 0.001, 0.003),
    voltage_V: Float64Array.of(0.002, Number.NaN, 0.003),
  });
  expect(night.notes.map(({ text }) => text)).toContain(
    "pulses were not in order of time; they are sorted, and numbered in that order",
  );
  expect(night.summaries[1]).toMatchObject({ log: "heater", rows: 3, usable: 1, gaps: [] });
});

test("stage and sampled heater keep only samples with a time of their own", async () => {
  const night = await nightOf({
    thermometer: "t,R\n0,100\n",
    heater: "t,I,V\n0,1,1\n1,2,2\n1,3,3\n2,4,4\n",
    stage: "t,Tstage\n0,0.3\n1,0\n,0.3\n2,0.4\n",
    sampled: true,
  });
  expect([...night.heater.time_s]).toEqual([0, 1, 2]);
  expect([...night.heater.current_A]).toEqual([0.001, 0.002, 0.004]);
  expect([...night.stage!.time_s]).toEqual([0, 1, 2]);
  expect([...night.stage!.temperature_K]).toEqual([0.3, Number.NaN, 0.4]);
});

test("summaries tell spans and gaps of more than ten sampling intervals", async () => {
  const times = Array.from({ length: 200 }, (_, i) => (i < 100 ? i : i + 10.5) / 10);
  const night = await nightOf({
    thermometer: `t,R\n${times
      .map((t) => `${t};100\n`)
      .join("")
      .replaceAll(";", ",")}`,
  });
  expect(night.summaries[0]).toEqual({
    log: "thermometer",
    file: "thermometer.csv",
    rows: 200,
    usable: 200,
    from_s: 0,
    to_s: 20.95,
    gaps: [{ from_s: 9.9, to_s: 11.05 }],
    dialect: { delimiter: ",", decimal: "." },
  });
});
