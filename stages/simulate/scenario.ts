/*
 * What the simulator is told, in SI units and true values. config.ts reads it from YAML; tests write it directly.
 */

import type { MaterialName } from "../physics/materials.js";

/** coefficient·T^power, T in K. */
export interface PowerLaw {
  readonly coefficient: number;
  readonly power: number;
}

export type HeliumModel =
  | { readonly model: "whole-curve"; readonly soundSpeed_m_per_s: number; readonly gap_K: number }
  | {
      readonly model: "landau";
      readonly soundSpeed_m_per_s: number;
      readonly gap_K: number;
      readonly momentum_per_m: number;
      readonly mass_kg: number;
      readonly a2_m2: number;
      readonly a4_m4: number;
    }
  /** Not helium at all: a molar heat capacity in closed form, J/(mol K). */
  | { readonly model: "power-laws"; readonly terms: readonly PowerLaw[] };

export interface Filling {
  readonly amount_mol: number;
  readonly molarVolume_m3_per_mol: number;
  /** Ullage above a liquid under its own vapour; 0 for a closed, full volume. */
  readonly vapourSpace_m3: number;
  readonly helium: HeliumModel;
}

/** A piece of the empty cell whose specific heat is published (physics/materials.ts). */
export interface Part {
  readonly material: MaterialName;
  readonly mass_kg: number;
}

export interface Cell {
  /** Heat capacity of the empty body, J/K; together with that of `parts`. */
  readonly addenda: readonly PowerLaw[];
  readonly parts: readonly Part[];
  /** g in G = g·T³ between body and liquid. */
  readonly boundary_W_per_K4: number;
  /** K = coefficient·T^power between body and stage, W/K. */
  readonly link: PowerLaw;
  /** Constant heat into the body. */
  readonly heatLeak_W: number;
  readonly heaterResistance_Ohm: number;
  /** Of the current leads between the voltage taps and the cold end. */
  readonly leadResistance_Ohm: number;
  /** Part of the lead heat that flows into the body. */
  readonly leadShare: number;
}

export interface Thermometer {
  /** ln(R/Ohm) = Σ law[i]·(ln T/K)^i. */
  readonly law: readonly number[];
  /** White noise of one reading, relative to R. */
  readonly noise: number;
  /** 1/f noise: standard deviation, relative to R, over its band. */
  readonly slowNoise: number;
  readonly slowNoiseBand_s: readonly [number, number];
  /** Digitising step; 0 for none. */
  readonly resolution_Ohm: number;
  /** First-order lag behind the body; 0 for none. */
  readonly lag_s: number;
  /** Share of readings hit, and standard deviation of the hit relative to R. */
  readonly spikes: { readonly share: number; readonly size: number };
  /** Share of readings that the instrument reports as over-range. */
  readonly overRangeShare: number;
}

export interface Protocol {
  /** Set points of the stage, in order. */
  readonly settings_K: readonly number[];
  readonly pulsesPerSetting: number;
  /** Of the stage's approach to each set point. */
  readonly stageTimeConstant_s: number;
  /** Of the set point, in the middle of each pulse, up and down in turn; 0 for none. */
  readonly stepInPulse_K: number;
  /** Between a new set point and its first pulse. */
  readonly settle_s: number;
  readonly pulseLength_s: number;
  /** After each pulse. */
  readonly wait_s: number;
  /** ΔT/T wanted of each pulse. */
  readonly rise: number;
  /** Cell at the start: in balance with the stage and the leak, or at the first set point. */
  readonly start: "balanced" | "at-stage";
}

/** Heat into the body that no log shows, and spans without readings. */
export interface Disturbance {
  readonly from_s: number;
  readonly to_s: number;
  readonly power_W: number;
}

export interface Span {
  readonly from_s: number;
  readonly to_s: number;
}

export interface HeaterReading {
  readonly kind: "events" | "sampled";
  /** Sampled logs only. */
  readonly interval_s: number;
  readonly currentNoise_A: number;
  readonly voltageNoise_V: number;
  /** Noise in proportion to the reading. */
  readonly relativeNoise: number;
  readonly currentOffset_A: number;
  readonly voltageOffset_V: number;
  /** Current and voltage as read over their true values. */
  readonly currentGain: number;
  readonly voltageGain: number;
  /** Digitising steps; 0 for none. */
  readonly currentResolution_A: number;
  readonly voltageResolution_V: number;
  /** Time to add to the heater's clock to have the thermometer's. */
  readonly clockOffset_s: number;
}

/** One night, complete. */
export interface Scenario {
  readonly cell: Cell;
  /** null: an empty cell. */
  readonly filling: Filling | null;
  readonly thermometer: Thermometer;
  readonly protocol: Protocol;
  readonly sampling: {
    readonly interval_s: number;
    /** Each sample up to this much late, as a busy instrument is. */
    readonly jitter_s: number;
    readonly gaps: readonly Span[];
  };
  readonly heater: HeaterReading;
  /** The stage is read with every n-th thermometer reading, n = `every`; null where nobody logs it. */
  readonly stageReading: { readonly every: number; readonly noise_K: number } | null;
  readonly disturbances: readonly Disturbance[];
}
