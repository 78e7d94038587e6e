import {
  type SeparableFit,
  type SeparableModel,
  separableFitAt,
  variableProjection,
} from "../numerics/variable-projection.js";
import { soundSpeed_m_per_s } from "../physics/phonon.js";
import { rotonShape, rotonShapeGapDerivative } from "../physics/roton.js";
import { type Whitening, whitening } from "./common-sources.js";
import type { Solution } from "./model-fit.js";
import type { Points } from "./points.js";
import { rotonsSeen } from "./rotons-seen.js";

/** Any liquid helium's gap lies inside; helium-4's falls from 8.6 K to 7.2 K under pressure. */
export const GAP_BRACKET_K: readonly [number, number] = [3, 20];
/** χ² bends on a scale of kelvins: 0.25 K cannot step over its minimum. */
export const SCAN_STEPS = 68;

const ROTON_AMPLITUDE_UNIT = "J/(mol.K1.5)";

/** The unit of an amplitude of T^power: J/(mol.K4) for T³. */
export function powerUnit(power: number): string {
  if (power === -1) return "J/mol";
  return power === 0 ? "J/(mol.K)" : `J/(mol.K${power + 1})`;
}

/** Landau's form as rows in units of u: powers, then the common sources, and one roton column that moves with Δ. */
export function landauModel(
  points: Points,
  powers: readonly number[],
): { model: SeparableModel; whiten: Whitening["whiten"]; nuisances: number } {
  const { T_K } = points;
  const { whiten, nuisance } = whitening(points);
  return {
    model: {
      fixed: [...powers.map((power) => whiten(T_K.map((T) => T ** power))), ...nuisance],
      moving: (nonlinear) => [whiten(T_K.map((T) => rotonShape(T, nonlinear[0]!)))],
      derivative: (nonlinear) => [[whiten(T_K.map((T) => rotonShapeGapDerivative(T, nonlinear[0]!)))]],
    },
    whiten,
    nuisances: nuisance.length,
  };
}

function phononsOnly(model: SeparableModel): SeparableModel {
  return { ...model, moving: () => [], derivative: () => [] };
}

/**
 * C = Σ A_p T^p + B √T e^{−Δ/T}(3/4 + y + y²), y = Δ/T: linear in all but Δ, so Δ is found by variable projection.
 * @param rotons "absent" for points too cold to hold any: then the series alone is fitted
 * @param phonon_powers, other_powers at most n amplitudes in all, with Δ and B
 */
export function fitLandau(
  points: Points,
  phonon_powers: readonly number[],
  other_powers: readonly number[],
  rotons: "fitted" | "absent",
  molarVolume_m3_per_mol: number,
): Solution {
  const { T_K } = points;
  const powers = [...phonon_powers, ...other_powers];
  const { model: full, whiten, nuisances } = landauModel(points, powers);
  const model = rotons === "absent" ? phononsOnly(full) : full;
  const y = whiten(points.C);
  const found =
    rotons === "absent"
      ? { ...separableFitAt(model, y, new Float64Array(0)), atBound: false }
      : variableProjection(model, y, { bracket: GAP_BRACKET_K, steps: SCAN_STEPS });

  const withoutRotons = () => separableFitAt(phononsOnly(full), y, new Float64Array(0));

  // The sources' own amplitudes go behind the physical parameters.
  const physical = powers.length;
  const order = [
    ...powers.keys(),
    ...(rotons === "absent" ? [] : [physical + nuisances, physical + nuisances + 1]),
    ...Array.from({ length: nuisances }, (_, s) => physical + s),
  ];
  const amplitude = found.linear[physical + nuisances] ?? 0;
  const gap_K = found.nonlinear[0] ?? Number.NaN;
  const value = Float64Array.from(found.linear.subarray(0, physical));
  const series = (chosen: readonly number[], T: number) =>
    chosen.reduce((sum, power) => sum + value[powers.indexOf(power)]! * T ** power, 0);
  const phonon = T_K.map((T) => series(phonon_powers, T));
  const roton = T_K.map((T) => (rotons === "absent" ? 0 : amplitude * rotonShape(T, gap_K)));
  const all = rotons === "absent" ? value : Float64Array.of(...value, amplitude, gap_K);
  const unit = (at: number) => Float64Array.from(all, (_, j) => (j === at ? 1 : 0));
  const cubic = phonon_powers.indexOf(3);
  const A3 = cubic < 0 ? Number.NaN : value[cubic]!;
  return {
    model: "landau",
    phonon_powers,
    names: [...powers.map((power) => `A${power}`), ...(rotons === "absent" ? [] : ["B", "gap"])],
    units: [...powers.map(powerUnit), ...(rotons === "absent" ? [] : [ROTON_AMPLITUDE_UNIT, "K"])],
    value: all,
    jacobian: found.jacobian.subMatrixColumn(order),
    residual: found.residual,
    phonon,
    roton,
    fit: T_K.map((T, i) => phonon[i]! + roton[i]! + series(other_powers, T)),
    rotonFailure: rotonFailure(rotons, found.atBound, amplitude) ?? notSeen(withoutRotons(), found, points),
    soundSpeed() {
      if (!(A3 > 0)) return null;
      const u1 = soundSpeed_m_per_s(A3, molarVolume_m3_per_mol);
      // u₁ ∝ (V/A₃)^{1/3}
      return { value: u1, gradient: unit(cubic).map((e) => (-e * u1) / (3 * A3)), perLogVolume: u1 / 3 };
    },
    rotonGap: () =>
      rotons === "absent" ? null : { value: gap_K, gradient: unit(physical + 1), perLogVolume: 0 },
  };
}

function notSeen(
  without: Pick<SeparableFit, "chiSquared">,
  found: SeparableFit,
  points: Points,
): string | null {
  const unit =
    points.uncertainty === "known" ? 1 : found.chiSquared / (points.T_K.length - found.jacobian.columns);
  return rotonsSeen((without.chiSquared - found.chiSquared) / unit);
}

function rotonFailure(rotons: "fitted" | "absent", atBound: boolean, amplitude: number): string | null {
  if (rotons === "absent") return "no roton term stands out";
  if (atBound) return `χ² has no minimum between ${GAP_BRACKET_K[0]} and ${GAP_BRACKET_K[1]} K`;
  if (!(amplitude > 0)) return `the roton amplitude comes out as ${amplitude.toPrecision(2)}, not above 0`;
  return null;
}
