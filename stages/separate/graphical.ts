import { SimpleLinearRegression } from "ml-regression";
import { soundSpeed_m_per_s } from "../physics/phonon.js";
import type { Points } from "./points.js";
import type { Estimate, Separation } from "./types.js";

/** Points take part in a line where its own part carries at least this share of the heat. */
const SHARE = 0.5;
/** Where a start is needed: below it phonons alone, above it rotons mostly. */
const PARTING_K = 0.7;
const ROUNDS = 60;

/**
 * Sound speed and gap as drawn by hand: C/T³ against T² (intercept A₃), and ln[(C − C_ph)/(√T(3/4 + y + y²))] against
 * 1/T (slope −Δ), each part taken off before the other is drawn, until both stand still. Straight lines, no weights:
 * a check on the fit, not a rival.
 * @see methods.md §5
 */
export function graphicalEstimates(points: Points, molarVolume_m3_per_mol: number): Separation["graphical"] {
  const { T_K, C } = points;
  let phonon: Line | null = null;
  let roton: Line | null = null;
  for (let round = 0; round < ROUNDS; round++) {
    const before: number | undefined = roton?.slope;
    const cold = Array.from(T_K.keys()).filter((i) =>
      roton === null ? T_K[i]! < PARTING_K - 0.15 : rotonHeat(roton, T_K[i]!) < (1 - SHARE) * C[i]!,
    );
    phonon = straightLine(
      cold.map((i) => T_K[i]! ** 2),
      cold.map((i) => (C[i]! - (roton === null ? 0 : rotonHeat(roton, T_K[i]!))) / T_K[i]! ** 3),
    );
    if (phonon === null) break;
    const carried = phonon;
    const gap_K = roton === null ? 8.6 : -roton.slope;
    const warm = Array.from(T_K.keys()).filter(
      (i) => T_K[i]! > PARTING_K && C[i]! - phononHeat(carried, T_K[i]!) > SHARE * C[i]!,
    );
    roton = straightLine(
      warm.map((i) => 1 / T_K[i]!),
      warm.map((i) => Math.log((C[i]! - phononHeat(carried, T_K[i]!)) / shape(T_K[i]!, gap_K))),
    );
    if (roton === null) break;
    if (before !== undefined && Math.abs(roton.slope - before) < 1e-9 * Math.abs(before)) break;
  }
  return {
    sound_speed: phonon === null ? null : soundSpeed(phonon, molarVolume_m3_per_mol),
    roton_gap:
      roton === null || !(roton.slope < 0)
        ? null
        : { value: -roton.slope, standard_uncertainty: roton.u_slope, unit: "K" },
  };
}

interface Line {
  readonly slope: number;
  readonly intercept: number;
  readonly u_slope: number;
  readonly u_intercept: number;
}

/** Null with fewer than three points: two always agree. */
function straightLine(x: readonly number[], y: readonly number[]): Line | null {
  const n = x.length;
  if (n < 3) return null;
  const mean = x.reduce((sum, at) => sum + at, 0) / n;
  const centred = x.map((at) => at - mean);
  const Sxx = centred.reduce((sum, at) => sum + at * at, 0);
  if (!(Sxx > 0)) return null;
  const line = new SimpleLinearRegression(centred, y);
  const scatter = Math.sqrt(
    y.reduce((sum, at, i) => sum + (at - line.predict(centred[i]!)) ** 2, 0) / (n - 2),
  );
  return {
    slope: line.slope,
    intercept: line.intercept - line.slope * mean,
    u_slope: scatter / Math.sqrt(Sxx),
    u_intercept: scatter * Math.sqrt(1 / n + mean ** 2 / Sxx),
  };
}

function soundSpeed(line: Line, molarVolume_m3_per_mol: number): Estimate | null {
  if (!(line.intercept > 0)) return null;
  const value = soundSpeed_m_per_s(line.intercept, molarVolume_m3_per_mol);
  return { value, standard_uncertainty: (value * line.u_intercept) / (3 * line.intercept), unit: "m/s" };
}

function phononHeat(line: Line, T: number): number {
  return T ** 3 * (line.intercept + line.slope * T * T);
}

function shape(T: number, gap_K: number): number {
  const y = gap_K / T;
  return Math.sqrt(T) * (0.75 + y + y * y);
}

function rotonHeat(line: Line, T: number): number {
  return Math.exp(line.intercept + line.slope / T) * shape(T, -line.slope);
}
