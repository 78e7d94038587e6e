import { z } from "zod";
import { InputError } from "../errors.js";
import { parseQuantity } from "../quantities/quantity.js";
import { columnName, columnOf, name, quantity, quantityOr, reading, text } from "../quantities/schema.js";

export type { ValueColumn } from "../quantities/schema.js";

const TIME_UNITS = ["s", "ms", "min", "h", "epoch", "epoch-ms", "iso8601"] as const;
const ZONE = /^(UTC|[+-](?:0\d|1[0-4]):[0-5]\d)$/;

const zone = reading(
  (input) => {
    if (typeof input === "string" && ZONE.test(input)) return input;
    throw new InputError({
      expected: "UTC or an offset from UTC such as +01:00",
      wayOut:
        "give the offset the instrument's clock had that night; place names are refused, since a change to or from summer time makes an hour ambiguous",
    });
  },
  {
    type: "string",
    pattern: ZONE.source,
    description: "Offset from UTC of ISO 8601 times that carry none of their own.",
    shown: ["UTC", "+01:00"],
  },
);

const timeColumn = z
  .strictObject({
    column: columnName(),
    unit: z.enum(TIME_UNITS).meta({
      description:
        "s, ms, min and h count from any origin; epoch and epoch-ms are Unix time in seconds and milliseconds; iso8601 is a date and time.",
      shown: ["s"],
    }),
    zone: zone.prefault("UTC"),
  })
  .meta({ description: "Column with the time of each row.", shown: ["{ column: t, unit: s }"] });

export type TimeColumn = z.output<typeof timeColumn>;

const delimiter = z.enum(["auto", ",", ";", "tab", "space", "|"]);
const decimal = z.enum(["auto", ".", ","]);
const FORMAT_MEANING = {
  delimiter: "What parts the columns; auto reads it from the first lines.",
  decimal: "Decimal mark; auto reads it from the first lines.",
  comment: 'Lines that begin so are no data; "" if there are none.',
  gap_words:
    "Further words that stand for a missing value, beside an empty field, NaN and the over-range numbers of SCPI-1999.",
} as const;

/** How a log is written, each key left to the run's own format where absent. */
const partialFormat = z
  .strictObject({
    delimiter: delimiter.optional().meta({ description: FORMAT_MEANING.delimiter }),
    decimal: decimal.optional().meta({ description: FORMAT_MEANING.decimal }),
    comment: z.string().optional().meta({ description: FORMAT_MEANING.comment }),
    gap_words: z.array(z.string()).optional().meta({ description: FORMAT_MEANING.gap_words }),
  })
  .meta({ description: "How this file is written, where it differs from the run's other logs." });

export const formatSchema = z
  .strictObject({
    delimiter: delimiter.default("auto").meta({ description: FORMAT_MEANING.delimiter }),
    decimal: decimal.default("auto").meta({ description: FORMAT_MEANING.decimal }),
    comment: z.string().default("#").meta({ description: FORMAT_MEANING.comment }),
    gap_words: z
      .array(z.string())
      .default([])
      .meta({ description: FORMAT_MEANING.gap_words, shown: [["OVLD"]] }),
  })
  .check((context) => {
    const { delimiter: between, decimal: mark } = context.value;
    if (between === "," && mark === ",") {
      context.issues.push({
        code: "custom",
        input: context.value,
        path: ["decimal"],
        message: "comma twice",
        params: {
          expected: 'another mark than the delimiter, which is ","',
          wayOut: 'write decimal: "." or name the delimiter that the file has',
        },
      });
    }
  })
  .prefault({})
  .meta({ description: "How the files are written." });

/** How a table of numbers is written. */
export type LogFormat = z.output<typeof formatSchema>;

const file = (description: string, example: string) => text({ description, example });

const thermometerLog = z
  .strictObject({
    file: file("The thermometer's log.", "thermometer.csv"),
    time: timeColumn,
    resistance: columnOf("resistance", "Column with the thermometer's resistance."),
    excitation: columnOf(
      ["voltage", "current", "power"],
      "Column with the thermometer's excitation. Checked to be there; no self-heating is corrected from it.",
    ).optional(),
    format: partialFormat.optional(),
  })
  .meta({ description: "The log of the cell's thermometer." });

