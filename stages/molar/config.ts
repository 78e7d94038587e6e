import { z } from "zod";
import { heaterSchema } from "../pulses/config.js";
import { name, quantity, text } from "../quantities/schema.js";

export const cellSchema = z.strictObject({
  version: z.literal(1).default(1).meta({ description: "Version of this file's form." }),
  cell: name({ description: "Name of the cell.", example: "thimble" }),
  volume: quantity("volume", {
    description: "Volume open to the helium when cold.",
    sign: "positive",
    example: "3.015 ± 0.006 cm3",
  }),
  dead_volume: quantity("volume", {
    description: "Fill line and room-temperature volumes, for the pressure on warming.",
    sign: "not-negative",
    example: "0.20 ± 0.05 cm3",
  }).optional(),
  relief_pressure: quantity("pressure", {
    description: "Rated relief of the fill line, above which `check` cautions.",
    sign: "positive",
    example: "20 bar",
  }).optional(),
  thermometer: text({
    description: "File of the cell's thermometer.",
    example: "../thermometers/ge-31.yaml",
  }),
  heater: heaterSchema,
});

export type CellConfig = z.output<typeof cellSchema>;

const gas = z
  .strictObject({
    pressure: quantity("pressure", {
      description: "Pressure of the gas.",
      sign: "positive",
      example: "0.912 ± 0.002 bar",
    }),
    volume: quantity("volume", {
      description: "Volume of the gas.",
      sign: "positive",
      example: "3.00 ± 0.01 L",
    }),
    temperature: quantity("temperature", {
      description: "Temperature of the gas.",
      sign: "positive",
      example: "296.2 ± 0.3 K",
    }),
  })
  .meta({ description: "The gas handled, if the amount is not given: n = pV/[RT(1 + Bp/RT)]." });

export const sampleSchema = z
  .strictObject({
    version: z.literal(1).default(1).meta({ description: "Version of this file's form." }),
    sample: name({ description: "Name of the fill.", example: "fill-7" }),
    substance: z.literal("helium-4").meta({ description: "What was filled in." }),
    amount: quantity("amount", {
      description: "Amount of substance; or give gas.",
      sign: "positive",
      example: "0.1093 ± 0.0004 mol",
    }).optional(),
    gas: gas.optional(),
    condition: z.enum(["constant-volume", "saturated-vapour"]).meta({
      description: "Closed volume filled with liquid, or liquid under its own vapour.",
      shown: ["constant-volume"],
    }),
    vapour_space: quantity("volume", {
      description: "Volume above the liquid; needed, and used, under saturated vapour only.",
      sign: "positive",
      example: "0.40 ± 0.05 cm3",
    }).optional(),
    molar_volume: quantity("molar volume", {
      description: "Molar volume of the liquid; by default the published value for the condition.",
      sign: "positive",
      example: "27.58 ± 0.03 cm3/mol",
    }).optional(),
  })
  .check((context) => {
    const { amount, gas: handled, condition, vapour_space } = context.value;
    if ((amount === undefined) === (handled === undefined)) {
      context.issues.push({
        code: "custom",
        input: context.value,
        path: amount === undefined ? [] : ["gas"],
        message: "amount or gas",
        params: {
          expected: "either amount or gas",
          wayOut:
            amount === undefined
              ? 'add amount: "0.1093 ± 0.0004 mol", or gas: with pressure, volume and temperature'
              : "keep the one that was measured",
        },
      });
    }
    if (condition === "saturated-vapour" && vapour_space === undefined) {
      context.issues.push({
        code: "custom",
        input: undefined,
        path: ["vapour_space"],
        message: "vapour space",
        params: {
          expected: "the volume above the liquid, since condition is saturated-vapour",
          wayOut: 'add vapour_space: "0.40 ± 0.05 cm3"',
        },
      });
    }
  });

export type SampleConfig = z.output<typeof sampleSchema>;
export type GasConfig = NonNullable<SampleConfig["gas"]>;
