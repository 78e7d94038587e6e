import { z } from "zod";
import { InputError } from "../errors.js";
import { name, oneOf, quantity, reading, text } from "../quantities/schema.js";

const share = (description: string) => z.number().min(0).max(1).default(0).meta({ description });
const count = (fallback: number, description: string) =>
  z.int().min(1).max(10_000).default(fallback).meta({ description });

const settings = z
  .union([
    z
      .array(quantity("temperature", { description: "A set point.", sign: "positive", example: "0.35 K" }))
      .min(1),
    z.strictObject({
      from: quantity("temperature", { description: "First set point.", sign: "positive", example: "0.32 K" }),
      to: quantity("temperature", { description: "Last set point.", sign: "positive", example: "0.55 K" }),
      count: count(6, "Number of set points, in geometric series."),
    }),
  ])
  .meta({ description: "Set points of the stage: a list, or a geometric series." });

const stage = z
  .strictObject({
    settings,
    time_constant: quantity("time", {
      description: "Of the approach to a set point.",
      sign: "positive",
      example: "30 s",
    }).prefault("30 s"),
    settle: quantity("time", {
      description: "Between a new set point and its first pulse.",
      sign: "not-negative",
      example: "200 s",
    }).prefault("200 s"),
    step_in_pulse: quantity("temperature", {
      description:
        "The set point steps by this in the middle of every pulse, up and down in turn; 0 for none.",
      sign: "not-negative",
      example: "1 mK",
    }).prefault("0 K"),
    start: oneOf(
      ["balanced", "at-stage"],
      "Cell at the start: where leak and link balance, or at the first set point.",
    ),
  })
  .meta({ description: "The stage's programme." });

const pulses = z
  .strictObject({
    per_setting: count(1, "Pulses at each set point."),
    length: quantity("time", {
      description: "Length of a pulse.",
      sign: "positive",
      example: "30 s",
    }).prefault("30 s"),
    rise: z.number().positive().max(1).default(0.02).meta({ description: "ΔT/T wanted of each pulse." }),
    wait: quantity("time", { description: "After each pulse.", sign: "positive", example: "300 s" }).prefault(
      "300 s",
    ),
  })
  .meta({ description: "The heater's programme." });

const thermometerLog = z
  .strictObject({
    interval: quantity("time", {
      description: "Between readings.",
      sign: "positive",
      example: "1 s",
    }).prefault("1 s"),
    jitter: quantity("time", {
      description: "Most that a reading is late.",
      sign: "not-negative",
      example: "20 ms",
    }).prefault("0 s"),
  })
  .meta({ description: "How the thermometer is read." });

const heaterLog = z
  .strictObject({
    kind: oneOf(["events", "sampled"], "One row a pulse, or current and voltage against time."),
    interval: quantity("time", {
      description: "Between readings of a sampled log.",
      sign: "positive",
      example: "1 s",
    }).prefault("1 s"),
    reading_noise: share("Noise in proportion to a reading."),
    current_noise: quantity("current", {
      description: "Noise of the current.",
      sign: "not-negative",
      example: "0.5 nA",
    }).prefault("0 A"),
    voltage_noise: quantity("voltage", {
      description: "Noise of the voltage.",
      sign: "not-negative",
      example: "0.5 µV",
    }).prefault("0 V"),
    current_offset: quantity("current", {
      description: "Reading at no current.",
      example: "0.4 nA",
    }).prefault("0 A"),
    voltage_offset: quantity("voltage", { description: "Reading at no voltage.", example: "2 µV" }).prefault(
      "0 V",
    ),
    current_resolution: quantity("current", {
      description: "Digitising step of the current.",
      sign: "not-negative",
      example: "0.1 nA",
    }).prefault("0.1 nA"),
    voltage_resolution: quantity("voltage", {
      description: "Digitising step of the voltage.",
      sign: "not-negative",
      example: "0.1 µV",
    }).prefault("0.1 µV"),
  })
  .meta({ description: "How the heater is read." });

const stageLog = z
  .strictObject({
    every: z
      .int()
      .min(0)
      .default(10)
      .meta({ description: "Read with every n-th reading of the thermometer; 0 for no log." }),
    noise: quantity("temperature", {
      description: "Noise of a reading.",
      sign: "not-negative",
      example: "20 µK",
    }).prefault("20 µK"),
  })
  .meta({ description: "How the stage is read." });

