import { GAS_CONSTANT } from "../constants.js";

/**
 * Published low-temperature heat capacities of what cells are made of, each with range, uncertainty and source.
 * Where a source states no uncertainty, `relativeU` is our own judgement and says so; where it states no lower
 * end of its range, 0.1 K is our own choice.
 */
interface Common {
  readonly molarMass_kg_per_mol: number;
  readonly range_K: readonly [number, number];
  /** Relative standard uncertainty of the whole value. */
  readonly relativeU: number;
  readonly uBasis: string;
  readonly source: string;
}

/** C = Σ coefficient·T^power, J/(mol K). */
export interface PowerSum extends Common {
  readonly form: "powers";
  readonly terms: readonly { readonly power: number; readonly coefficient_J_per_mol: number }[];
}
/** log₁₀(c) = Σ aᵢ(log₁₀T)ⁱ, c in J/(kg K). */
export interface LogPolynomial extends Common {
  readonly form: "log-polynomial";
  readonly a: readonly number[];
}
/** Superconductor: C = γT_c·p·e^{−qT_c/T} + βT³, J/(mol K). */
export interface Superconductor extends Common {
  readonly form: "superconductor";
  readonly gammaTc_J_per_mol_K: number;
  readonly prefactor: number;
  readonly exponent: number;
  readonly criticalTemperature_K: number;
  readonly beta_J_per_mol_K4: number;
}
export type Material = PowerSum | LogPolynomial | Superconductor;

const R = GAS_CONSTANT.value;
/** Debye's T³ coefficient, 12π⁴Rn/(5θ³), J/(mol K⁴); `atoms` per formula. */
function debye(theta_K: number, atoms = 1): number {
  return (12 * Math.PI ** 4 * R * atoms) / (5 * theta_K ** 3);
}
/** γT + βT³ with γ in J/(mol K²). */
function metal(gamma: number, theta_K: number) {
  return [
    { power: 1, coefficient_J_per_mol: gamma },
    { power: 3, coefficient_J_per_mol: debye(theta_K) },
  ];
}

const MARTIN = "D. L. Martin, Phys. Rev. B 8, 5357 (1973)";
const PHILLIPS = "N. E. Phillips, Phys. Rev. 114, 676 (1959)";
const O_NEAL = "H. R. O'Neal and N. E. Phillips, Phys. Rev. 137, A748 (1965)";
const KEESOM = "P. H. Keesom and G. Seidel, Phys. Rev. 113, 33 (1959)";
const BARUCCI = "M. Barucci et al., Cryogenics 46, 767 (2006)";
const NIST = "NIST Cryogenic Material Properties compilation";
const NONE_STATED = "none stated; our judgement";
const T3_LIMIT =
  "stated errors of γ and θ, widened; range cut at θ/70, where the T³ law still holds (common practice)";

