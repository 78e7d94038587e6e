import { extrapolatedSpecificHeat_J_per_kg_K } from "../physics/materials.js";
import { type HeatTable, tabulateHeat } from "./heat-table.js";
import { fillingHeat_J_per_K, sumOfPowers } from "./liquid.js";
import type { Cell, Scenario } from "./scenario.js";

/** Both bodies of a cell, tabulated over the temperatures a night may see. */
export interface CellHeat {
  readonly body: HeatTable;
  /** null: empty. */
  readonly liquid: HeatTable | null;
}

/** Heat capacity of the empty body; a material's law is taken beyond its published range where it must be. */
export function addendaHeat_J_per_K(cell: Pick<Cell, "addenda" | "parts">, T_K: number): number {
  return cell.parts.reduce(
    (sum, { material, mass_kg }) => sum + mass_kg * extrapolatedSpecificHeat_J_per_kg_K(material, T_K).value,
    sumOfPowers(cell.addenda, T_K),
  );
}

const POINTS = 2000;

/** From a third of the lowest set point to twice what the pulses of the highest lead to if nothing cools the cell. */
export function heatOfCell(scenario: Pick<Scenario, "cell" | "filling" | "protocol">): CellHeat {
  const { cell, filling, protocol } = scenario;
  const from_K = Math.min(...protocol.settings_K) / 3;
  const climb = (1 + protocol.rise) ** protocol.pulsesPerSetting;
  const to_K = Math.max(...protocol.settings_K) * climb * 2;
  const addenda = (T_K: Float64Array) => T_K.map((T) => addendaHeat_J_per_K(cell, T));
  return {
    body: tabulateHeat(addenda, from_K, to_K, POINTS),
    liquid:
      filling === null
        ? null
        : tabulateHeat((T_K) => fillingHeat_J_per_K(filling, T_K), from_K, to_K, POINTS),
  };
}

export function totalHeat_J_per_K(heat: CellHeat, T_K: number): number {
  return heat.body.at(T_K) + (heat.liquid?.at(T_K) ?? 0);
}

/** Heat content of body and liquid, each at its own temperature, from the lowest temperature of the tables. */
export function heatContent_J(heat: CellHeat, body_K: number, liquid_K: number): number {
  return heat.body.enthalpy(body_K) + (heat.liquid?.enthalpy(liquid_K) ?? 0);
}

/** The one temperature of body and liquid at which they hold that much. Newton's method; C > 0 and smooth. */
export function temperatureOfContent_K(heat: CellHeat, content_J: number, guess_K: number): number {
  let T = guess_K;
  for (let round = 0; round < 50; round++) {
    const change = (content_J - heatContent_J(heat, T, T)) / totalHeat_J_per_K(heat, T);
    T += Math.min(0.2 * T, Math.max(-0.2 * T, change));
    if (Math.abs(change) < 1e-14 * T) break;
  }
  return T;
}
