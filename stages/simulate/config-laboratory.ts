import { z } from "zod";
import { MATERIAL_NAMES } from "../physics/materials.js";
import { name, oneOf, quantity, text } from "../quantities/schema.js";

const share = (description: string) => z.number().min(0).max(1).default(0).meta({ description });

/** The cell as it is. */
export const cellSpec = z
  .strictObject({
    cell: name({ description: "Name of the cell.", example: "thimble" }),
    volume: quantity("volume", { description: "Volume open to the helium when cold.", sign: "positive" }),
    dead_volume: quantity("volume", {
      description: "Fill line and room-temperature volumes.",
      sign: "not-negative",
      example: "0.20 ± 0.05 cm3",
    }).optional(),
    relief_pressure: quantity("pressure", {
      description: "Rated relief of the fill line.",
      sign: "positive",
    }).optional(),
    addenda: z
      .array(
        z.strictObject({
          heat_capacity: quantity("heat capacity", {
            description: "Heat capacity at 1 K.",
            sign: "not-negative",
            example: "0.29 mJ/K",
          }),
          power: z.number().meta({ description: "It goes with this power of T.", shown: [1] }),
        }),
      )
      .default([])
      .meta({ description: "Heat capacity of the empty cell, as powers of T." }),
    parts: z
      .array(
        z.strictObject({
          material: z.enum(MATERIAL_NAMES).meta({ description: "Material of the part.", shown: ["copper"] }),
          mass: quantity("mass", { description: "Its mass.", sign: "positive", example: "24.1 ± 0.1 g" }),
        }),
      )
      .default([])
      .meta({ description: "Parts of the empty cell with published specific heats, beside addenda." }),
    boundary_conductance: quantity("thermal conductance", {
      description: "Between body and liquid at 1 K; it goes with T³.",
      sign: "positive",
      example: "0.5 W/K",
    }).prefault("0.5 W/K"),
    link: z
      .strictObject({
        conductance: quantity("thermal conductance", {
          description: "Between body and stage at 1 K.",
          sign: "positive",
          example: "20 nW/K",
        }),
        power: z.number().default(1).meta({ description: "It goes with this power of T." }),
      })
      .meta({ description: "The weak link to the stage." }),
    heat_leak: quantity("power", {
      description: "Constant heat into the body.",
      sign: "not-negative",
      example: "0.1 nW",
    }).prefault("0 nW"),
    heater: z
      .strictObject({
        resistance: quantity("resistance", {
          description: "Of the heater between its voltage taps.",
          sign: "positive",
          example: "1 kOhm",
        }),
        lead_resistance: quantity("resistance", {
          description: "Of the current leads between the voltage taps and the cell.",
          sign: "not-negative",
          example: "2.4 ± 0.2 Ohm",
        }).prefault("0 Ohm"),
        lead_share: quantity("dimensionless", {
          description: "Part of the lead heat that flows into the cell.",
          sign: "not-negative",
          atMost: 1,
          example: "0.5 ± 0.1",
        }).prefault("0.5"),
        current_gain: quantity("dimensionless", {
          description: "Relative standard uncertainty of the current's scale.",
          sign: "not-negative",
          atMost: 1,
          example: "0.02 %",
        }).prefault("0"),
        voltage_gain: quantity("dimensionless", {
          description: "Relative standard uncertainty of the voltage's scale.",
          sign: "not-negative",
          atMost: 1,
          example: "0.02 %",
        }).prefault("0"),
      })
      .meta({ description: "The heater and its leads." }),
  })
  .meta({ description: "The cell as it is, not as it will be found." });

const wholeCurve = z.strictObject({
  model: z
    .literal("whole-curve")
    .meta({ description: "The published excitation curve, scaled to a sound speed and shifted to a gap." }),
  sound_speed: quantity("speed", {
    description: "Sound speed at T = 0.",
    sign: "positive",
    example: "238.3 m/s",
  }).prefault("238.3 m/s"),
  roton_gap: quantity("temperature", {
    description: "Energy of the roton minimum over Boltzmann's constant.",
    sign: "positive",
    example: "8.608 K",
  }).prefault("8.608 K"),
});

