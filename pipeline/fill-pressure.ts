import { GAS_CONSTANT } from "../stages/physics/constants.js";
import { secondVirial_m3_per_mol } from "../stages/physics/virial.js";
import { amountOf } from "./chain.js";
import type { Cell, Sample } from "./config/load.js";

const ROOM_K = 295;

export interface FillPressure {
  readonly pressure_Pa: number;
  readonly relief_Pa: number | null;
  readonly words: string;
}

/**
 * Pressure of the trapped amount once cell and line are at room temperature: p = nRT/V·(1 + Bn/V), the virial series
 * to its second term. The terms left out are positive here, so at hundreds of bar the true pressure is higher still.
 */
export function fillPressure(cell: Cell, sample: Sample): FillPressure {
  const n = amountOf(sample).value;
  const V = cell.config.volume.value + (cell.config.dead_volume?.value ?? 0);
  const B = secondVirial_m3_per_mol(ROOM_K).value;
  const pressure_Pa = ((n * GAS_CONSTANT.value * ROOM_K) / V) * (1 + (B * n) / V);
  const relief = cell.config.relief_pressure?.value ?? null;
  const bar = Number((pressure_Pa / 1e5).toPrecision(2));
  const compared =
    relief === null
      ? "no relief_pressure is stated for this cell"
      : `the stated relief pressure is ${Number((relief / 1e5).toPrecision(3))} bar${pressure_Pa > relief ? ": the fill must leave through the relief on warming" : ""}`;
  return {
    pressure_Pa,
    relief_Pa: relief,
    words: `sealed and warmed to ${ROOM_K} K, this fill would reach about ${bar} bar or more (real gas to the second virial term); ${compared}`,
  };
}
