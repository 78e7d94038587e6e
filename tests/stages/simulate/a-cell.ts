import type { Scenario } from "../../../stages/simulate/scenario.js";

/** A quiet cell of constant heat capacities: every closed form holds on it. Tests change what they look at. */
export function aCell(): Scenario {
  return {
    cell: {
      addenda: [{ coefficient: 2e-4, power: 0 }],
      parts: [],
      boundary_W_per_K4: 1e-3,
      link: { coefficient: 1e-6, power: 0 },
      heatLeak_W: 0,
      heaterResistance_Ohm: 1000,
      leadResistance_Ohm: 0,
      leadShare: 0,
    },
    filling: {
      amount_mol: 0.1,
      molarVolume_m3_per_mol: 27.58e-6,
      vapourSpace_m3: 0,
      helium: { model: "power-laws", terms: [{ coefficient: 6e-3, power: 0 }] },
    },
    thermometer: {
      law: [6.2, -2.2, 0.35, -0.05],
      noise: 0,
      slowNoise: 0,
      slowNoiseBand_s: [10, 1000],
      resolution_Ohm: 0,
      lag_s: 0,
      spikes: { share: 0, size: 0 },
      overRangeShare: 0,
    },
    protocol: {
      settings_K: [0.5],
      pulsesPerSetting: 1,
      stageTimeConstant_s: 10,
      stepInPulse_K: 0,
      settle_s: 20,
      pulseLength_s: 10,
      wait_s: 300,
      rise: 0.02,
      start: "balanced",
    },
    sampling: { interval_s: 1, jitter_s: 0, gaps: [] },
    heater: {
      kind: "events",
      interval_s: 1,
      currentNoise_A: 0,
      voltageNoise_V: 0,
      relativeNoise: 0,
      currentOffset_A: 0,
      voltageOffset_V: 0,
      currentGain: 1,
      voltageGain: 1,
      currentResolution_A: 0,
      voltageResolution_V: 0,
      clockOffset_s: 0,
    },
    stageReading: null,
    disturbances: [],
  };
}

/** Helium-4 on its whole excitation curve, in a metal cell at 0.5 K on a weak link. */
export function aHeliumCell(): Scenario {
  const base = aCell();
  return {
    ...base,
    cell: {
      ...base.cell,
      addenda: [
        { coefficient: 2.9e-4, power: 1 },
        { coefficient: 6e-5, power: 3 },
      ],
      boundary_W_per_K4: 0.5,
      link: { coefficient: 2e-6, power: 1 },
      heatLeak_W: 1e-10,
    },
    filling: {
      amount_mol: 0.1093,
      molarVolume_m3_per_mol: 27.58e-6,
      vapourSpace_m3: 0,
      helium: { model: "whole-curve", soundSpeed_m_per_s: 238.3, gap_K: 8.608 },
    },
    protocol: { ...base.protocol, pulsesPerSetting: 2, wait_s: 100 },
    sampling: { interval_s: 0.2, jitter_s: 0, gaps: [] },
  };
}
