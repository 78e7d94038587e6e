import { z } from "zod";
import { formatSchema } from "../ingest/config.js";
import { columnOf, name, quantity, quantityOr, text } from "../quantities/schema.js";
import type { Quantity } from "../quantities/types.js";

const standardUncertainty = quantity("temperature", {
  description: "Standard uncertainty (k = 1) of the calibration, common to all temperatures.",
  example: "0.4 mK",
  sign: "not-negative",
});

const slopeStandardUncertainty = quantity("dimensionless", {
  description:
    "Relative standard uncertainty of differences of temperature, common to all pulses: a slope dT/dR that is off. An error common to both ends of a pulse belongs in standard_uncertainty.",
  example: "0.05 %",
  sign: "not-negative",
  atMost: 1,
}).prefault("0");

const coefficients = (description: string) =>
  z
    .array(z.number())
    .min(2)
    .meta({ description, shown: ["[1.62, -0.81, 0.043]"] });

const resistanceRange = z
  .tuple([
    quantity("resistance", {
      description: "Lowest resistance calibrated.",
      sign: "positive",
      example: "210 Ohm",
    }),
    quantity("resistance", {
      description: "Highest resistance calibrated.",
      sign: "positive",
      example: "48 kOhm",
    }),
  ])
  .check((context) => {
    const [low, high] = context.value;
    if (low.value < high.value) return;
    context.issues.push({
      code: "custom",
      input: context.value,
      message: "range upside down",
      params: { expected: "the lower resistance first", wayOut: `write [${high.text}, ${low.text}]` },
    });
  })
  .meta({
    description: "Range of the calibration; outside it there is no temperature, never an extrapolation.",
    shown: ["[210 Ohm, 48 kOhm]"],
  });

const table = z.strictObject({
  form: z.literal("table").meta({ description: "A table of resistances and temperatures." }),
  file: text({ description: "The table.", example: "ge-31.csv" }),
  temperature: columnOf("temperature", "Column with the temperature."),
  resistance: columnOf("resistance", "Column with the resistance."),
  standard_uncertainty: standardUncertainty,
  slope_standard_uncertainty: slopeStandardUncertainty,
  format: formatSchema,
});

const logPolynomial = z.strictObject({
  form: z.literal("log-polynomial").meta({ description: "ln T = Σ aᵢ (ln R)ⁱ with T in K and R in Ohm." }),
  coefficients: coefficients("a₀, a₁, … of ln T = Σ aᵢ (ln R)ⁱ, T in K, R in Ohm."),
  resistance_range: resistanceRange,
  standard_uncertainty: standardUncertainty,
  slope_standard_uncertainty: slopeStandardUncertainty,
});

const chebyshev = z
  .strictObject({
    form: z
      .literal("chebyshev")
      .meta({ description: "Σ aᵢ cos(i·arccos x), x the variable scaled to −1…1." }),
    coefficients: coefficients(
      "a₀, a₁, … of Σ aᵢ cos(i·arccos x), a₀ not halved; x = [(Z − Zl) − (Zu − Z)]/(Zu − Zl), R in Ohm, T in K.",
    ),
    variable: z
      .enum(["ln R", "log10 R"])
      .meta({ description: "Z, the variable of the series.", shown: ["log10 R"] }),
    variable_range: z
      .tuple([z.number(), z.number()])
      .check((context) => {
        if (context.value[0] < context.value[1]) return;
        context.issues.push({
          code: "custom",
          input: context.value,
          message: "range upside down",
          params: {
            expected: "Zl below Zu",
            wayOut: `write [${Math.min(...context.value)}, ${Math.max(...context.value)}], if the two differ`,
          },
        });
      })
      .meta({ description: "[Zl, Zu], which are scaled to −1 and 1.", shown: ["[2.3, 4.7]"] }),
    quantity: z.enum(["T", "ln T", "log10 T"]).meta({ description: "What the series gives.", shown: ["T"] }),
    resistance_range: resistanceRange.optional(),
    standard_uncertainty: standardUncertainty,
    slope_standard_uncertainty: slopeStandardUncertainty,
  })
  .transform((series) => ({
    ...series,
    resistance_range: series.resistance_range ?? wholeRange(series.variable, series.variable_range),
  }));