const heaterEvents = z.strictObject({
  kind: z.literal("events").meta({ description: "One row a pulse." }),
  file: file("The heater's log.", "heater.csv"),
  time: timeColumn.meta({
    description: "Column with the start of each pulse.",
    shown: ["{ column: t, unit: s }"],
  }),
  duration: columnOf("time", "Column with the length of each pulse."),
  current: columnOf("current", "Column with the heater's current."),
  voltage: columnOf("voltage", "Column with the voltage across the heater."),
  format: partialFormat.optional(),
});

const heaterSampled = z.strictObject({
  kind: z.literal("sampled").meta({ description: "Current and voltage against time." }),
  file: file("The heater's log.", "heater.csv"),
  time: timeColumn,
  current: columnOf("current", "Column with the heater's current."),
  voltage: columnOf("voltage", "Column with the voltage across the heater."),
  pulse_length: quantity("time", {
    description:
      "Programmed length of every pulse. Without it the log's samples tell it, to one sampling interval if they are in step with the pulses.",
    sign: "positive",
    example: "4.000 ± 0.001 s",
  }).optional(),
  format: partialFormat.optional(),
});

const stageLog = z
  .strictObject({
    file: file("The stage's log.", "stage.csv"),
    time: timeColumn,
    temperature: columnOf("temperature", "Column with the stage's temperature."),
    format: partialFormat.optional(),
  })
  .meta({ description: "The log of the stage that the cell hangs from, if there is one." });

const logsSchema = z
  .strictObject({
    thermometer: thermometerLog,
    heater: z
      .discriminatedUnion("kind", [heaterEvents, heaterSampled])
      .meta({ description: "The log of the cell's heater: one row a pulse (events), or sampled." }),
    stage: stageLog.optional(),
  })
  .meta({ description: "The night's raw logs. They are read, never written." });

/** A moment of the night: counted from the thermometer log's first sample, or an instant. */
export type Moment =
  | { readonly kind: "elapsed"; readonly time_s: number; readonly text: string }
  /** ISO 8601 as written; without an offset of its own it is meant in `logs.thermometer.time.zone`. */
  | { readonly kind: "instant"; readonly epoch_s: number; readonly text: string };

const ISO = /^\d{4}-\d\d-\d\d[T ]\d\d:\d\d(:\d\d(\.\d+)?)?(Z|[+-]\d\d:\d\d)?$/;
const HAS_OFFSET = /(Z|[+-]\d\d:\d\d)$/;

const moment = (description: string) =>
  reading(
    (input): { kind: "elapsed"; time_s: number; text: string } | { kind: "instant"; text: string } => {
      const expected = "a duration from the night's first sample, or an ISO 8601 date and time";
      const wayOut = 'write "1200 s", or "2026-11-14T23:40:00Z"';
      if (typeof input !== "string") throw new InputError({ expected, wayOut });
      if (ISO.test(input)) {
        if (Number.isNaN(Date.parse(isoWithZone(input, "UTC")))) throw new InputError({ expected, wayOut });
        return { kind: "instant", text: input };
      }
      try {
        return { kind: "elapsed", time_s: parseQuantity(input, "time").value, text: input };
      } catch (error) {
        if (!(error instanceof InputError)) throw error;
        throw new InputError({ expected, wayOut });
      }
    },
    { type: "string", description, shown: ["1200 s", "2026-11-14T23:40:00Z"] },
  );

function isoWithZone(written: string, zoneOfLog: string): string {
  const iso = written.replace(" ", "T");
  return HAS_OFFSET.test(iso) ? iso : iso + (zoneOfLog === "UTC" ? "Z" : zoneOfLog);
}

function withEpoch(
  at: { kind: "elapsed"; time_s: number; text: string } | { kind: "instant"; text: string },
  zoneOfLog: string,
): Moment {
  return at.kind === "elapsed" ? at : { ...at, epoch_s: Date.parse(isoWithZone(at.text, zoneOfLog)) / 1000 };
}

const excludeSchema = z
  .array(
    z.strictObject({
      from: moment("Beginning of the span: from the night's first thermometer sample, or an instant."),
      to: moment("End of the span."),
      reason: text({ description: "Why; it stays with the data.", example: "helium transfer" }),
    }),
  )
  .prefault([])
  .meta({
    description: "Spans of the thermometer log to leave out.",
    shown: ["[{ from: 1200 s, to: 1500 s, reason: helium transfer }]"],
  });

