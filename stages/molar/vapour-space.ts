import { molarVolume_m3_per_mol } from "../physics/density.js";
import { type Saturation, saturation } from "../physics/saturation.js";
import { compressibility_per_Pa } from "../physics/sound.js";

/** Helium closed in a volume with vapour above the liquid. */
export interface ClosedFilling {
  readonly amount_mol: number;
  /** Above the liquid when the vapour is frozen out. */
  readonly vapourSpace_m3: number;
}

/** Volume above the liquid, m³: the liquid's own expansion moves the level, so it is not quite constant. */
function spaceAbove_m3(filling: ClosedFilling, state: Saturation): number {
  const expansion = molarVolume_m3_per_mol(0) - state.liquidVolume_m3_per_mol;
  return filling.vapourSpace_m3 + filling.amount_mol * expansion;
}

/**
 * Amount of vapour in the closed volume, mol: n_v = (V − n v_l)/(v_v − v_l).
 * @throws DomainError outside 0 < T ≤ 3.3 K
 */
export function vapourAmount_mol(T_K: number, filling: ClosedFilling): number {
  const state = saturation(T_K);
  return spaceAbove_m3(filling, state) / (state.vapourVolume_m3_per_mol - state.liquidVolume_m3_per_mol);
}

/**
 * What the vapour adds to the heat capacity of the filling: C_filling = n·C_sat,liquid + vapour part.
 *
 * The entropy is n s_l + n_v L/T. Clapeyron's L = T p′(v_v − v_l) and n_v = (V − n v_l)/(v_v − v_l) make that
 * n s_l + (V − n v_l) p′, so the part is exactly T·d[(V − n v_l) p′]/dT, whatever the vapour's equation of state:
 * the vapour pressure and its two derivatives are all it takes. For an ideal vapour, a constant space and a liquid
 * of no entropy it is n_v R(5/2 − 2λ + λ²), λ = L/RT (methods.md §4).
 * @returns J/K
 * @throws DomainError outside 0 < T ≤ 3.3 K
 */
export function vapourPart_J_per_K(T_K: number, filling: ClosedFilling): number {
  const state = saturation(T_K);
  return (
    T_K *
    (spaceAbove_m3(filling, state) * state.curvature_Pa_per_K2 -
      filling.amount_mol * state.liquidVolumeSlope_m3_per_mol_K * state.slope_Pa_per_K)
  );
}

/**
 * From along the saturation line to constant volume:
 * C_p = C_sat + T V α_p (dp/dT)_sat, and C_v = C_p − T V α_p²/κ_T = C_p/(1 + T V α_p²/(κ_S C_p)).
 * Below 1.5 K the two together are less than 0.1 %.
 * @returns J/(mol K)
 * @throws DomainError outside 0 < T ≤ 3.3 K
 */
export function constantVolumeFromSaturated_J_per_mol_K(T_K: number, C_sat_J_per_mol_K: number): number {
  const state = saturation(T_K);
  const V = state.liquidVolume_m3_per_mol;
  const adiabatic_per_Pa = compressibility_per_Pa(T_K);
  // Along saturation the pressure rises too, and squeezes: at 1.5 K α_p is 12 % smaller than the slope along the line.
  // κ_S stands for κ_T here, which differ by C_p/C_v, 0.04 %.
  const expansion_per_K = state.liquidVolumeSlope_m3_per_mol_K / V + adiabatic_per_Pa * state.slope_Pa_per_K;
  const Cp = C_sat_J_per_mol_K + T_K * V * expansion_per_K * state.slope_Pa_per_K;
  return Cp / (1 + (T_K * V * expansion_per_K ** 2) / (adiabatic_per_Pa * Cp));
}
