import { expect, test } from "vitest";
import { SampleFlag } from "../../../stages/ingest/types.js";
import { elapsed, nightOf } from "./night-of.js";

const many = (n: number, row: (i: number) => string) => Array.from({ length: n }, (_, i) => row(i)).join("");
const { OverRange, NotANumber, TimeNotIncreasing, Ragged, Excluded } = SampleFlag;
const nan = Number.NaN;

test("dialects of one log give the same columns", async () => {
  const plain = await nightOf({ thermometer: "t,R\n0.5,100.25\n1.0,100.5\n1.5,-1\n2.0,NaN\n" });
  for (const thermometer of [
    "t;R\r\n0,5;100,25\r\n1,0;100,5\r\n1,5;-1\r\n2,0;\r\n",
    "t\tR\r0.5\t100.25\r1.0\t100.5\r1.5\t-1\r2.0\tnan\r",
    '"t","R"\n"0.5","100.25"\n"1.0", "100.5"\n 1.5 , -1 \n2.0,-\n',
    "# by hand\n  t   R\n  0.5  100.25\n  1.0 100.50\n\n  # pause\n  1.5 -1\n  2.0  NaN\n",
    "no|t|R|\n1|0.5|100.25|\n2|1.0|1.005E+02|\n3|1.5|-1|\n4|2.0|9.91E37|\n",
  ])
    expect((await nightOf({ thermometer })).thermometer, thermometer).toEqual(plain.thermometer);
});

test("SCPI-1999 numbers, blanks and gap words are gaps, each flagged and counted", async () => {
  const night = await nightOf({
    thermometer:
      "t,R\n0,100\n1,9.9E37\n2,-9.9E+37\n3,9.91E37\n4,\n5,NaN\n6,-\n7,OVLD\n8,-999\n9,1e38\n10,0\n",
    format: { gap_words: ["OVLD", "-999"] },
  });
  const none = NotANumber;
  expect([...night.thermometer.flag]).toEqual([
    0,
    OverRange,
    OverRange,
    none,
    none,
    none,
    none,
    none,
    none,
    OverRange,
    none,
  ]);
  expect([...night.thermometer.resistance_Ohm]).toEqual([100, ...Array(10).fill(nan)]);
  expect(night.notes).toEqual([
    { file: "thermometer.csv", line: 3, count: 3, text: "over range" },
    { file: "thermometer.csv", line: 5, count: 6, text: "no reading" },
    { file: "thermometer.csv", line: 12, count: 1, text: "resistance not above zero, taken as no reading" },
  ]);
  expect(night.summaries[0]).toMatchObject({ rows: 11, usable: 1 });
});

test("units are taken into account", async () => {
  const night = await nightOf({
    thermometer: "t,R\n100,1.5\n200,1.6\n",
    time: { unit: "ms" },
    heater: "t,duration,I,V\n250,4,2,300\n",
    resistance: { column: "R", unit: "kOhm", factor: 1e3 },
  });
  expect([...night.thermometer.time_s]).toEqual([0.1, 0.2]);
  expect([...night.thermometer.resistance_Ohm]).toEqual([1500, 1600]);
  expect(night.heater).toEqual({
    kind: "events",
    time_s: Float64Array.of(0.25),
    duration_s: Float64Array.of(4),
    current_A: Float64Array.of(0.002),
    voltage_V: Float64Array.of(0.3),
  });
});

test("several logs in one file are read side by side; blank cells are no samples", async () => {
  const files = { heater: "thermometer.csv", stage: "thermometer.csv" };
  const thermometer = "t,R,I,V,Tstage\n0,100,,,\n0.1,101,1,2,0.35\n0.2,102,,,\n0.3,,3,4,\n0.4,104,5,,0.36\n";
  const night = await nightOf({ thermometer, sampled: true, files });
  expect([...night.thermometer.time_s]).toEqual([0, 0.1, 0.2, 0.4]);
  expect(night.heater).toEqual({
    kind: "sampled",
    time_s: Float64Array.of(0.1, 0.3, 0.4),
    current_A: Float64Array.of(0.001, 0.003, nan),
    voltage_V: Float64Array.of(0.002, 0.004, nan),
  });
  expect(night.stage).toEqual({
    time_s: Float64Array.of(0.1, 0.4),
    temperature_K: Float64Array.of(0.35, 0.36),
  });
});

test("a text in an excluded span is no error, and its sample stays", async () => {
  const night = await nightOf({
    thermometer: "t,R\n0,100\n1,OVLD\n2,101\n3,102\n",
    exclude: [elapsed(0.5, 2)],
  });
  expect([...night.thermometer.flag]).toEqual([0, NotANumber | Excluded, Excluded, 0]);
  expect([...night.thermometer.resistance_Ohm]).toEqual([100, nan, nan, 102]);
  expect(night.notes).toEqual([
    {
      file: "thermometer.csv",
      line: 3,
      count: 1,
      text: "text where a number should be, in an excluded span",
    },
  ]);
});