const vetoSchema = z
  .array(
    z.strictObject({
      pulse: z
        .int()
        .min(1)
        .meta({ description: "Number of the pulse in the heater log, from 1 on.", shown: [17] }),
      reason: text({ description: "Why; it stays with the pulse.", example: "door slammed" }),
      keep: z.boolean().default(false).meta({
        description: "true uses the pulse in spite of its flags, instead of leaving it out.",
      }),
    }),
  )
  .prefault([])
  .meta({
    description: "Pulses a person has judged.",
    shown: ["[{ pulse: 17, reason: door slammed }]"],
  });

/** One night: its logs, and what a person has to say of them. */
export const runSchema = z
  .strictObject({
    version: z.literal(1).default(1).meta({ description: "Version of this file's form." }),
    run: name({
      description: "Name of the night; results are kept in a folder of this name.",
      example: "2026-11-14-a",
    }),
    logs: logsSchema,
    format: formatSchema,
    clock: z
      .strictObject({
        heater_offset: quantityOr("auto", "time", {
          description:
            "Time to add to the heater's clock to have the thermometer's; auto estimates it from the onsets and applies it where it is significant.",
          example: "0.4 ± 0.1 s",
        }).prefault("auto"),
      })
      .prefault({})
      .meta({ description: "How the two clocks agree." }),
    exclude: excludeSchema,
    veto: vetoSchema,
  })
  .check((context) => {
    const { exclude, veto, logs } = context.value;
    const { zone: zoneOfNight } = logs.thermometer.time;
    exclude.forEach(({ from, to }, i) => {
      const [a, b] = [withEpoch(from, zoneOfNight), withEpoch(to, zoneOfNight)];
      const backwards =
        (a.kind === "elapsed" && b.kind === "elapsed" && !(a.time_s < b.time_s)) ||
        (a.kind === "instant" && b.kind === "instant" && !(a.epoch_s < b.epoch_s));
      if (!backwards) return;
      context.issues.push({
        code: "custom",
        input: to.text,
        path: ["exclude", i, "to"],
        message: "span ends before it begins",
        params: {
          expected: `a moment after ${from.text}`,
          wayOut: "exchange from and to, or mend the one that is wrong",
        },
      });
    });
    veto.forEach(({ pulse }, i) => {
      if (veto.findIndex((other) => other.pulse === pulse) === i) return;
      context.issues.push({
        code: "custom",
        input: pulse,
        path: ["veto", i, "pulse"],
        message: "pulse judged twice",
        params: { expected: "each pulse once", wayOut: `keep one entry for pulse ${pulse}` },
      });
    });
  })
  .transform((run) => {
    const inFormat = <Log extends { format?: z.output<typeof partialFormat> | undefined }>(log: Log) => ({
      ...log,
      format: mergeFormat(run.format, log.format),
    });
    const { thermometer, heater, stage } = run.logs;
    const zoneOfNight = thermometer.time.zone;
    return {
      ...run,
      logs: {
        thermometer: inFormat(thermometer),
        heater: heater.kind === "events" ? inFormat(heater) : inFormat(heater),
        stage: stage === undefined ? null : inFormat(stage),
      },
      exclude: run.exclude.map(({ from, to, reason }) => ({
        from: withEpoch(from, zoneOfNight),
        to: withEpoch(to, zoneOfNight),
        reason,
      })),
    };
  });

function mergeFormat(run: LogFormat, log: z.output<typeof partialFormat> | undefined): LogFormat {
  return {
    delimiter: log?.delimiter ?? run.delimiter,
    decimal: log?.decimal ?? run.decimal,
    comment: log?.comment ?? run.comment,
    gap_words: log?.gap_words ?? run.gap_words,
  };
}

export type RunConfig = z.output<typeof runSchema>;
export type LogsConfig = RunConfig["logs"];
export type ThermometerLogConfig = LogsConfig["thermometer"];
export type HeaterLogConfig = LogsConfig["heater"];
export type HeaterEventsConfig = Extract<HeaterLogConfig, { kind: "events" }>;
export type HeaterSampledConfig = Extract<HeaterLogConfig, { kind: "sampled" }>;
export type StageLogConfig = NonNullable<LogsConfig["stage"]>;
export type ExcludedSpan = RunConfig["exclude"][number];
export type Veto = RunConfig["veto"][number];
