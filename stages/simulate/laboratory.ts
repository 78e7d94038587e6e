import { HELIUM4_ATOMIC_MASS } from "../physics/constants.js";
import type { Quantity } from "../quantities/types.js";
import type { CompleteNight, ScenarioConfig } from "./config.js";
import { normal } from "./random.js";
import type { Cell, Filling, HeliumModel, Scenario } from "./scenario.js";

/** What is true of cell, fill and instruments on every night of a scenario. */
export interface Laboratory {
  readonly cell: Cell;
  readonly filling: Filling;
  /** Temperature of the calibration as issued, less the true one. */
  readonly calibrationError_K: number;
  readonly currentGain: number;
  readonly voltageGain: number;
}

type Draw = (quantity: Quantity) => number;

/** A variable is used up whether or not there is a ±, so that adding one leaves all other draws as they were. */
function drawer(errors: ScenarioConfig["errors"], random: () => number): Draw {
  return ({ value, u }) => {
    const z = normal(random);
    return errors === "drawn" ? value + z * u : value;
  };
}

/** Draws once what all nights have in common. The order of the draws is part of a scenario's bytes. */
export function drawLaboratory(config: ScenarioConfig, random: () => number): Laboratory {
  const draw = drawer(config.errors, random);
  const { cell, sample, thermometer } = config;
  const scale = ({ value }: Quantity): number => 1 + draw({ value: 0, u: value, text: "" });
  return {
    filling: {
      amount_mol: draw(sample.amount),
      molarVolume_m3_per_mol: draw(sample.molar_volume),
      vapourSpace_m3: sample.vapour_space === undefined ? 0 : draw(sample.vapour_space),
      helium: helium(sample.helium, draw),
    },
    calibrationError_K: draw({ value: 0, u: thermometer.calibration.standard_uncertainty.value, text: "" }),
    currentGain: scale(cell.heater.current_gain),
    voltageGain: scale(cell.heater.voltage_gain),
    cell: {
      heaterResistance_Ohm: draw(cell.heater.resistance),
      leadResistance_Ohm: Math.max(0, draw(cell.heater.lead_resistance)),
      leadShare: Math.min(1, Math.max(0, draw(cell.heater.lead_share))),
      heatLeak_W: Math.max(0, draw(cell.heat_leak)),
      boundary_W_per_K4: draw(cell.boundary_conductance),
      link: { coefficient: draw(cell.link.conductance), power: cell.link.power },
      addenda: cell.addenda.map(({ heat_capacity, power }) => ({ coefficient: draw(heat_capacity), power })),
      parts: cell.parts.map(({ material, mass }) => ({ material, mass_kg: draw(mass) })),
    },
  };
}

function helium(spec: ScenarioConfig["sample"]["helium"], draw: Draw): HeliumModel {
  const soundSpeed_m_per_s = draw(spec.sound_speed);
  const gap_K = draw(spec.roton_gap);
  if (spec.model === "whole-curve") return { model: "whole-curve", soundSpeed_m_per_s, gap_K };
  return {
    model: "landau",
    soundSpeed_m_per_s,
    gap_K,
    momentum_per_m: draw(spec.roton_momentum),
    mass_kg: spec.roton_mass * HELIUM4_ATOMIC_MASS.value,
    a2_m2: spec.dispersion.a2 * 1e-20,
    a4_m4: spec.dispersion.a4 * 1e-40,
  };
}

/** One night as the core takes it. Draws what belongs to the night alone. */
export function scenarioOfNight(
  config: ScenarioConfig,
  night: CompleteNight,
  laboratory: Laboratory,
  random: () => number,
): Scenario {
  const { thermometer } = config;
  const { heater_log, faults, stage_log } = night;
  const every = night.format.files === "together" && stage_log.every > 0 ? 1 : stage_log.every;
  const draw = drawer(config.errors, random);
  return {
    cell: laboratory.cell,
    filling: night.filled ? laboratory.filling : null,
    thermometer: {
      law: thermometer.law,
      noise: thermometer.noise,
      slowNoise: thermometer.slow_noise.size,
      slowNoiseBand_s: [thermometer.slow_noise.from.value, thermometer.slow_noise.to.value],
      resolution_Ohm: thermometer.resolution.value,
      lag_s: thermometer.lag.value,
      spikes: faults.spikes,
      overRangeShare: faults.over_range,
    },
    protocol: {
      settings_K: settings_K(night.stage.settings),
      pulsesPerSetting: night.pulses.per_setting,
      stageTimeConstant_s: night.stage.time_constant.value,
      stepInPulse_K: night.stage.step_in_pulse.value,
      settle_s: night.stage.settle.value,
      pulseLength_s: night.pulses.length.value,
      wait_s: night.pulses.wait.value,
      rise: night.pulses.rise,
      start: night.stage.start,
    },
    sampling: {
      interval_s: night.thermometer_log.interval.value,
      jitter_s: night.thermometer_log.jitter.value,
      gaps: faults.gaps.map(({ from, to }) => ({ from_s: from.value, to_s: to.value })),
    },
    heater: {
      kind: heater_log.kind,
      interval_s: heater_log.interval.value,
      currentNoise_A: heater_log.current_noise.value,
      voltageNoise_V: heater_log.voltage_noise.value,
      relativeNoise: heater_log.reading_noise,
      currentOffset_A: heater_log.current_offset.value,
      voltageOffset_V: heater_log.voltage_offset.value,
      currentGain: laboratory.currentGain,
      voltageGain: laboratory.voltageGain,
      currentResolution_A: heater_log.current_resolution.value,
      voltageResolution_V: heater_log.voltage_resolution.value,
      clockOffset_s: Math.round(1000 * draw(night.clock.heater_offset)) / 1000,
    },
    stageReading: every === 0 ? null : { every, noise_K: stage_log.noise.value },
    disturbances: faults.disturbances.map(({ from, to, heat }) => ({
      from_s: from.value,
      to_s: to.value,
      power_W: heat.value / (to.value - from.value),
    })),
  };
}

export function settings_K(settings: CompleteNight["stage"]["settings"]): number[] {
  if (Array.isArray(settings)) return settings.map(({ value }) => value);
  const { from, to, count } = settings;
  const step = count === 1 ? 1 : (to.value / from.value) ** (1 / (count - 1));
  // A controller is set in tenths of a mK.
  return Array.from({ length: count }, (_, i) => Math.round(1e4 * from.value * step ** i) / 1e4);
}
