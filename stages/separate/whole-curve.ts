import { levenbergMarquardt } from "../numerics/levenberg-marquardt.js";
import { scaledQr } from "../numerics/scaled-qr.js";
import {
  adjustedCurve,
  type ExcitationCurve,
  heatCapacityOfCurve_J_per_mol_K,
  PUBLISHED_CURVE,
} from "../physics/excitation-curve.js";
import { whitening } from "./common-sources.js";
import { powerUnit } from "./landau.js";
import type { Solution } from "./model-fit.js";
import type { Points } from "./points.js";
import { rotonsSeen } from "./rotons-seen.js";

/** Where the source of the curve parts phonons from rotons. */
const MAXON_PER_M = 1.103e10;
/** Known to this relative uncertainty, a gap needs no second fit to show that rotons are there. */
const WELL_SEEN = 0.02;
const LOWEST = { soundSpeed_m_per_s: 50, gap_K: 3 };
const HIGHEST = { soundSpeed_m_per_s: 1000, gap_K: 20 };

/**
 * The integral over a published excitation curve, its phonon branch scaled to a sound speed and its roton part shifted
 * to a gap; other powers of T may be added. The shape between them, which Landau's two pieces lack, is the curve's.
 */
export function fitWholeCurve(
  points: Points,
  other_powers: readonly number[],
  molarVolume_m3_per_mol: number,
): Solution {
  const { T_K } = points;
  const rows = whitening(points);
  const y = rows.whiten(points.C);
  const added = other_powers.map((power) => T_K.map((T) => T ** power));
  const columns = [...added.map((column) => rows.whiten(column)), ...rows.nuisance];
  const curveHeat = (parameter: Float64Array): Float64Array =>
    heatCapacityOfCurve_J_per_mol_K(T_K, curveAt(parameter), molarVolume_m3_per_mol);
  const solve = ([lowestGap, highestGap]: readonly [number, number]) =>
    levenbergMarquardt(
      {
        residuals: rows.rows,
        residual(parameter, out) {
          out.set(rows.whiten(curveHeat(parameter)));
          columns.forEach((column, j) => {
            for (let i = 0; i < out.length; i++) out[i]! += parameter[2 + j]! * column[i]!;
          });
          for (let i = 0; i < out.length; i++) out[i]! -= y[i]!;
        },
        jacobian(parameter, out) {
          for (let j = 0; j < 2; j++) {
            // Central differences of an analytic integral; a step of 1e-5 leaves 1e-10 of truncation and of rounding.
            const step = 1e-5 * parameter[j]!;
            const heat = [-1, 1].map((side) =>
              rows.whiten(curveHeat(parameter.map((value, m) => (m === j ? value + side * step : value)))),
            );
            for (let i = 0; i < rows.rows; i++) out.set(i, j, (heat[1]![i]! - heat[0]![i]!) / (2 * step));
          }
          columns.forEach((column, j) => {
            for (let i = 0; i < rows.rows; i++) out.set(i, 2 + j, column[i]!);
          });
        },
      },
      [
        PUBLISHED_CURVE.soundSpeed_m_per_s,
        Math.max(lowestGap, PUBLISHED_CURVE.gap_K),
        ...columns.map(() => 0),
      ],
      {
        covariance: points.uncertainty === "known" ? "absolute" : "scatter",
        lower: [LOWEST.soundSpeed_m_per_s, lowestGap, ...columns.map(() => Number.NEGATIVE_INFINITY)],
        upper: [HIGHEST.soundSpeed_m_per_s, highestGap, ...columns.map(() => Number.POSITIVE_INFINITY)],
      },
    );
  const found = solve([LOWEST.gap_K, HIGHEST.gap_K]);
  const k = 2 + added.length;
  const curve = curveHeat(found.value);
  const phonon = heatCapacityOfCurve_J_per_mol_K(
    T_K,
    belowMaxon(curveAt(found.value)),
    molarVolume_m3_per_mol,
  );
  const fit = curve.map((heat, i) =>
    added.reduce((sum, column, j) => sum + found.value[2 + j]! * column[i]!, heat),
  );
  // The volume multiplies the whole integral; a parameter answers as if the data had moved the other way.
  const answer = scaledQr(found.jacobian).solve(rows.whiten(curve));
  const perLogVolume = (at: number): number => -answer[at]!;
  const unit = (at: number) => Float64Array.from({ length: k }, (_, j) => (j === at ? 1 : 0));
  const stuck = (at: number) => found.atBound.includes(at) || !found.converged;
  const notSeen = (): string | null => {
    if (found.standardDeviation[1]! < WELL_SEEN * found.value[1]!) return null;
    // At 20 K rotons are frozen out of any window: the fit without them.
    const frozen = solve([HIGHEST.gap_K, HIGHEST.gap_K]);
    const variance = points.uncertainty === "known" ? 1 : found.chiSquared / found.degreesOfFreedom;
    return rotonsSeen((frozen.chiSquared - found.chiSquared) / variance);
  };
  return {
    model: "whole-curve",
    phonon_powers: [],
    names: ["sound_speed", "gap", ...other_powers.map((power) => `A${power}`)],
    units: ["m/s", "K", ...other_powers.map(powerUnit)],
    value: found.value.slice(0, k),
    jacobian: found.jacobian,
    residual: found.residual,
    phonon,
    roton: curve.map((heat, i) => heat - phonon[i]!),
    fit,
    rotonFailure: stuck(1)
      ? `the fit runs to ${found.value[1]!.toPrecision(3)} K and does not settle`
      : notSeen(),
    soundSpeed: () =>
      stuck(0) ? null : { value: found.value[0]!, gradient: unit(0), perLogVolume: perLogVolume(0) },
    rotonGap: () =>
      stuck(1) ? null : { value: found.value[1]!, gradient: unit(1), perLogVolume: perLogVolume(1) },
  };
}

function curveAt(parameter: Float64Array): ExcitationCurve {
  return adjustedCurve(PUBLISHED_CURVE, { soundSpeed_m_per_s: parameter[0]!, gap_K: parameter[1]! });
}

function belowMaxon(curve: ExcitationCurve): ExcitationCurve {
  const count = curve.wavenumber_per_m.filter((k) => k <= MAXON_PER_M).length;
  return {
    ...curve,
    wavenumber_per_m: curve.wavenumber_per_m.subarray(0, count),
    energy_K: curve.energy_K.subarray(0, count),
  };
}
