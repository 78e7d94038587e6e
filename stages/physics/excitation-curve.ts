import { DomainError } from "../errors.js";
import { BOLTZMANN, KELVIN_PER_MEV, PLANCK_REDUCED } from "./constants.js";
import { ENERGY_1E4_MEV, wavenumber_per_angstrom } from "./tables/dispersion-2021.js";

/** A whole excitation curve ε(k). Both columns have length n, in order of increasing wavenumber from 0. */
export interface ExcitationCurve {
  readonly wavenumber_per_m: Float64Array;
  /** ε/k_B; 0 at wavenumber 0. */
  readonly energy_K: Float64Array;
  /** Slope at wavenumber 0. */
  readonly soundSpeed_m_per_s: number;
  /** Energy of the roton minimum. */
  readonly gap_K: number;
  readonly source: string;
}

/** The dispersion the source gives for long waves: ε = ħck(1 + α₂k² + α₃k³ + α₄k⁴), k in 1/Å. */
const LONG_WAVES = { c_m_per_s: 238.3, alpha2: 1.55, alpha3: -4.04, alpha4: 2.3, upTo_per_angstrom: 0.1 };

function publishedEnergy_K(printed_1e4_meV: number, k: number): number {
  if (k > LONG_WAVES.upTo_per_angstrom) return printed_1e4_meV * 1e-4 * KELVIN_PER_MEV.value;
  // Four printed decimals of a meV are only two digits here, 0.25 % of C at 0.03 K. The source's own formula
  // gives the same numbers to within 0.6 units of the last printed digit up to 0.1 1/Å.
  const { c_m_per_s, alpha2, alpha3, alpha4 } = LONG_WAVES;
  const slope_K = (PLANCK_REDUCED.value * c_m_per_s * 1e10) / BOLTZMANN.value;
  return slope_K * k * (1 + k * k * (alpha2 + k * (alpha3 + k * alpha4)));
}

/**
 * The measured curve at saturated vapour pressure below 0.1 K, 0 to 3.6 1/Å (tables/dispersion-2021.ts, CC BY 4.0).
 * Sound speed: ultrasound, 238.3 ± 0.1 m/s. Gap: the authors' recommended 8.608 ± 0.012 K.
 */
export const PUBLISHED_CURVE: ExcitationCurve = {
  wavenumber_per_m: Float64Array.from(ENERGY_1E4_MEV, (_, i) => wavenumber_per_angstrom(i) * 1e10),
  energy_K: Float64Array.from(ENERGY_1E4_MEV, (e, i) => publishedEnergy_K(e, wavenumber_per_angstrom(i))),
  soundSpeed_m_per_s: LONG_WAVES.c_m_per_s,
  gap_K: 8.608,
  source: "H. Godfrin et al., Phys. Rev. B 103, 104516 (2021), supplemental data, CC BY 4.0",
};

/**
 * Weights of the trapezoid rule on the curve's own points, length n.
 *
 * Good enough for a heat capacity: from k = 0 its integrand is even and smooth in k, where the rule converges
 * exponentially, and at the far end they are e^{−18 K/T}. A step of 0.002 1/Å serves down to 0.01 K.
 */
export function trapezoidWeights_per_m(wavenumber_per_m: Float64Array): Float64Array {
  const n = wavenumber_per_m.length;
  const weight = new Float64Array(n);
  for (let i = 1; i < n; i++) {
    const half = (wavenumber_per_m[i]! - wavenumber_per_m[i - 1]!) / 2;
    weight[i - 1]! += half;
    weight[i]! += half;
  }
  return weight;
}

/**
 * Heat capacity of a gas of independent bosons on the curve: (V/2π²)∫k² k_B x²eˣ/(eˣ−1)² dk, x = ε/kT.
 * @param T_K length m, all > 0
 * @returns length m, J/(mol K); quadrature error below 1e-5 from 0.02 K on the published curve
 * @throws DomainError with the index of the first temperature that is not positive
 */
export function heatCapacityOfCurve_J_per_mol_K(
  T_K: Float64Array,
  curve: ExcitationCurve,
  molarVolume_m3_per_mol: number,
): Float64Array {
  const { wavenumber_per_m: q, energy_K } = curve;
  const weight = trapezoidWeights_per_m(q);
  const phaseSpace = weight.map((w, i) => w * q[i]! ** 2 * energy_K[i]! ** 2);
  const scale = (BOLTZMANN.value * molarVolume_m3_per_mol) / (2 * Math.PI ** 2);
  const heat = new Float64Array(T_K.length);
  for (let j = 0; j < T_K.length; j++) {
    const T = T_K[j]!;
    if (!(T > 0)) throw new DomainError(`temperature ${T} K is not positive`, j);
    const inverseT = 1 / T;
    const negligible_K = 60 * T; // e^{−60} of a mode: nothing in a sum of doubles
    let sum = 0;
    for (let i = 1; i < q.length; i++) {
      const energy = energy_K[i]!;
      if (energy > negligible_K) continue;
      const e = Math.exp(-energy * inverseT);
      const d = 1 - e;
      sum += (phaseSpace[i]! * e) / (d * d);
    }
    heat[j] = scale * sum * inverseT * inverseT;
  }
  return heat;
}

/** Between these wavenumbers, 1/m, an adjusted curve passes from its phonon rule to its roton rule. */
const JOIN_PER_M = { from: 0.6e10, to: 1.5e10 };

/** 0 below the join, 1 above it, with two continuous derivatives between (the quintic smooth step). */
function rotonCharacter(wavenumber_per_m: number): number {
  const t = (wavenumber_per_m - JOIN_PER_M.from) / (JOIN_PER_M.to - JOIN_PER_M.from);
  if (t <= 0) return 0;
  if (t >= 1) return 1;
  return t * t * t * (10 + t * (6 * t - 15));
}

/**
 * The curve with its phonon branch scaled to a sound speed and its roton part shifted to a gap:
 * ε' = ε·[1 + (u₁'/u₁ − 1)(1 − s)] + (Δ' − Δ)·s, s rising smoothly from 0 at 0.6 1/Å to 1 at 1.5 1/Å.
 *
 * The join straddles the maxon, which no heat capacity below 1.2 K can see. Curvatures keep their published shape.
 */
export function adjustedCurve(
  curve: ExcitationCurve,
  target: { readonly soundSpeed_m_per_s: number; readonly gap_K: number },
): ExcitationCurve {
  const stretch = target.soundSpeed_m_per_s / curve.soundSpeed_m_per_s - 1;
  const shift_K = target.gap_K - curve.gap_K;
  const energy_K = curve.energy_K.map((energy, i) => {
    const s = rotonCharacter(curve.wavenumber_per_m[i]!);
    return energy * (1 + stretch * (1 - s)) + shift_K * s;
  });
  return {
    wavenumber_per_m: curve.wavenumber_per_m,
    energy_K,
    soundSpeed_m_per_s: target.soundSpeed_m_per_s,
    gap_K: target.gap_K,
    source: `${curve.source}; adjusted to ${target.soundSpeed_m_per_s} m/s and ${target.gap_K} K`,
  };
}
