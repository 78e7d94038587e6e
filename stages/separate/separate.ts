import { phononCoefficient_J_per_mol_K4 } from "../physics/phonon.js";
import { graphicalEstimates } from "./graphical.js";
import { fitLandau } from "./landau.js";
import { assess, type ModelFit } from "./model-fit.js";
import { type Points, pointsInWindow, takeRows } from "./points.js";
import type { Estimate, Separation, SeparationConfig, SeparationInput } from "./types.js";
import { fitWholeCurve } from "./whole-curve.js";

const SERIES: readonly (readonly number[])[] = [[3], [3, 5], [3, 5, 7]];

/**
 * The dispersion of helium has T⁵ and T⁷ terms for certain, and leaving them out moves u₁ by per cents while χ² hardly
 * notices. So the burden of proof lies on the shorter series: the longest one stands whose AICc is within this of the
 * lowest ("considerably less support" begins at 4: Burnham and Anderson, Model Selection (2002), §2.6).
 */
const STILL_SUPPORTED = 4;

/** Rotons carry below 1 % of the heat here. */
const NO_ROTONS_BELOW_K = 0.45;

/**
 * Splits C(T) into phonons and rotons: sound speed u₁ and roton gap Δ, their whole uncertainty, and what else the
 * points would bear.
 * @throws InputError for points that no fit can use
 * @see README.md beside; methods.md §5
 */
export function separate(input: SeparationInput, config: SeparationConfig): Separation {
  const volume = input.molar_volume_m3_per_mol;
  const points = pointsInWindow(input, config.window_K);
  const series = config.phonon_powers === "auto" ? SERIES : [config.phonon_powers];
  const landau = (of: Points, powers: readonly number[], rotons: "fitted" | "absent") =>
    evenScatter(of, (weighted) =>
      assess(weighted, fitLandau(weighted, powers, config.other_powers, rotons, volume.value), volume),
    );
  const amplitudes = (powers: readonly number[]) => powers.length + config.other_powers.length;
  const n = points.T_K.length;

  const landauFits = series
    .filter((powers) => amplitudes(powers) + 2 <= n)
    .map((powers) => landau(points, powers, "fitted"));
  const curveFits =
    config.model !== "landau" && config.other_powers.length + 2 <= n
      ? [
          evenScatter(points, (weighted) =>
            assess(weighted, fitWholeCurve(weighted, config.other_powers, volume.value), volume),
          ),
        ]
      : [];
  const candidates = config.model === "whole-curve" ? curveFits : landauFits;
  let chosen = choose(candidates);
  let fitted = points;
  const remarks: string[] = [];
  if (config.model !== "whole-curve" && (chosen?.roton_gap ?? null) === null) {
    const cold = takeRows(
      points,
      Int32Array.from(Array.from(points.T_K.keys()).filter((i) => points.T_K[i]! <= NO_ROTONS_BELOW_K)),
    );
    const alone = choose(
      series
        .filter((powers) => amplitudes(powers) <= cold.T_K.length)
        .map((powers) => landau(cold, powers, "absent")),
    );
    if (alone !== null && alone.sound_speed !== null) {
      remarks.push(
        ...(chosen?.missing ?? [`roton gap: ${n} points are too few for phonons and rotons together`]),
      );
      remarks.push(
        `the phonon terms are from the ${cold.T_K.length === 1 ? "one point" : `${cold.T_K.length} points`} up to ${NO_ROTONS_BELOW_K} K, where rotons do not count`,
      );
      chosen = alone;
      fitted = cold;
    }
  }
  const graphical = graphicalEstimates(points, volume.value);
  if (chosen === null) return nothing(points, config, graphical);
  return {
    model: chosen.model,
    phonon_powers: chosen.phonon_powers,
    points: fitted.T_K.length,
    window: windowOf(config),
    sound_speed: chosen.sound_speed,
    roton_gap: chosen.roton_gap,
    ...coefficients(chosen, volume.value),
    parameters: chosen.names.map((name, j) => ({
      name,
      value: chosen.value[j]!,
      standard_uncertainty: deviation(chosen, j),
      unit: chosen.units[j]!,
    })),
    chi_squared: chosen.chiSquared,
    degrees_of_freedom: chosen.degreesOfFreedom,
    aicc: chosen.aicc,
    correlation: {
      names: chosen.names,
      matrix: chosen.covariance.map((row, i) =>
        Array.from(row, (value, j) => (i === j ? 1 : value / (deviation(chosen, i) * deviation(chosen, j)))),
      ),
    },
    graphical,
    alternatives: [...landauFits, ...curveFits].map((fit) => ({
      model: fit.model,
      phonon_powers: fit.phonon_powers,
      sound_speed: fit.sound_speed,
      roton_gap: fit.roton_gap,
      chi_squared: fit.chiSquared,
      degrees_of_freedom: fit.degreesOfFreedom,
      aicc: fit.aicc,
    })),
    missing: remarks.length > 0 ? remarks : chosen.missing,
    influences: chosen.influences,
    curve: {
      row: fitted.row,
      T_K: fitted.T_K,
      Cv_J_per_mol_K: fitted.C,
      u_repeat_J_per_mol_K: chosen.u,
      fit_J_per_mol_K: chosen.fit,
      phonon_J_per_mol_K: chosen.phonon,
      roton_J_per_mol_K: chosen.roton,
    },
  };
}

