import type { Matrix } from "ml-matrix";
import { scaledQr } from "../numerics/scaled-qr.js";
import type { Points } from "./points.js";
import type { Estimate, Influence, SeparationModel } from "./types.js";

/** What a model's solver hands over; k parameters, the common sources' own amplitudes after them. */
export interface Solution {
  readonly model: SeparationModel;
  readonly phonon_powers: readonly number[];
  readonly names: readonly string[];
  readonly units: readonly string[];
  /** Length k. */
  readonly value: Float64Array;
  /** Of the rows of common-sources.ts, at the solution. */
  readonly jacobian: Matrix;
  readonly residual: Float64Array;
  /** Length n, J/(mol K). */
  readonly phonon: Float64Array;
  readonly roton: Float64Array;
  readonly fit: Float64Array;
  /** Why the search itself found no roton gap, if it did not. */
  readonly rotonFailure: string | null;
  /** Sound speed as a function of the parameters: value, gradient (length k), and change per relative change of V. */
  soundSpeed(): Derived | null;
  rotonGap(): Derived | null;
}

export interface Derived {
  readonly value: number;
  /** ∂/∂parameter, length k. */
  readonly gradient: Float64Array;
  /** ∂/∂ln V beyond what the parameters carry. */
  readonly perLogVolume: number;
}

/** A fitted model with what its uncertainties come from. */
export interface ModelFit extends Solution {
  /** k × k; everything that moves Cv included. */
  readonly covariance: readonly Float64Array[];
  readonly chiSquared: number;
  readonly degreesOfFreedom: number;
  readonly aicc: number;
  /** Standard uncertainty of each point, J/(mol K): given, or from the scatter. */
  readonly u: Float64Array;
  readonly influences: readonly Influence[];
  readonly sound_speed: Estimate | null;
  readonly roton_gap: Estimate | null;
  readonly missing: readonly string[];
}

/** A number known to no better than a third of itself is not reported as measured. */
const WORST_RELATIVE_UNCERTAINTY = 1 / 3;

/**
 * Covariance, and the same as a sum over sources. With β̂ = K C the fit's gain, repeatability gives K diag(u²) Kᵀ and
 * each common source (K g)(K g)ᵀ: for generalised least squares that sum is (JᵀV⁻¹J)⁻¹ itself.
 */