/** Where no range is given, the series holds over the whole range of its variable. */
function wholeRange(variable: "ln R" | "log10 R", range: readonly [number, number]): [Quantity, Quantity] {
  const end = (z: number): Quantity => {
    const value = variable === "ln R" ? Math.exp(z) : 10 ** z;
    return { value, u: 0, text: `${value} Ohm` };
  };
  return [end(range[0]), end(range[1])];
}

const selfHeating = z
  .strictObject({
    current: quantity("current", {
      description: "Current through the sensor, P = I²R; or give voltage or power.",
      example: "1 ± 0.01 nA",
      sign: "positive",
    }).optional(),
    voltage: quantity("voltage", {
      description: "Voltage across the sensor, P = V²/R; or give current or power.",
      example: "50 µV",
      sign: "positive",
    }).optional(),
    power: quantity("power", {
      description: "Power into the sensor, where a bridge keeps it constant; or give current or voltage.",
      example: "1 fW",
      sign: "positive",
    }).optional(),
    thermal_resistance: quantity("thermal resistance", {
      description: "Thermal resistance R_th between sensor and cell at the temperature `at`.",
      example: "2e5 ± 1e4 K/W",
      sign: "positive",
    }),
    at: quantity("temperature", {
      description: "Temperature at which the thermal resistance holds.",
      example: "0.5 K",
      sign: "positive",
    }),
    power_law: z.number().min(-6).max(6).default(-3).meta({
      description:
        "p in R_th ∝ T^p: −3 for a boundary between solids, about −1 for a contact through metal (common practice).",
    }),
  })
  .check((context) => {
    const { current, voltage, power } = context.value;
    const given = Object.entries({ current, voltage, power }).filter(([, value]) => value !== undefined);
    if (given.length === 1) return;
    context.issues.push({
      code: "custom",
      input: context.value,
      path: given.length === 0 ? [] : [given[1]![0]],
      message: "one of current, voltage and power",
      params: {
        expected: "one of current, voltage and power",
        wayOut:
          given.length === 0
            ? 'add current: "1 nA", or voltage: or power:, whichever the bridge keeps constant'
            : "keep the one that the bridge keeps constant",
      },
    });
  })
  .meta({
    description:
      "Warmth of the sensor above the cell by its own excitation, P·R_th; left out: none taken off.",
  });

export const thermometerSchema = z.strictObject({
  version: z.literal(1).default(1).meta({ description: "Version of this file's form." }),
  thermometer: name({ description: "Name of the thermometer.", example: "ge-31" }),
  scale: text({
    description: "Temperature scale of the calibration; its name travels with the data.",
    example: "ITS-90",
  }),
  calibration: z
    .discriminatedUnion("form", [table, logPolynomial, chebyshev])
    .meta({ description: "Resistance to temperature: a table, a log-polynomial or a chebyshev series." }),
  lag: quantityOr("auto", "time", {
    description: "Time by which the sensor follows the body; auto leaves it to be read from the trace.",
    example: "2 ± 0.5 s",
    sign: "not-negative",
  }).prefault("auto"),
  self_heating: selfHeating.optional(),
});

export type ThermometerConfig = z.output<typeof thermometerSchema>;
export type SelfHeatingConfig = NonNullable<ThermometerConfig["self_heating"]>;
export type CalibrationConfig = ThermometerConfig["calibration"];
export type TableCalibrationConfig = Extract<CalibrationConfig, { form: "table" }>;
export type LogPolynomialConfig = Extract<CalibrationConfig, { form: "log-polynomial" }>;
export type ChebyshevConfig = Extract<CalibrationConfig, { form: "chebyshev" }>;
