import { DomainError } from "../errors.js";
import { HELIUM4_MOLAR_MASS } from "./constants.js";

/**
 * Density of liquid ⁴He along its saturated vapour pressure, by the published density equation.
 * R. J. Donnelly and C. F. Barenghi, J. Phys. Chem. Ref. Data 27, 1217 (1998), chapter 1; T₉₀, 0 to 4.9 K.
 * Accuracy of the density about 0.1 % (from memory); its changes with temperature are known much better.
 */
export const LAMBDA_TEMPERATURE_K = 2.1768;

/** One source prints 1.334 K and another 1.344 K for where the two low equations meet; they agree to 1e-6 there. */
const SWITCH_K = 1.334;
const RANGE_K = [0, 4.9] as const;
/** Relative standard uncertainty of the absolute density. */
export const RELATIVE_U_DENSITY = 1e-3;

// kg/m³ and powers of K.
const LOW = { rho0: 145.1397, m: [-1.26935e-2, 7.12413e-2, -0.167461, 8.75342e-2] };
const RHO_LAMBDA = 146.1087;
const BELOW_LAMBDA = { a: [-0.00757537, 0.00687483], b: [0.00379937, 0.00186557, 0.00488345] };
const ABOVE_LAMBDA = {
  a: [-0.00794605, 0.00507051],
  b: [-0.0303511, -0.0102326, -0.00300636, 0.00024072, -0.00245749, 0.00153454, -0.000308182],
};

/** ρ and dρ/dT from one pass over the equation. */
function densityAndSlope(T_K: number): readonly [number, number] {
  if (!(T_K >= RANGE_K[0] && T_K <= RANGE_K[1])) {
    throw new DomainError(`no helium density at ${T_K} K: the equation holds from 0 to 4.9 K`);
  }
  if (T_K < SWITCH_K) {
    let rho = LOW.rho0;
    let slope = 0;
    LOW.m.forEach((m, i) => {
      rho += m * T_K ** (i + 2);
      slope += (i + 2) * m * T_K ** (i + 1);
    });
    return [rho, slope];
  }
  const t = T_K - LAMBDA_TEMPERATURE_K;
  if (t === 0) return [RHO_LAMBDA, Number.NaN]; // the slope diverges logarithmically
  const { a, b } = t < 0 ? BELOW_LAMBDA : ABOVE_LAMBDA;
  const log = Math.log(Math.abs(t));
  let ratio = 1;
  let slope = 0;
  a.forEach((ai, i) => {
    ratio += ai * t ** (i + 1) * log;
    slope += ai * t ** i * ((i + 1) * log + 1);
  });
  b.forEach((bi, i) => {
    ratio += bi * t ** (i + 1);
    slope += (i + 1) * bi * t ** i;
  });
  return [RHO_LAMBDA * ratio, RHO_LAMBDA * slope];
}

/** @throws DomainError outside 0 to 4.9 K */
export function density_kg_per_m3(T_K: number): number {
  return densityAndSlope(T_K)[0];
}

/** @throws DomainError outside 0 to 4.9 K */
export function molarVolume_m3_per_mol(T_K: number): number {
  return HELIUM4_MOLAR_MASS.value / density_kg_per_m3(T_K);
}

/**
 * Expansion along the saturation line, −d ln ρ/dT, in 1/K. Negative between about 1.15 K and the lambda point.
 * Below 1.15 K the published values are calculated, not measured.
 * @throws DomainError outside 0 to 4.9 K
 */
export function thermalExpansion_per_K(T_K: number): number {
  const [rho, slope] = densityAndSlope(T_K);
  return -slope / rho;
}
