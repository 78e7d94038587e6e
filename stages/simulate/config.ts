import { z } from "zod";
import { name, oneOf, text } from "../quantities/schema.js";
import { cellSpec, sampleSpec, thermometerSpec } from "./config-laboratory.js";
import { NIGHT_DEFAULTS, NIGHT_KEYS, nightSpec } from "./config-night.js";

/** Nights in an invented laboratory: what is true, and how it is logged. */
export const scenarioSchema = z
  .strictObject({
    version: z.literal(1).default(1).meta({ description: "Version of this file's form." }),
    scenario: name({ description: "Name of the campaign simulated.", example: "fjord-7" }),
    seed: z
      .int()
      .min(0)
      .max(2 ** 40)
      .default(1)
      .meta({ description: "Seed: the same scenario and seed give the same bytes." }),
    errors: oneOf(
      ["none", "drawn"],
      "none: every value is true as written. drawn: the true values are drawn about those written, by each ±; truth.json keeps them.",
    ),
    configs: oneOf(
      ["beside", "none"],
      "beside: also write campaign, cell, sample and thermometer files, so that the nights can be reduced at once.",
    ),
    laboratory: text({
      description: "Where it happens; goes into comment lines.",
      example: "Skerry Point",
    }).prefault("Skerry Point"),
    cell: cellSpec,
    sample: sampleSpec,
    thermometer: thermometerSpec,
    every_night: z
      .strictObject(NIGHT_KEYS)
      .prefault({})
      .meta({ description: "What holds for each night that does not say otherwise." }),
    nights: z.array(nightSpec).min(1).meta({ description: "The nights." }),
  })
  .check((context) => {
    const { every_night, nights, cell: body } = context.value;
    const refuse = (path: (string | number)[], input: unknown, expected: string, wayOut: string) =>
      context.issues.push({ code: "custom", input, path, message: expected, params: { expected, wayOut } });
    if (body.addenda.length === 0 && body.parts.length === 0) {
      refuse(
        ["cell"],
        undefined,
        "a heat capacity of the empty cell",
        'add addenda: [{ heat_capacity: "0.29 mJ/K", power: 1 }]',
      );
    }
    nights.forEach((one, i) => {
      if ((one.stage ?? every_night.stage) === undefined) {
        refuse(
          ["nights", i, "stage"],
          undefined,
          "the stage's programme, here or in every_night",
          'add stage: { settings: ["0.5 K"] }',
        );
      }
      if (nights.findIndex(({ run }) => run === one.run) !== i) {
        refuse(["nights", i, "run"], one.run, "a name of its own for each night", "rename one of the two");
      }
    });
  });

export type ScenarioConfig = z.output<typeof scenarioSchema>;
export type NightConfig = ScenarioConfig["nights"][number];

/** A night with nothing left open: its own keys, else those of every night, else the defaults. */
export function completeNight(config: ScenarioConfig, night: NightConfig) {
  const all = config.every_night;
  return {
    run: night.run,
    filled: night.filled,
    exclude: night.exclude,
    veto: night.veto,
    start: night.start ?? all.start ?? NIGHT_DEFAULTS.start,
    stage: (night.stage ?? all.stage)!,
    pulses: night.pulses ?? all.pulses ?? NIGHT_DEFAULTS.pulses,
    thermometer_log: night.thermometer_log ?? all.thermometer_log ?? NIGHT_DEFAULTS.thermometer_log,
    heater_log: night.heater_log ?? all.heater_log ?? NIGHT_DEFAULTS.heater_log,
    stage_log: night.stage_log ?? all.stage_log ?? NIGHT_DEFAULTS.stage_log,
    format: night.format ?? all.format ?? NIGHT_DEFAULTS.format,
    clock: night.clock ?? all.clock ?? NIGHT_DEFAULTS.clock,
    faults: night.faults ?? all.faults ?? NIGHT_DEFAULTS.faults,
  };
}
export type CompleteNight = ReturnType<typeof completeNight>;
export type LogDialect = CompleteNight["format"];
