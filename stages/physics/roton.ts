import { integrate } from "../numerics/quadrature.js";
import { boseHeatKernel } from "./bose.js";
import { BOLTZMANN, PLANCK_REDUCED } from "./constants.js";

const k = BOLTZMANN.value;
const hbar = PLANCK_REDUCED.value;

/** Rotons at ε = Δ + ħ²(k − k₀)²/2μ in a liquid of one molar volume. */
export interface RotonMinimum {
  /** Δ/k_B. */
  readonly gap_K: number;
  /** k₀. */
  readonly momentum_per_m: number;
  /** μ. */
  readonly mass_kg: number;
  readonly molarVolume_m3_per_mol: number;
}

/**
 * How the roton heat capacity varies with temperature: √T e^{−y}(3/4 + y + y²), y = Δ/kT.
 * @returns K^{1/2}
 * @see methods.md §5; Landau 1947
 */
export function rotonShape(T_K: number, gap_K: number): number {
  const y = gap_K / T_K;
  return Math.sqrt(T_K) * Math.exp(-y) * (0.75 + y + y * y);
}

/** ∂rotonShape/∂gap_K = T^{−1/2} e^{−y}(1/4 + y − y²), in K^{−1/2}. */
export function rotonShapeGapDerivative(T_K: number, gap_K: number): number {
  const y = gap_K / T_K;
  return (Math.exp(-y) * (0.25 + y - y * y)) / Math.sqrt(T_K);
}

/**
 * What multiplies rotonShape: 2 k₀² √(μ k) k V_m/((2π)^{3/2} ħ).
 * @returns J/(mol K^{3/2})
 */
export function rotonAmplitude_J_per_mol_K15(minimum: Omit<RotonMinimum, "gap_K">): number {
  const { momentum_per_m, mass_kg, molarVolume_m3_per_mol } = minimum;
  const perVolume = (2 * momentum_per_m ** 2 * Math.sqrt(mass_kg * k)) / ((2 * Math.PI) ** 1.5 * hbar);
  return k * molarVolume_m3_per_mol * perVolume;
}

/**
 * Landau's roton heat capacity: Boltzmann statistics and k² held at k₀².
 * At 1 K each of the two simplifications costs less than 0.5 % (roton.test.ts measures them).
 * @returns J/(mol K)
 */
export function rotonHeatCapacity_J_per_mol_K(T_K: number, minimum: RotonMinimum): number {
  return rotonAmplitude_J_per_mol_K15(minimum) * rotonShape(T_K, minimum.gap_K);
}

/** Number of rotons per volume, n_r = 2 k₀² √(μ kT) e^{−Δ/kT}/((2π)^{3/2} ħ), in 1/m³. */
export function rotonNumberDensity_per_m3(T_K: number, minimum: RotonMinimum): number {
  const { momentum_per_m, mass_kg, gap_K } = minimum;
  const root = Math.sqrt(mass_kg * k * T_K);
  return (2 * momentum_per_m ** 2 * root * Math.exp(-gap_K / T_K)) / ((2 * Math.PI) ** 1.5 * hbar);
}

/** What the integral keeps that the closed form does not. */
export interface RotonIntegralForm {
  /** Phase space at the minimum, or where the roton is. */
  readonly phaseSpace: "k0-squared" | "k-squared";
  readonly statistics: "boltzmann" | "bose";
}

/**
 * Roton heat capacity from the integral (V/2π²)∫k² k_B x²eˣ/(eˣ−1)² dk over the parabola.
 * @returns J/(mol K); relative error below 1e-10
 */
export function rotonHeatCapacityIntegral_J_per_mol_K(
  T_K: number,
  minimum: RotonMinimum,
  form: RotonIntegralForm,
): number {
  const { gap_K, momentum_per_m: k0, mass_kg, molarVolume_m3_per_mol } = minimum;
  const width_per_m = Math.sqrt(mass_kg * k * T_K) / hbar;
  const y = gap_K / T_K;
  const oneMode = form.statistics === "bose" ? boseHeatKernel : (x: number) => x * x * Math.exp(-x);
  const phaseSpace = form.phaseSpace === "k-squared" ? (q: number) => q * q : () => k0 * k0;
  // z = (k − k₀)/width; at |z| = 12 the integrand is e^{−72} of its peak.
  const at = (z: number) => phaseSpace(k0 + z * width_per_m) * oneMode(y + (z * z) / 2);
  const integral = integrate((z) => at(z) + at(-z), 0, 12, 1e-12);
  return ((k * molarVolume_m3_per_mol * width_per_m) / (2 * Math.PI ** 2)) * integral;
}
