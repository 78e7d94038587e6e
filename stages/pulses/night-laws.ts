import { type ConductanceLaw, conductanceLaw } from "./cell-laws.js";
import type { ForwardFit } from "./forward-fit.js";
import type { Transient } from "./prepared-transient.js";

/** How C, link and boundary change with temperature over a night, as far as it is known. */
export interface Laws {
  readonly T_K: Float64Array;
  readonly C: Float64Array;
  readonly link: ConductanceLaw;
  readonly boundary: ConductanceLaw;
}

/** A metal link carries heat as T, a boundary as T³ (Pollack, Rev. Mod. Phys. 41, 48 (1969)): where to begin. */
const LINK: ConductanceLaw = { power: 1, u: 0.7 };
const BOUNDARY: ConductanceLaw = { power: 3, u: 0.7 };

/** Before any model: heat capacities by drift lines. */
export function startingLaws(transients: readonly Transient[]): Laws {
  const rows = transients.filter(
    ({ drift, Q_J, sound }) => sound && drift !== null && Q_J > 0 && drift.T_after_K > drift.T_before_K,
  );
  return {
    T_K: Float64Array.from(rows, ({ drift }) => (drift!.T_after_K + drift!.T_before_K) / 2),
    C: Float64Array.from(rows, ({ drift, Q_J }) => Q_J / (drift!.T_after_K - drift!.T_before_K)),
    link: LINK,
    boundary: BOUNDARY,
  };
}

/** @param chosen one fit a pulse, of the most general model */
export function lawsOf(before: Laws, chosen: readonly ForwardFit[]): Laws {
  const T = chosen.map((fit) => fit.T_K);
  const C = chosen.map((fit) => fit.C_J_per_K);
  const twos = chosen.filter(({ bodies }) => bodies === "two");
  // Pulses that were not fitted stay as they were read.
  const others = [...before.T_K.keys()].filter(
    (i) => !T.some((t) => Math.abs(t / before.T_K[i]! - 1) < 1e-3),
  );
  return {
    T_K: Float64Array.from([...T, ...others.map((i) => before.T_K[i]!)]),
    C: Float64Array.from([...C, ...others.map((i) => before.C[i]!)]),
    link: conductanceLaw(
      T,
      chosen.map((fit) => fit.link_W_per_K),
      chosen.map((fit) => fit.u_link_W_per_K),
      before.link,
    ),
    boundary: conductanceLaw(
      twos.map((fit) => fit.T_K),
      twos.map((fit) => fit.boundary_W_per_K),
      twos.map((fit) => (fit.boundary_W_per_K * fit.u_boundary_s) / fit.boundary_s),
      before.boundary,
    ),
  };
}
