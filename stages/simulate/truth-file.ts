import { addendaHeat_J_per_K } from "./heat-of-cell.js";
import type { Laboratory } from "./laboratory.js";
import { molarHeat_J_per_mol_K } from "./liquid.js";
import type { SimulatedNight } from "./night.js";
import type { Scenario } from "./scenario.js";

type Json = string | number | boolean | null | readonly Json[] | { readonly [key: string]: Json };

const STEP_K = 0.02;

/** What was true that night: what an analysis should find, to nine digits. */
export function truthFile(
  run: string,
  seed: number,
  laboratory: Laboratory,
  scenario: Scenario,
  simulated: SimulatedNight,
): string {
  const { cell, filling, heater } = scenario;
  const { pulses } = simulated.truth;
  const T_K = roundTemperatures(scenario);
  const columns: Record<string, Json> = { pulse: Array.from(pulses.start_s, (_, i) => i + 1) };
  for (const [key, column] of Object.entries(pulses)) columns[key] = [...(column as Float64Array)];
  const truth: Record<string, Json> = {
    run,
    seed,
    filling:
      filling === null
        ? null
        : {
            amount_mol: filling.amount_mol,
            molar_volume_m3_per_mol: filling.molarVolume_m3_per_mol,
            vapour_space_m3: filling.vapourSpace_m3,
            ...heliumTruth(filling.helium),
          },
    addenda: cell.addenda.map(({ coefficient, power }) => ({ coefficient, power })),
    parts: cell.parts.map(({ material, mass_kg }) => ({ material, mass_kg })),
    heat_leak_W: cell.heatLeak_W,
    link: { coefficient: cell.link.coefficient, power: cell.link.power },
    boundary_W_per_K4: cell.boundary_W_per_K4,
    heater: {
      resistance_Ohm: cell.heaterResistance_Ohm,
      lead_resistance_Ohm: cell.leadResistance_Ohm,
      lead_share: cell.leadShare,
      current_gain: heater.currentGain,
      voltage_gain: heater.voltageGain,
      clock_offset_s: heater.clockOffset_s,
    },
    calibration_error_K: laboratory.calibrationError_K,
    heat_capacity: {
      T_K: [...T_K],
      addenda_J_per_K: Array.from(T_K, (T) => addendaHeat_J_per_K(cell, T)),
      Cv_J_per_mol_K: filling === null ? null : [...molarHeat_J_per_mol_K(filling, T_K)],
    },
    pulses: columns,
  };
  return `${written(truth, "")}\n`;
}

function heliumTruth(helium: NonNullable<Scenario["filling"]>["helium"]): Record<string, Json> {
  if (helium.model === "power-laws") return { model: helium.model };
  return { model: helium.model, sound_speed_m_per_s: helium.soundSpeed_m_per_s, roton_gap_K: helium.gap_K };
}

/** Every 20 mK from below the lowest set point to above the highest. */
function roundTemperatures({ protocol }: Scenario): Float64Array {
  const first = Math.max(1, Math.floor(Math.min(...protocol.settings_K) / STEP_K));
  const last = Math.ceil((1.2 * Math.max(...protocol.settings_K)) / STEP_K);
  return Float64Array.from({ length: last - first + 1 }, (_, i) => (first + i) / Math.round(1 / STEP_K));
}

/** JSON a person can read: objects a key a line, columns on one line. */
function written(value: Json, indent: string): string {
  if (typeof value === "number") return String(Number(value.toPrecision(9)));
  if (value === null || typeof value !== "object") return JSON.stringify(value);
  if (Array.isArray(value)) return `[${value.map((one: Json) => oneLine(one)).join(", ")}]`;
  const inner = `${indent}  `;
  const lines = Object.entries(value).map(
    ([key, one]) => `${inner}${JSON.stringify(key)}: ${written(one as Json, inner)}`,
  );
  return lines.length === 0 ? "{}" : `{\n${lines.join(",\n")}\n${indent}}`;
}

function oneLine(value: Json): string {
  if (value === null || typeof value !== "object" || Array.isArray(value)) return written(value, "");
  const pairs = Object.entries(value).map(([key, one]) => `${JSON.stringify(key)}: ${oneLine(one as Json)}`);
  return `{ ${pairs.join(", ")} }`;
}
