import { DomainError } from "../errors.js";
import { BOLTZMANN, GAS_CONSTANT, HELIUM4_ATOMIC_MASS, PLANCK_REDUCED } from "./constants.js";

/**
 * ITS-90 vapour-pressure equations, T₉₀/K = A₀ + Σ Aᵢ[(ln(p/Pa) − B)/C]ⁱ.
 * H. Preston-Thomas, Metrologia 27, 3 and 107 (1990), Table 3. They define the scale: no uncertainty of their own.
 */
interface VapourPressureEquation {
  readonly range_K: readonly [number, number];
  /** The pressures the equation gives at the ends of its range. */
  readonly range_Pa: readonly [number, number];
  readonly A: readonly number[];
  readonly B: number;
  readonly C: number;
}
const HELIUM3: VapourPressureEquation = {
  range_K: [0.65, 3.2],
  range_Pa: [115.905619, 101662.101],
  A: [1.053447, 0.980106, 0.67638, 0.372692, 0.151656, -0.002263, 0.006596, 0.088966, -0.00477, -0.054943],
  B: 7.3,
  C: 4.3,
};
const HELIUM4_II: VapourPressureEquation = {
  range_K: [1.25, 2.1768],
  range_Pa: [114.734339, 5041.815],
  A: [1.392408, 0.527153, 0.166756, 0.050988, 0.026514, 0.001975, -0.017976, 0.005409, 0.013259],
  B: 5.6,
  C: 2.9,
};
const HELIUM4_I: VapourPressureEquation = {
  range_K: [2.1768, 5],
  range_Pa: [5041.815, 196016.5329],
  A: [3.146631, 1.357655, 0.413923, 0.091159, 0.016349, 0.001826, -0.004325, -0.004973],
  B: 10.3,
  C: 1.9,
};

/** The ends of a range belong to it, though they are printed with seven to ten digits. */
const SLACK = 1e-6;

/** T, dT/d(ln p) and d²T/d(ln p)² by Horner's rule. */
function polynomial(equation: VapourPressureEquation, lnp: number) {
  const x = (lnp - equation.B) / equation.C;
  let T_K = 0;
  let slope = 0;
  let halfBend = 0;
  for (let i = equation.A.length - 1; i >= 0; i--) {
    halfBend = halfBend * x + slope;
    slope = slope * x + T_K;
    T_K = T_K * x + equation.A[i]!;
  }
  return { T_K, slope: slope / equation.C, bend: (2 * halfBend) / equation.C ** 2 };
}

function solveForPressure(equation: VapourPressureEquation, T_K: number): number {
  // ln p is nearly linear in 1/T, so Newton from the chord between the range's ends converges in a few steps.
  const [T1, T2] = equation.range_K;
  const [p1, p2] = equation.range_Pa;
  const share = (1 / T1 - 1 / T_K) / (1 / T1 - 1 / T2);
  let lnp = Math.log(p1) + share * Math.log(p2 / p1);
  for (let step = 0; step < 50; step++) {
    const here = polynomial(equation, lnp);
    const change = (T_K - here.T_K) / here.slope;
    lnp += change;
    if (Math.abs(change) < 1e-13) break;
  }
  return Math.exp(lnp);
}

function within([low, high]: readonly [number, number], value: number): boolean {
  return value >= low * (1 - SLACK) && value <= high * (1 + SLACK);
}

export type HeliumIsotope = "helium-3" | "helium-4";

function equationsOf(isotope: HeliumIsotope): readonly VapourPressureEquation[] {
  return isotope === "helium-3" ? [HELIUM3] : [HELIUM4_II, HELIUM4_I];
}

/**
 * T₉₀ of helium under its own vapour.
 * @throws DomainError outside the scale's range: ³He 115.9 Pa to 101.66 kPa, ⁴He 114.73 Pa to 196.0 kPa
 */
