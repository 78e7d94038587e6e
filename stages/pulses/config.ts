import { z } from "zod";
import { oneOf, quantity, quantityOr } from "../quantities/schema.js";
import { PULSE_FLAG_NAMES } from "./flags.js";

const share = (fallback: number, description: string) =>
  z.number().min(0).max(1).default(fallback).meta({ description });

/** A window shortened by the next pulse is still a window; a veto is a person's word and needs no list. */
const NO_REASON_TO_EXCLUDE = ["truncated", "vetoed"];
const EXCLUDING = PULSE_FLAG_NAMES.filter((flag) => flag !== "vetoed") as [string, ...string[]];

/** From a temperature trace and a heater log to heat capacities. */
export const pulsesSchema = z
  .strictObject({
    method: oneOf(
      ["auto", "drift", "two-body", "relaxation"],
      "How C is found: drift lines and equal areas; a forward model of body and liquid; a forward model of one body; auto asks for a model where drift lines would be biased, and lets evidence choose for each pulse.",
    ),
    settle: quantityOr("auto", "time", {
      description:
        "Time skipped after the heater stops, until the drift is plain; auto reads it from the trace.",
      example: "30 s",
      sign: "not-negative",
    }).prefault("auto"),
    window: quantityOr("auto", "time", {
      description: "Longest stretch of drift used on either side of a pulse.",
      example: "300 s",
      sign: "positive",
    }).prefault("auto"),
    smallest_rise: share(0.002, "Smallest ΔT/T; below it the pulse is flagged rise-too-small."),
    largest_rise: share(0.3, "Largest ΔT/T; above it the pulse is flagged rise-too-large."),
    largest_drift_share: z.number().min(0).default(1).meta({
      description: "Largest ratio of the drift during the pulse to its rise; above it: drift-too-strong.",
    }),
    largest_settle_share: share(
      0.34,
      "Largest part of the window that settling may take; above it: not-settled.",
    ),
    largest_missing_share: share(
      0.1,
      "Largest part of the samples under a fit that may be missing: samples-missing.",
    ),
    largest_spike_share: share(0.05, "Largest part of the samples under a fit that may be outliers: spikes."),
    largest_boundary_share: share(
      0.34,
      "Largest part of the window that body and liquid may take to come to one temperature: slow-boundary.",
    ),
    largest_stage_share: share(
      0.02,
      "Largest part of the rise that the stage's motion may add unseen by the method: stage-not-steady.",
    ),
    largest_misfit: share(
      0.005,
      "Largest misfit of the chosen model that noise does not explain, relative to the rise: unexplained.",
    ),
    largest_power_change: share(
      0.05,
      "Largest relative change of the heater's power within a pulse of a sampled log: heater-unsteady.",
    ),
    heater_resistance_tolerance: share(
      0.02,
      "Largest relative distance of the heater's resistance from the night's median: heater-resistance.",
    ),
    exclude_flags: z
      .array(z.enum(EXCLUDING))
      .default(EXCLUDING.filter((flag) => !NO_REASON_TO_EXCLUDE.includes(flag)))
      .meta({
        description: "Flags that keep a pulse out of the dataset. A flagged pulse stays in points.csv.",
      }),
  })
  .check((context) => {
    const { smallest_rise, largest_rise } = context.value;
    if (smallest_rise < largest_rise) return;
    context.issues.push({
      code: "custom",
      input: smallest_rise,
      path: ["smallest_rise"],
      message: "rises upside down",
      params: {
        expected: `a number below largest_rise, ${largest_rise}`,
        wayOut: "lower smallest_rise or raise largest_rise",
      },
    });
  })
  .prefault({})
  .meta({ description: "From logs to the heat capacity of each pulse." });

export type PulsesConfig = z.output<typeof pulsesSchema>;

/** The heater as it is wired; part of the cell's file. */
export const heaterSchema = z
  .strictObject({
    lead_resistance: quantity("resistance", {
      description: "Resistance of the current leads between the voltage taps and the cell, both together.",
      example: "2.4 ± 0.2 Ohm",
      sign: "not-negative",
    }).prefault("0 Ohm"),
    lead_share: quantity("dimensionless", {
      description: "Part of the lead heat that flows into the cell; half is common practice.",
      example: "0.5 ± 0.1",
      sign: "not-negative",
      atMost: 1,
    }).prefault("0.5"),
    current_gain: quantity("dimensionless", {
      description: "Relative standard uncertainty of the current's scale, common to all pulses.",
      example: "0.02 %",
      sign: "not-negative",
      atMost: 1,
    }).prefault("0"),
    voltage_gain: quantity("dimensionless", {
      description: "Relative standard uncertainty of the voltage's scale, common to all pulses.",
      example: "0.02 %",
      sign: "not-negative",
      atMost: 1,
    }).prefault("0"),
  })
  .prefault({})
  .meta({ description: "The cell's heater." });

export type HeaterConfig = z.output<typeof heaterSchema>;