/** Equal relative scatter is relative to the curve, not to the points: those that fell low would weigh more. */
function evenScatter(points: Points, solve: (points: Points) => ModelFit): ModelFit {
  const first = solve(points);
  if (points.uncertainty === "known" || first.fit.some((C) => !(C > 0))) return first;
  return solve({ ...points, u: first.fit });
}

function choose(candidates: readonly ModelFit[]): ModelFit | null {
  const had = (fit: ModelFit) => [fit.sound_speed, fit.roton_gap].filter((each) => each !== null).length;
  const most = Math.max(...candidates.map(had));
  const able = candidates.filter((fit) => had(fit) === most);
  const lowest = Math.min(...able.map((fit) => fit.aicc));
  // Candidates come shortest first; without a finite AICc only the shortest is left.
  return (
    able.findLast((fit) => fit.aicc <= lowest + STILL_SUPPORTED && Number.isFinite(fit.aicc)) ??
    able[0] ??
    null
  );
}

function deviation(fit: ModelFit, j: number): number {
  return Math.sqrt(fit.covariance[j]![j]!);
}

function coefficients(
  fit: ModelFit,
  molarVolume: number,
): Pick<Separation, "phonon_coefficient" | "roton_amplitude"> {
  const estimate = (name: string): Estimate | null => {
    const j = fit.names.indexOf(name);
    return j < 0
      ? null
      : { value: fit.value[j]!, standard_uncertainty: deviation(fit, j), unit: fit.units[j]! };
  };
  return {
    phonon_coefficient:
      fit.sound_speed &&
      (fit.model === "landau" ? estimate("A3") : limitingLaw(fit, fit.sound_speed.value, molarVolume)),
    roton_amplitude: fit.roton_gap && estimate("B"),
  };
}

/** The T³ law that the whole curve tends to; heat fixes V/u₁³, so the volume's own uncertainty does not enter. */
function limitingLaw(fit: ModelFit, u1: number, molarVolume: number): Estimate {
  const value = phononCoefficient_J_per_mol_K4(u1, molarVolume);
  const relative = (3 * deviation(fit, fit.names.indexOf("sound_speed"))) / u1;
  return { value, standard_uncertainty: value * relative, unit: "J/(mol.K4)" };
}

function windowOf(config: SeparationConfig): Separation["window"] {
  return { from: config.window_K[0], to: config.window_K[1], unit: "K" };
}

/** Too few points for any model: every number is missing, and that is the result. */
function nothing(points: Points, config: SeparationConfig, graphical: Separation["graphical"]): Separation {
  const n = points.T_K.length;
  const none = new Float64Array(n).fill(Number.NaN);
  return {
    model: config.model === "whole-curve" ? "whole-curve" : "landau",
    phonon_powers: [],
    points: n,
    window: windowOf(config),
    sound_speed: null,
    roton_gap: null,
    phonon_coefficient: null,
    roton_amplitude: null,
    parameters: [],
    chi_squared: 0,
    degrees_of_freedom: 0,
    aicc: Number.POSITIVE_INFINITY,
    correlation: { names: [], matrix: [] },
    graphical,
    alternatives: [],
    missing: [
      `sound speed and roton gap: ${n} ${n === 1 ? "point lies" : "points lie"} between ${config.window_K[0]} and ${config.window_K[1]} K, too few for any model; widen the window or measure more`,
    ],
    influences: [],
    curve: {
      row: points.row,
      T_K: points.T_K,
      Cv_J_per_mol_K: points.C,
      u_repeat_J_per_mol_K: points.u,
      fit_J_per_mol_K: none,
      phonon_J_per_mol_K: none,
      roton_J_per_mol_K: none,
    },
  };
}
