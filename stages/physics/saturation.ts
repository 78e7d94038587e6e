import { DomainError } from "../errors.js";
import { GAS_CONSTANT } from "./constants.js";
import { molarVolume_m3_per_mol, thermalExpansion_per_K } from "./density.js";
import { helium4SaturationLine, type SaturationLine } from "./vapour-pressure.js";
import { secondVirial_m3_per_mol } from "./virial.js";

/** Liquid ⁴He and its vapour in balance at one temperature. Slopes are along the saturation line. */
export interface Saturation extends SaturationLine {
  readonly liquidVolume_m3_per_mol: number;
  readonly liquidVolumeSlope_m3_per_mol_K: number;
  readonly vapourVolume_m3_per_mol: number;
}

/** Below this the vapour is taken as ideal: B is not tabulated there, and Bp/RT is below 0.1 %. */
const IDEAL_BELOW_K = 1;

/**
 * The vapour obeys p = (RT/v)(1 + B/v): with it, density and latent heat satisfy Clapeyron's equation within 0.5 %
 * up to 3.3 K, which the series in p does not beyond 2.3 K.
 * @throws DomainError outside 0 < T ≤ 3.3 K
 */
export function saturation(T_K: number): Saturation {
  if (!(T_K > 0 && T_K <= 3.3)) throw new DomainError(`no saturation properties at ${T_K} K: 0 to 3.3 K`);
  const line = helium4SaturationLine(T_K);
  const v_l = molarVolume_m3_per_mol(T_K);
  const ideal = (GAS_CONSTANT.value * T_K) / line.pressure_Pa;
  const B = T_K < IDEAL_BELOW_K ? 0 : secondVirial_m3_per_mol(T_K).value;
  return {
    ...line,
    liquidVolume_m3_per_mol: v_l,
    liquidVolumeSlope_m3_per_mol_K: v_l * thermalExpansion_per_K(T_K),
    vapourVolume_m3_per_mol: (ideal * (1 + Math.sqrt(1 + (4 * B) / ideal))) / 2,
  };
}