export const MATERIALS = {
  copper: {
    form: "powers",
    molarMass_kg_per_mol: 63.546e-3,
    range_K: [0.3, 25],
    relativeU: 5e-3,
    uBasis: "0.5 %, from memory; it covers the older temperature scale, a few 0.1 %",
    source: "1965 Calorimetry Conference copper: D. W. Osborne et al., Rev. Sci. Instrum. 38, 159 (1967)",
    terms: [
      { power: 1, coefficient_J_per_mol: 0.69434e-3 },
      { power: 3, coefficient_J_per_mol: 0.047548e-3 },
      { power: 5, coefficient_J_per_mol: 1.6314e-9 },
      { power: 7, coefficient_J_per_mol: 9.4786e-11 },
      { power: 9, coefficient_J_per_mol: -1.3639e-13 },
      { power: 11, coefficient_J_per_mol: 5.3898e-17 },
    ],
  },
  "copper-ofhc": {
    form: "log-polynomial",
    molarMass_kg_per_mol: 63.546e-3,
    range_K: [4, 300],
    relativeU: 0.05,
    uBasis: NONE_STATED,
    source: NIST,
    a: [-1.91844, -0.15973, 8.61013, -18.996, 21.9661, -12.7328, 3.54322, -0.3797],
  },
  silver: {
    form: "powers",
    molarMass_kg_per_mol: 107.8682e-3,
    range_K: [0.4, 3.2],
    relativeU: 3e-3,
    uBasis: T3_LIMIT,
    source: MARTIN,
    terms: metal(0.64e-3, 226.6),
  },
  gold: {
    form: "powers",
    molarMass_kg_per_mol: 196.96657e-3,
    range_K: [0.4, 2.3],
    relativeU: 4e-3,
    uBasis: T3_LIMIT,
    source: MARTIN,
    terms: metal(0.689e-3, 161.8),
  },
  "aluminium-normal": {
    form: "powers",
    molarMass_kg_per_mol: 26.981538e-3,
    range_K: [0.11, 4],
    relativeU: 0.01,
    uBasis: NONE_STATED,
    source: `${PHILLIPS}; below 1.163 K only in a magnetic field`,
    terms: metal(1.35e-3, 427.7),
  },
  "aluminium-superconducting": {
    form: "superconductor",
    molarMass_kg_per_mol: 26.981538e-3,
    range_K: [0.25 * 1.163, 0.5 * 1.163],
    relativeU: 0.05,
    uBasis: NONE_STATED,
    source: PHILLIPS,
    gammaTc_J_per_mol_K: 1.35e-3 * 1.163,
    prefactor: 7.1,
    exponent: 1.34,
    criticalTemperature_K: 1.163,
    beta_J_per_mol_K4: debye(427.7),
  },
  "indium-normal": {
    form: "powers",
    molarMass_kg_per_mol: 114.818e-3,
    range_K: [0.1, 0.8],
    relativeU: 0.01,
    uBasis: NONE_STATED,
    source: O_NEAL,
    terms: [
      { power: -2, coefficient_J_per_mol: 0.00101e-3 },
      { power: 1, coefficient_J_per_mol: 1.69e-3 },
      { power: 3, coefficient_J_per_mol: 1.42e-3 },
    ],
  },
  "indium-superconducting": {
    form: "powers",
    molarMass_kg_per_mol: 114.818e-3,
    range_K: [0.1, 0.35],
    relativeU: 0.02,
    uBasis: NONE_STATED,
    source: O_NEAL,
    terms: [{ power: 3, coefficient_J_per_mol: 1.22e-3 }],
  },
  "tin-superconducting": {
    form: "powers",
    molarMass_kg_per_mol: 118.71e-3,
    range_K: [0.1, 0.45],
    relativeU: 0.02,
    uBasis: NONE_STATED,
    source: O_NEAL,
    terms: [{ power: 3, coefficient_J_per_mol: 0.246e-3 }],
  },
  silicon: {
    form: "powers",
    molarMass_kg_per_mol: 28.085e-3,
    range_K: [1.2, 4.2],
    relativeU: 0.01,
    uBasis: NONE_STATED,
    source: KEESOM,
    terms: [{ power: 3, coefficient_J_per_mol: debye(636) }],
  },
  germanium: {
    form: "powers",
    molarMass_kg_per_mol: 72.63e-3,
    range_K: [0.5, 4.2],
    relativeU: 0.01,
    uBasis: NONE_STATED,
    source: KEESOM,
    terms: [{ power: 3, coefficient_J_per_mol: debye(363) }],
  },
  // Per gram in the source: a "molar mass" of 1 g makes the sum per mole one per gram.
  torlon: {
    form: "powers",
    molarMass_kg_per_mol: 1e-3,
    range_K: [0.15, 1],
    relativeU: 0.15,
    uBasis: "fit errors 1 %, but the source's law above 1 K starts 20 % below the end of this one",
    source: BARUCCI,
    terms: [
      { power: 1.28, coefficient_J_per_mol: 5.41e-6 },
      { power: 3, coefficient_J_per_mol: 2.82e-5 },
    ],
  },
  "torlon-above-1K": {
    form: "powers",
    molarMass_kg_per_mol: 1e-3,
    range_K: [1, 4.2],
    relativeU: 0.15,
    uBasis: "fit errors 1 %, but the source's law below 1 K ends 25 % above the start of this one",
    source: BARUCCI,
    terms: [{ power: 3.32, coefficient_J_per_mol: 2.68e-5 }],
  },
  "apiezon-n": {
    form: "log-polynomial",
    molarMass_kg_per_mol: 1e-3,
    range_K: [1, 200],
    relativeU: 0.05,
    uBasis: NONE_STATED,
    source: NIST,
    a: [-1.61975, 3.10923, -0.712719, 4.93675, -9.37993, 7.58304, -3.11048, 0.628309, -0.0482634],
  },
  sapphire: {
    form: "powers",
    molarMass_kg_per_mol: 101.961e-3,
    range_K: [0.1, 15],
    relativeU: 0.03,
    uBasis: "3·u(θ)/θ with θ = 1040 ± 10 K",
    source: "Debye temperature of Al₂O₃, handbook value from memory",
    terms: [{ power: 3, coefficient_J_per_mol: debye(1040, 5) }],
  },
  quartz: {
    form: "powers",
    molarMass_kg_per_mol: 60.084e-3,
    range_K: [0.1, 8],
    relativeU: 0.08,
    uBasis: "3·u(θ)/θ with θ = 555 ± 15 K",
    source: "Debye temperature of crystalline SiO₂, elastic value from memory",
    terms: [{ power: 3, coefficient_J_per_mol: debye(555, 3) }],
  },
} as const satisfies Readonly<Record<string, Material>>;

export type MaterialName = keyof typeof MATERIALS;