const landau = z.strictObject({
  model: z.literal("landau").meta({ description: "A phonon series and a parabola of rotons." }),
  sound_speed: quantity("speed", {
    description: "Sound speed at T = 0.",
    sign: "positive",
    example: "238.3 m/s",
  }).prefault("238.3 m/s"),
  roton_gap: quantity("temperature", {
    description: "Δ over Boltzmann's constant.",
    sign: "positive",
    example: "8.65 K",
  }).prefault("8.65 K"),
  roton_momentum: quantity("wavenumber", {
    description: "k₀, where the parabola has its minimum.",
    sign: "positive",
    example: "1.92 1/angstrom",
  }).prefault("1.92 1/angstrom"),
  roton_mass: z
    .number()
    .positive()
    .default(0.15)
    .meta({ description: "μ over the mass of the helium atom." }),
  dispersion: z
    .strictObject({
      a2: z.number().default(0).meta({ description: "a₂ in Å² of ε = ħu₁k(1 + a₂k² + a₄k⁴)." }),
      a4: z.number().default(0).meta({ description: "a₄ in Å⁴." }),
    })
    .prefault({})
    .meta({ description: "How the phonon branch bends." }),
});

export const sampleSpec = z
  .strictObject({
    sample: name({ description: "Name of the fill.", example: "fill-7" }),
    amount: quantity("amount", {
      description: "Amount of helium-4.",
      sign: "positive",
      example: "0.1093 ± 0.0004 mol",
    }),
    molar_volume: quantity("molar volume", {
      description: "Molar volume of the liquid.",
      sign: "positive",
      example: "27.58 ± 0.03 cm3/mol",
    }).prefault("27.58 cm3/mol"),
    vapour_space: quantity("volume", {
      description:
        "Volume above the liquid, which is then under its own vapour. Absent: a closed, full volume.",
      sign: "positive",
      example: "0.40 ± 0.05 cm3",
    }).optional(),
    helium: z
      .discriminatedUnion("model", [wholeCurve, landau])
      .prefault({ model: "whole-curve" })
      .meta({ description: "What carries the heat in the liquid." }),
  })
  .meta({ description: "The fill." });

export const thermometerSpec = z
  .strictObject({
    thermometer: name({ description: "Name of the thermometer.", example: "ge-31" }),
    scale: text({ description: "Temperature scale of its calibration.", example: "ITS-90" }).prefault(
      "ITS-90",
    ),
    law: z.array(z.number()).min(2).default([6.2, -2.2, 0.35, -0.05]).meta({
      description: "c₀, c₁, … of ln R = Σ cᵢ (ln T)ⁱ, R in Ohm and T in K. R must fall as T rises.",
    }),
    noise: share("White noise of one reading, relative to R."),
    slow_noise: z
      .strictObject({
        size: share("Standard deviation, relative to R."),
        from: quantity("time", {
          description: "Shortest period.",
          sign: "positive",
          example: "10 s",
        }).prefault("10 s"),
        to: quantity("time", {
          description: "Longest period.",
          sign: "positive",
          example: "2000 s",
        }).prefault("2000 s"),
      })
      .prefault({})
      .meta({ description: "Noise with a spectrum near 1/f." }),
    resolution: quantity("resistance", {
      description: "Digitising step; 0 for none.",
      sign: "not-negative",
      example: "0.01 Ohm",
    }).prefault("0.01 Ohm"),
    lag: quantity("time", {
      description: "First-order lag behind the body; 0 for none.",
      sign: "not-negative",
      example: "0.1 s",
    }).prefault("0 s"),
    calibration: z
      .strictObject({
        form: oneOf(["table", "log-polynomial", "chebyshev"], "Form in which the calibration is issued."),
        from: quantity("temperature", {
          description: "Lowest temperature.",
          sign: "positive",
          example: "0.25 K",
        }),
        to: quantity("temperature", {
          description: "Highest temperature.",
          sign: "positive",
          example: "1.6 K",
        }),
        points: z.int().min(3).max(1000).optional().meta({
          description:
            "Rows of the table (40 by default), or coefficients of the series (9 by default, 12 at most).",
        }),
        standard_uncertainty: quantity("temperature", {
          description: "Standard uncertainty, common to all temperatures.",
          sign: "not-negative",
          example: "0.4 mK",
        }).prefault("0 K"),
      })
      .meta({ description: "The calibration that comes with the thermometer." }),
  })
  .meta({ description: "The cell's thermometer." });
