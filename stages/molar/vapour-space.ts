import { molarVolume_m3_per_mol } from "../physics/density.js";
import { latentHeatSlope_J_per_mol_K } from "../physics/latent-heat.js";
import { type Saturation, saturation } from "../physics/saturation.js";
import { compressibility_per_Pa } from "../physics/sound.js";

/** Helium closed in a volume with vapour above the liquid. */
export interface ClosedFilling {
  readonly amount_mol: number;
  /** Above the liquid when the vapour is frozen out. */
  readonly vapourSpace_m3: number;
}

/**
 * Amount of vapour, mol, from the closed volume: n_v = (V − n v_l)/(v_v − v_l).
 * The liquid's own expansion moves the level, so the vapour space is not quite constant.
 */
function vapourAmount_mol(filling: ClosedFilling, state: Saturation): number {
  const coldVolume = molarVolume_m3_per_mol(0);
  const space = filling.vapourSpace_m3 + filling.amount_mol * (coldVolume - state.liquidVolume_m3_per_mol);
  return space / (state.vapourVolume_m3_per_mol - state.liquidVolume_m3_per_mol);
}

/**
 * What the vapour adds to the heat capacity of the filling: C_filling = n·C_sat,liquid + vapour part.
 *
 * The entropy is n s_l + n_v L/T exactly, whatever the vapour's equation of state, so the part is
 * T d(n_v L/T)/dT = L dn_v/dT + n_v(L′ − L/T). For an ideal vapour and a liquid of no entropy that is
 * n_v R(5/2 − 2λ + λ²), λ = L/RT (methods.md §4).
 * @returns J/K
 * @throws DomainError outside 0 < T ≤ 4.2 K
 */
export function vapourPart_J_per_K(T_K: number, filling: ClosedFilling): number {
  const state = saturation(T_K);
  const n_v = vapourAmount_mol(filling, state);
  const perMole_m3 = state.vapourVolume_m3_per_mol - state.liquidVolume_m3_per_mol;
  const slope =
    (-filling.amount_mol * state.liquidVolumeSlope_m3_per_mol_K -
      n_v * (state.vapourVolumeSlope_m3_per_mol_K - state.liquidVolumeSlope_m3_per_mol_K)) /
    perMole_m3;
  const L = state.latentHeat_J_per_mol;
  return L * slope + n_v * (latentHeatSlope_J_per_mol_K(T_K) - L / T_K);
}

/**
 * From along the saturation line to constant volume:
 * C_p = C_sat + T V α_p (dp/dT)_sat, and C_v = C_p − T V α_p²/κ_T = C_p/(1 + T V α_p²/(κ_S C_p)).
 * Below 1.5 K the two together are less than 0.1 %.
 * @returns J/(mol K)
 * @throws DomainError outside 0 < T ≤ 4.2 K
 */
export function constantVolumeFromSaturated_J_per_mol_K(T_K: number, C_sat_J_per_mol_K: number): number {
  const state = saturation(T_K);
  const V = state.liquidVolume_m3_per_mol;
  const adiabatic_per_Pa = compressibility_per_Pa(T_K);
  // Along saturation the pressure rises too, and squeezes; κ_S for κ_T here is an error of the second order.
  const expansion_per_K =
    state.liquidVolumeSlope_m3_per_mol_K / V + adiabatic_per_Pa * state.pressureSlope_Pa_per_K;
  const Cp = C_sat_J_per_mol_K + T_K * V * expansion_per_K * state.pressureSlope_Pa_per_K;
  return Cp / (1 + (T_K * V * expansion_per_K ** 2) / (adiabatic_per_Pa * Cp));
}
