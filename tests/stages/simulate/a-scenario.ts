import { type ScenarioConfig, scenarioSchema } from "../../../stages/simulate/config.js";

/** A short night of two pulses on a filled cell, as a person would write it; changes go on top. */
export function aScenario(change: object = {}, night: object = {}): ScenarioConfig {
  return scenarioSchema.parse({
    scenario: "try",
    seed: 5,
    cell: {
      cell: "acorn",
      volume: "1.40 cm3",
      addenda: [{ heat_capacity: "0.15 ± 0.01 mJ/K", power: 1 }],
      link: { conductance: "20 nW/K" },
      heater: { resistance: "500 Ohm", lead_resistance: "2.4 ± 0.2 Ohm", lead_share: "0.5 ± 0.1" },
    },
    sample: { sample: "sip", amount: "0.0500 ± 0.0005 mol" },
    thermometer: {
      thermometer: "ge-4",
      noise: 1e-4,
      calibration: { form: "table", from: "0.25 K", to: "1.6 K", standard_uncertainty: "1 mK" },
    },
    nights: [
      {
        run: "one",
        stage: { settings: ["0.5 K"], settle: "20 s" },
        pulses: { per_setting: 2, length: "5 s", wait: "20 s" },
        ...night,
      },
    ],
    ...change,
  });
}
