import type { Addenda } from "../addenda/types.js";
import { InputError } from "../errors.js";
import { meanOverStep } from "../physics/step-mean.js";
import type { Quantity } from "../quantities/types.js";
import { subtractAddenda } from "./constant-volume.js";
import type { HeliumSample, MolarHeatCapacity, MolarSource, TotalHeatCapacity } from "./types.js";
import { constantVolumeFromSaturated_J_per_mol_K, vapourPart_J_per_K } from "./vapour-space.js";

/**
 * From total heat capacity to the sample's C_v per mole, with one sensitivity column per common source.
 *
 * @param addenda of the same cell
 * @param smooth_Cv_J_per_mol_K length n: a smooth curve through the points, from which the amount's sensitivity is
 *   taken. A scale uncertainty that is taken from each scattered point pulls a later fit low (Peelle's puzzle).
 *   Left out, the points themselves stand in: good enough to find the smooth curve with.
 * @returns points in the same order; Cv is the mean over each step, as the total was
 * @throws InputError if a saturated-vapour sample does not say its vapour space
 * @throws DomainError if a saturated-vapour point lies above 3.3 K
 */
export function toMolar(
  points: TotalHeatCapacity,
  addenda: Addenda,
  sample: HeliumSample,
  smooth_Cv_J_per_mol_K?: Float64Array,
): MolarHeatCapacity {
  const n = sample.amount.value;
  const split = subtractAddenda(points, addenda);
  const filling = reduceFilling(points, split.C_sample_J_per_K, sample);
  const smooth = smooth_Cv_J_per_mol_K ?? filling.Cv_J_per_mol_K;
  const sources: MolarSource[] = [
    {
      name: "amount",
      title: "amount of helium",
      s_Cv_J_per_mol_K: smooth.map((Cv) => (-Cv * sample.amount.u) / n),
    },
    ...addenda.sensitivities(points.T_K).map(({ title, s_C_J_per_K }, i) => ({
      name: `addenda_${i + 1}`,
      title,
      s_Cv_J_per_mol_K: s_C_J_per_K.map((s) => -s / n),
    })),
  ];
  return {
    T_K: points.T_K,
    Cv_J_per_mol_K: filling.Cv_J_per_mol_K,
    u_repeat_J_per_mol_K: points.u_C_total_J_per_K.map((u) => u / n),
    addenda_share: split.addenda_share,
    vapour_share: filling.C_vapour_J_per_K.map((part, i) => part / points.C_total_J_per_K[i]!),
    sources: [...sources, ...filling.sources],
    notes: [...addenda.notes, ...addenda.rangeNotes(points.T_K)],
  };
}

/** What the condition of the filling makes of the sample's heat capacity. Columns have length n. */
interface ReducedFilling {
  readonly Cv_J_per_mol_K: Float64Array;
  readonly C_vapour_J_per_K: Float64Array;
  readonly sources: readonly MolarSource[];
}

function reduceFilling(
  points: TotalHeatCapacity,
  C_sample_J_per_K: Float64Array,
  sample: HeliumSample,
): ReducedFilling {
  const n = sample.amount.value;
  if (sample.condition === "constant-volume") {
    return {
      Cv_J_per_mol_K: C_sample_J_per_K.map((C) => C / n),
      C_vapour_J_per_K: new Float64Array(points.T_K.length),
      sources: [],
    };
  }
  const space = vapourSpaceOf(sample);
  const vapourOver = (vapourSpace_m3: number) =>
    points.T_K.map((T, i) =>
      meanOverStep(
        (at_K) => vapourPart_J_per_K(at_K, { amount_mol: n, vapourSpace_m3 }),
        T - points.dT_K[i]! / 2,
        T + points.dT_K[i]! / 2,
      ),
    );
  const C_vapour_J_per_K = vapourOver(space.value);
  // The vapour part is linear in the vapour space, so one standard uncertainty further is exact.
  const further = vapourOver(space.value + space.u);
  return {
    Cv_J_per_mol_K: C_sample_J_per_K.map((C, i) =>
      constantVolumeFromSaturated_J_per_mol_K(points.T_K[i]!, (C - C_vapour_J_per_K[i]!) / n),
    ),
    C_vapour_J_per_K,
    sources: [
      {
        name: "vapour_space",
        title: "volume of the vapour space",
        s_Cv_J_per_mol_K: further.map((C, i) => -(C - C_vapour_J_per_K[i]!) / n),
      },
    ],
  };
}

function vapourSpaceOf(sample: HeliumSample): Quantity {
  if (sample.vapour_space !== undefined) return sample.vapour_space;
  throw new InputError({
    key: "vapour_space",
    expected: "the volume above the liquid, since condition is saturated-vapour",
    wayOut: 'add vapour_space: "0.40 ± 0.05 cm3", or set condition: constant-volume for a full cell',
  });
}
