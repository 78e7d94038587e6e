import { DomainError } from "../errors.js";
import { GAS_CONSTANT } from "./constants.js";
import { molarVolume_m3_per_mol, thermalExpansion_per_K } from "./density.js";
import { latentHeat_J_per_mol } from "./latent-heat.js";
import { helium4VapourPressure_Pa } from "./vapour-pressure.js";
import { secondVirial_m3_per_mol, secondVirialSlope_m3_per_mol_K } from "./virial.js";

/** Liquid ⁴He and its vapour in balance at one temperature. Slopes are along the saturation line. */
export interface Saturation {
  readonly pressure_Pa: number;
  readonly pressureSlope_Pa_per_K: number;
  readonly latentHeat_J_per_mol: number;
  readonly liquidVolume_m3_per_mol: number;
  readonly liquidVolumeSlope_m3_per_mol_K: number;
  readonly vapourVolume_m3_per_mol: number;
  readonly vapourVolumeSlope_m3_per_mol_K: number;
}

/** Below this the vapour is taken as ideal: B is not tabulated there, and Bp/RT is below 0.1 %. */
const IDEAL_BELOW_K = 1;

/**
 * The vapour's volume is RT/p + B; the slope of the pressure is Clapeyron's, L/[T(v_v − v_l)], from the published
 * latent heat, so that pressure, volumes and latent heat agree with each other exactly.
 * @throws DomainError outside 0 < T ≤ 4.2 K
 */
export function saturation(T_K: number): Saturation {
  if (!(T_K > 0 && T_K <= 4.2)) throw new DomainError(`no saturation properties at ${T_K} K: 0 to 4.2 K`);
  const R = GAS_CONSTANT.value;
  const p = helium4VapourPressure_Pa(T_K);
  const v_l = molarVolume_m3_per_mol(T_K);
  const ideal = T_K < IDEAL_BELOW_K;
  const B = ideal ? 0 : secondVirial_m3_per_mol(T_K).value;
  const Bslope = ideal ? 0 : secondVirialSlope_m3_per_mol_K(T_K);
  const v_v = (R * T_K) / p + B;
  const L = latentHeat_J_per_mol(T_K);
  const slope = L / (T_K * (v_v - v_l));
  return {
    pressure_Pa: p,
    pressureSlope_Pa_per_K: slope,
    latentHeat_J_per_mol: L,
    liquidVolume_m3_per_mol: v_l,
    liquidVolumeSlope_m3_per_mol_K: v_l * thermalExpansion_per_K(T_K),
    vapourVolume_m3_per_mol: v_v,
    vapourVolumeSlope_m3_per_mol_K: R / p - (R * T_K * slope) / (p * p) + Bslope,
  };
}