const format = z
  .strictObject({
    delimiter: oneOf([",", ";", "tab", "space", "|"], "What parts the columns."),
    decimal: oneOf([".", ","], "Decimal mark."),
    newline: oneOf(["lf", "crlf"], "End of a line."),
    byte_order_mark: z
      .boolean()
      .default(false)
      .meta({ description: "Begin each file with a byte order mark." }),
    comments: z.boolean().default(false).meta({ description: "Begin each file with comment lines." }),
    quotes: z.boolean().default(false).meta({ description: "Put every field in quotes." }),
    time: oneOf(["s", "ms", "epoch", "epoch-ms", "iso8601"], "How times are written."),
    files: oneOf(
      ["separate", "together"],
      "Stage in a file of its own, or as a column beside the thermometer.",
    ),
  })
  .check((context) => {
    const { delimiter, decimal, quotes } = context.value;
    if (decimal !== "," || delimiter !== "," || quotes) return;
    context.issues.push({
      code: "custom",
      input: decimal,
      path: ["decimal"],
      message: "comma twice",
      params: { expected: "another mark than the delimiter", wayOut: 'add delimiter: ";", or quotes: true' },
    });
  })
  .meta({ description: "How the logs are written." });

const span = (dimension: "span" | "heat") => ({
  from: quantity("time", {
    description: "Beginning, from the night's first reading.",
    sign: "not-negative",
    example: "1200 s",
  }),
  to: quantity("time", {
    description: `End of the ${dimension === "heat" ? "heating" : "span"}.`,
    sign: "positive",
    example: "1500 s",
  }),
});

const faults = z
  .strictObject({
    spikes: z
      .strictObject({
        share: share("Share of readings hit."),
        size: z
          .number()
          .min(0)
          .default(0.05)
          .meta({ description: "Standard deviation of a hit, relative to R." }),
      })
      .prefault({})
      .meta({ description: "Readings that are off." }),
    over_range: share("Share of readings written as 9.9E37."),
    gaps: z
      .array(z.strictObject(span("span")))
      .default([])
      .meta({ description: "Spans without readings." }),
    disturbances: z
      .array(
        z.strictObject({
          ...span("heat"),
          heat: quantity("energy", { description: "Heat into the body that no log shows.", example: "3 µJ" }),
        }),
      )
      .default([])
      .meta({ description: "What happened to the cell that night." }),
  })
  .meta({ description: "What goes wrong." });

const clock = z
  .strictObject({
    heater_offset: quantity("time", {
      description: "Time to add to the heater's clock to have the thermometer's.",
      example: "0.35 ± 0.05 s",
    }).prefault("0 s"),
    in_run: oneOf(["auto", "declared"], "What run.yaml says of it: nothing, or the value as written here."),
  })
  .meta({ description: "How the two clocks agree." });

const INSTANT = /^\d{4}-\d\d-\d\dT\d\d:\d\d:\d\dZ$/;
const instant = reading(
  (input) => {
    if (typeof input === "string" && INSTANT.test(input) && !Number.isNaN(Date.parse(input))) return input;
    throw new InputError({
      expected: "an instant in UTC",
      wayOut: 'write "2026-11-14T20:00:00Z", in quotes',
    });
  },
  {
    type: "string",
    pattern: INSTANT.source,
    description: "When the first reading was taken.",
    shown: ["2026-11-14T20:00:00Z"],
  },
);

export const NIGHT_KEYS = {
  start: instant.optional(),
  stage: stage.optional(),
  pulses: pulses.optional(),
  thermometer_log: thermometerLog.optional(),
  heater_log: heaterLog.optional(),
  stage_log: stageLog.optional(),
  format: format.optional(),
  clock: clock.optional(),
  faults: faults.optional(),
};

export const nightSpec = z
  .strictObject({
    run: name({ description: "Name of the night.", example: "2026-11-14-a" }),
    filled: z.boolean().default(true).meta({ description: "false: the empty cell." }),
    seed: z.int().min(0).optional().meta({
      description: "Seed of the night; by default 1000 times the scenario's plus the night's number.",
    }),
    ...NIGHT_KEYS,
    exclude: z
      .array(
        z.strictObject({
          ...span("span"),
          reason: text({ description: "Why.", example: "helium transfer" }),
        }),
      )
      .default([])
      .meta({ description: "Spans that run.yaml leaves out." }),
    veto: z
      .array(
        z.strictObject({
          pulse: z
            .int()
            .min(1)
            .meta({ description: "Number of the pulse.", shown: [17] }),
          reason: text({ description: "Why.", example: "door slammed" }),
        }),
      )
      .default([])
      .meta({ description: "Pulses that run.yaml leaves out." }),
  })
  .meta({ description: "One night." });

const OF_ANY_NIGHT = z.strictObject({
  start: instant.prefault("2026-11-14T20:00:00Z"),
  pulses: pulses.prefault({}),
  thermometer_log: thermometerLog.prefault({}),
  heater_log: heaterLog.prefault({}),
  stage_log: stageLog.prefault({}),
  format: format.prefault({}),
  clock: clock.prefault({}),
  faults: faults.prefault({}),
});
/** A night of which nothing is said but its set points. */
export const NIGHT_DEFAULTS = OF_ANY_NIGHT.parse({});