export function assess(
  points: Points,
  solution: Solution,
  molarVolume: { readonly value: number; readonly u: number },
): ModelFit {
  const n = points.T_K.length;
  const k = solution.value.length;
  const { jacobian } = solution;
  const gram = scaledQr(jacobian).inverseGram();
  const squares = solution.residual.reduce((sum, r) => sum + r * r, 0);
  const degreesOfFreedom = n - k;
  const known = points.uncertainty === "known";
  const scale = known ? 1 : Math.sqrt(degreesOfFreedom > 0 ? squares / degreesOfFreedom : Number.NaN);
  const u = points.u.map((each) => each * scale);

  const gain = Array.from({ length: k }, (_, j) => {
    const row = new Float64Array(n);
    for (let i = 0; i < n; i++) {
      let sum = 0;
      for (let m = 0; m < jacobian.columns; m++) sum += gram.get(j, m) * jacobian.get(i, m);
      row[i] = sum / points.u[i]!;
    }
    return row;
  });
  const effect = points.sources.map((source) => gain.map((row) => inner(row, source.s_Cv_J_per_mol_K)));
  const covariance = gain.map((a, i) =>
    Float64Array.from(gain, (b, j) => {
      let sum = 0;
      for (let m = 0; m < n; m++) sum += a[m]! * b[m]! * u[m]! * u[m]!;
      for (const each of effect) sum += each[i]! * each[j]!;
      return sum;
    }),
  );

  const relative = (column: Float64Array) =>
    Math.sqrt(column.reduce((sum, s, i) => sum + (s / solution.fit[i]!) ** 2, 0) / n);
  const missing: string[] = [];
  const speed = solution.soundSpeed();
  const gap = solution.rotonGap();
  const logVolume = molarVolume.u / molarVolume.value;
  const repeat = (derived: Derived | null) =>
    derived &&
    Math.hypot(
      ...Array.from(
        u,
        (each, i) => gain.reduce((sum, row, j) => sum + derived.gradient[j]! * row[i]!, 0) * each,
      ),
    );
  const moved = (derived: Derived | null, change: readonly number[]) =>
    derived && change.reduce((sum, each, j) => sum + derived.gradient[j]! * each, 0);
  const influences: Influence[] = [
    {
      name: "repeatability",
      title: known ? "repeatability" : "scatter about the fit",
      relative_Cv: relative(u),
      sound_speed_m_per_s: repeat(speed),
      roton_gap_K: repeat(gap),
    },
    ...points.sources.map((source, s) => ({
      name: source.name,
      title: source.title,
      relative_Cv: relative(source.s_Cv_J_per_mol_K),
      sound_speed_m_per_s: moved(speed, effect[s]!),
      roton_gap_K: moved(gap, effect[s]!),
    })),
    {
      name: "molar_volume",
      title: "molar volume",
      relative_Cv: null,
      sound_speed_m_per_s: speed && speed.perLogVolume * logVolume,
      roton_gap_K: gap && gap.perLogVolume * logVolume,
    },
  ];
  const estimate = (
    what: string,
    derived: Derived | null,
    column: "sound_speed_m_per_s" | "roton_gap_K",
    unit: string,
    failure: string | null,
    wayOut: string,
  ): Estimate | null => {
    if (failure !== null) {
      missing.push(`${what}: ${failure}; ${wayOut}`);
      return null;
    }
    if (derived === null) return null;
    const uncertainty = Math.hypot(...influences.map((each) => each[column] ?? 0));
    if (!(uncertainty <= WORST_RELATIVE_UNCERTAINTY * derived.value)) {
      missing.push(
        Number.isFinite(uncertainty)
          ? `${what}: its standard uncertainty (${uncertainty.toPrecision(2)} ${unit}) exceeds a third of its value (${derived.value.toPrecision(3)} ${unit}); ${wayOut}`
          : `${what}: ${n} points do not determine it beside the other terms; ${wayOut}`,
      );
      return null;
    }
    return { value: derived.value, standard_uncertainty: uncertainty, unit };
  };
  const sound_speed = estimate(
    "sound speed",
    speed,
    "sound_speed_m_per_s",
    "m/s",
    speed === null ? noSoundSpeed(solution) : thirdOfCoefficient(solution, covariance),
    "it needs points below 0.6 K, where phonons carry the heat",
  );
  const roton_gap = estimate(
    "roton gap",
    gap,
    "roton_gap_K",
    "K",
    solution.rotonFailure,
    "it needs points above 0.7 K, where rotons carry the heat",
  );

  const parameters = k + (known ? 0 : 1);
  const spare = n - parameters - 1;
  const misfit = known ? squares : n * Math.log(squares / n);
  return {
    ...solution,
    covariance,
    chiSquared: squares / scale ** 2,
    degreesOfFreedom,
    // Hurvich and Tsai, Biometrika 76, 297 (1989); Gaussian likelihood with u known, or with its scale fitted.
    aicc:
      spare > 0
        ? misfit + 2 * parameters + (2 * parameters * (parameters + 1)) / spare
        : Number.POSITIVE_INFINITY,
    u,
    influences,
    sound_speed,
    roton_gap,
    missing,
  };
}

function noSoundSpeed(solution: Solution): string {
  const at = solution.names.indexOf("A3");
  if (at < 0) return "no T³ term is fitted";
  return `the T³ coefficient comes out as ${solution.value[at]!.toPrecision(2)} J/(mol K⁴), not above 0`;
}

/** u₁ goes as A₃^{−1/3}, so a coefficient that might as well be 0 would still give a sound speed to a third. */
function thirdOfCoefficient(solution: Solution, covariance: readonly Float64Array[]): string | null {
  const at = solution.names.indexOf("A3");
  if (at < 0) return null;
  const share = Math.sqrt(covariance[at]![at]!) / solution.value[at]!;
  return share > WORST_RELATIVE_UNCERTAINTY
    ? `the T³ coefficient is known to ${(100 * share).toPrecision(2)} % only`
    : null;
}

function inner(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!;
  return sum;
}