test("a last line cut short is left out with a note", async () => {
  for (const last of ["20", "20.0,", "20.0,1", "20.0,100."]) {
    const thermometer = `t,R\n${many(20, (i) => `${i}.0,100.5\n`)}${last}`;
    const night = await nightOf({ thermometer });
    expect(night.thermometer.time_s.length, last).toBe(20);
    expect(night.notes, last).toEqual([
      { file: "thermometer.csv", line: 22, count: 1, text: "last line cut short, left out" },
    ]);
  }
});

test("a whole last line needs no line end", async () => {
  const night = await nightOf({ thermometer: "t,R\n0,99.5\n1,100.5\n2,99.5" });
  expect(night.thermometer.time_s.length).toBe(3);
  expect(night.notes).toEqual([]);
});

test("a few broken lines are flagged, not dropped", async () => {
  const night = await nightOf({
    thermometer: `t,R,x\n${many(10, (i) => `${i},100,1\n`)}10,1\n11,100,1,12,100,1\n12,100,1\n13\n14,100,1\n`,
  });
  expect([...night.thermometer.flag.subarray(10)]).toEqual([Ragged, Ragged, 0, Ragged, 0]);
  expect([...night.thermometer.time_s.subarray(10)]).toEqual([10, 11, 12, 13, 14]);
  expect(night.notes).toEqual([
    { file: "thermometer.csv", line: 12, count: 3, text: "line with missing or surplus cells, not used" },
  ]);
});

test("a heading written again is skipped, preamble and units with it", async () => {
  const top = "Bridge AB-7\nt,R\ns,Ohm\n";
  const night = await nightOf({ thermometer: `${top}0,100\n${top}1,101\n` });
  expect([...night.thermometer.time_s]).toEqual([0, 1]);
  expect(night.notes).toEqual([
    { file: "thermometer.csv", line: 5, count: 3, text: "heading written again, skipped" },
  ]);
});

test("lines are counted through comments, blank lines and quotes, over many pieces", async () => {
  const body = many(30_000, (i) => (i % 7 === 0 ? `# say "${i}\n` : i % 11 === 0 ? "\n" : `${i},"100"\n`));
  await expect(nightOf({ thermometer: `t,R\n${body}30000,oops\n` })).rejects.toThrow(
    /^thermometer\.csv:30002: R is "oops"/,
  );
  await expect(nightOf({ thermometer: `t,R\n${body}30000,"100\n30001,100\n` })).rejects.toThrow(
    /^thermometer\.csv:30002: found "\\""/,
  );
});

test("pieces of any size give the same columns", async () => {
  const thermometer = `t,R\r\n${many(500, (i) => `${i / 8},${100 + i / 16}\r\n`)}`;
  const whole = await nightOf({ thermometer });
  expect(whole.thermometer.time_s.length).toBe(500);
  for (const size of [1, 7, 4096]) {
    const pieces = Array.from({ length: Math.ceil(thermometer.length / size) }, (_, i) =>
      thermometer.slice(i * size, (i + 1) * size),
    );
    expect(await nightOf({ thermometer: pieces })).toEqual(whole);
  }
});

test("a whole string of many pieces' length is read to its end", async () => {
  const n = 60_000;
  const night = await nightOf({ thermometer: `t,R\n${many(n, (i) => `${i / 8},${100 + i / 16}\n`)}` });
  expect(night.thermometer.time_s.length).toBe(n);
  expect(night.thermometer.resistance_Ohm[n - 1]).toBe(100 + (n - 1) / 16);
});

test("times that do not increase are flagged, the one out of line where it can be told", async () => {
  const times = [0, 1, 1, 2, 900, 3, 4, 5, 2.5, 6, ...Array.from({ length: 400 }, (_, i) => 7 + i)];
  const night = await nightOf({ thermometer: `t,R\n${times.map((t) => `${t},100\n`).join("")}` });
  const flagged = [...night.thermometer.flag].flatMap((flag, i) => (flag & TimeNotIncreasing ? [i] : []));
  // A repeat, one that ran ahead, one that fell back.
  expect(flagged).toEqual([2, 4, 8]);
  expect(night.thermometer.resistance_Ohm[4]).toBeNaN();
  expect(night.notes).toEqual([
    { file: "thermometer.csv", line: 4, count: 3, text: "time not after the sample before" },
  ]);
});

test("a sample without a time is flagged", async () => {
  const night = await nightOf({ thermometer: "t,R\n0,100\n,101\n2,102\n" });
  expect([...night.thermometer.flag]).toEqual([0, TimeNotIncreasing, 0]);
  expect(night.thermometer.time_s[1]).toBeNaN();
});