export function vapourPressureTemperature_K(pressure_Pa: number, isotope: HeliumIsotope): number {
  const equation = equationsOf(isotope).find((candidate) => within(candidate.range_Pa, pressure_Pa));
  if (equation === undefined) {
    throw new DomainError(`ITS-90 gives no ${isotope} temperature for ${pressure_Pa} Pa`);
  }
  return polynomial(equation, Math.log(pressure_Pa)).T_K;
}

function equationOf(T_K: number, isotope: HeliumIsotope): VapourPressureEquation {
  const equation = equationsOf(isotope).find((candidate) => within(candidate.range_K, T_K));
  if (equation === undefined) throw new DomainError(`ITS-90 gives no ${isotope} vapour pressure at ${T_K} K`);
  return equation;
}

/**
 * Vapour pressure on the ITS-90, in Pa.
 * @throws DomainError outside the scale's range: ³He 0.65 to 3.2 K, ⁴He 1.25 to 5.0 K
 */
export function vapourPressure_Pa(T_K: number, isotope: HeliumIsotope): number {
  return solveForPressure(equationOf(T_K, isotope), T_K);
}

/** Binding of an atom in the liquid at T = 0, per mole: Donnelly and Barenghi 1998, chapter 16. */
export const LATENT_HEAT_AT_ZERO_J_PER_MOL = 59.83;

/** The saturation line at one temperature. */
export interface SaturationLine {
  readonly pressure_Pa: number;
  readonly slope_Pa_per_K: number;
  readonly curvature_Pa_per_K2: number;
}

/**
 * Vapour pressure of ⁴He from 0 to 5 K with its two derivatives: the ITS-90 where it is defined (1.25 K up), and below
 * it the monatomic ideal gas in balance with a liquid of no entropy, p = kT (mkT/2πħ²)^{3/2} e^{−L₀/RT}.
 *
 * The lower formula meets the ITS-90 within 0.02 % at 1.25 K and the published table within 0.1 % from 0.65 K,
 * since what it neglects (entropy of the liquid, second virial coefficient) nearly cancels.
 * @throws DomainError outside 0 < T ≤ 5 K
 */
export function helium4SaturationLine(T_K: number): SaturationLine {
  if (T_K >= HELIUM4_II.range_K[0]) return scaleLine(T_K);
  if (!(T_K > 0)) throw new DomainError(`no vapour pressure at ${T_K} K`);
  const k = BOLTZMANN.value;
  const binding = LATENT_HEAT_AT_ZERO_J_PER_MOL / (GAS_CONSTANT.value * T_K);
  const perVolume =
    ((HELIUM4_ATOMIC_MASS.value * k * T_K) / (2 * Math.PI * PLANCK_REDUCED.value ** 2)) ** 1.5;
  const pressure_Pa = k * T_K * perVolume * Math.exp(-binding);
  const lambda = 2.5 + binding; // d ln p/d ln T
  return {
    pressure_Pa,
    slope_Pa_per_K: (pressure_Pa * lambda) / T_K,
    curvature_Pa_per_K2: (pressure_Pa * (lambda * lambda - lambda - binding)) / (T_K * T_K),
  };
}

/** Only the pressure of {@link helium4SaturationLine}. */
export function helium4VapourPressure_Pa(T_K: number): number {
  return helium4SaturationLine(T_K).pressure_Pa;
}

/** The ITS-90 polynomial gives T(ln p); its inverse's derivatives follow. */
function scaleLine(T_K: number): SaturationLine {
  const pressure_Pa = vapourPressure_Pa(T_K, "helium-4");
  const { slope, bend } = polynomial(equationOf(T_K, "helium-4"), Math.log(pressure_Pa));
  const logSlope = 1 / slope;
  return {
    pressure_Pa,
    slope_Pa_per_K: pressure_Pa * logSlope,
    curvature_Pa_per_K2: pressure_Pa * (logSlope ** 2 - bend * logSlope ** 3),
  };
}
