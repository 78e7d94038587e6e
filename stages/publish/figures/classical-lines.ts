import type { Separation } from "../../separate/types.js";

/** A point of a classical plot, with one standard uncertainty either way. */
export interface PlotPoint {
  readonly x: number;
  readonly y: number;
  readonly low: number;
  readonly high: number;
  /** Whether the line was laid through it. */
  readonly carries: boolean;
}

export interface PlotLine {
  readonly intercept: number;
  readonly slope: number;
}

/** The two lines of the graphical estimates, and the heat that each leaves to the other. */
export interface ClassicalLines {
  /** C/T³ against T²: J/(mol K⁴), J/(mol K⁶). Null where there is no graphical sound speed. */
  readonly phonon: PlotLine | null;
  /** ln of the reduced roton heat against 1/T. Null where there is no graphical gap. */
  readonly roton: PlotLine | null;
  /** On the fitted points, J/(mol K). */
  readonly phononHeat: Float64Array;
  readonly rotonHeat: Float64Array;
  readonly carriesPhonons: readonly boolean[];
  readonly carriesRotons: readonly boolean[];
}

// The rules of the graphical estimates in the separation: a point carries the line of the part that has half its
// heat, rotons from 0.7 K up.
const SHARE = 0.5;
const ROTONS_FROM_K = 0.7;
const ROUNDS = 40;

/** √T (3/4 + y + y²), y = Δ/kT. */
function shape(T_K: number, gap_K: number): number {
  const y = gap_K / T_K;
  return Math.sqrt(T_K) * (0.75 + y + y * y);
}

/**
 * A ∝ u₁⁻³: the fitted coefficient turns into the graphical one without the molar volume.
 * @returns J/(mol K⁴)
 */
function graphicalCoefficient(separation: Separation): number | null {
  const { phonon_coefficient: A, sound_speed: fitted, graphical } = separation;
  if (A === null || fitted === null || graphical.sound_speed === null) return null;
  return A.value * (fitted.value / graphical.sound_speed.value) ** 3;
}

/**
 * The whole lines behind the graphical u₁ and Δ. A separation names the intercept of one and the slope of the other;
 * least squares through the same points gives what is missing, each part taken off before the other is drawn.
 */
export function classicalLines(separation: Separation): ClassicalLines {
  const { T_K, Cv_J_per_mol_K: C, phonon_J_per_mol_K, roton_J_per_mol_K } = separation.curve;
  const A = graphicalCoefficient(separation);
  const gap_K = separation.graphical.roton_gap?.value ?? null;
  let phonon: PlotLine | null = null;
  let roton: PlotLine | null = null;
  let phononHeat = phonon_J_per_mol_K;
  let rotonHeat = roton_J_per_mol_K;
  let cold: number[] = [];
  let warm: number[] = [];
  const points = [...T_K.keys()];
  for (let round = 0; round < ROUNDS; round++) {
    if (A !== null) {
      cold = points.filter((i) => rotonHeat[i]! < SHARE * C[i]!);
      // With the intercept of the least-squares line given, its slope is the best one through that intercept.
      const xy = sum(cold, (i) => T_K[i]! ** 2 * ((C[i]! - rotonHeat[i]!) / T_K[i]! ** 3 - A));
      const xx = sum(cold, (i) => T_K[i]! ** 4);
      const slope = xx > 0 ? xy / xx : 0;
      phonon = { intercept: A, slope };
      phononHeat = T_K.map((T) => T ** 3 * (A + slope * T * T));
    }
    if (gap_K !== null) {
      warm = points.filter((i) => T_K[i]! > ROTONS_FROM_K && C[i]! - phononHeat[i]! > SHARE * C[i]!);
      if (warm.length === 0) break;
      const level = (i: number) =>
        Math.log((C[i]! - phononHeat[i]!) / shape(T_K[i]!, gap_K)) + gap_K / T_K[i]!;
      const intercept = sum(warm, level) / warm.length;
      roton = { intercept, slope: -gap_K };
      rotonHeat = T_K.map((T) => Math.exp(intercept - gap_K / T) * shape(T, gap_K));
    }
  }
  return {
    phonon,
    roton,
    phononHeat,
    rotonHeat,
    carriesPhonons: points.map((i) => cold.includes(i)),
    carriesRotons: points.map((i) => warm.includes(i)),
  };
}

function sum(rows: readonly number[], of: (i: number) => number): number {
  return rows.reduce((total, i) => total + of(i), 0);
}

/** As measured, C/T³ is shown from where rotons are seen in it until they have added so much of C. */
const ROTON_SHARE_SEEN = 0.01;
const ROTON_SHARE_SHOWN = 0.2;
/** Below this share the roton part is the difference of two nearly equal numbers. */
const ROTON_SHARE_LEAST = 0.03;

/** C/T³ in mJ mol⁻¹ K⁻⁴ against T² in K²: as measured, and (carrying the line) with the rotons taken off. */
export function phononPlotPoints(separation: Separation, lines: ClassicalLines): PlotPoint[] {
  const { T_K, Cv_J_per_mol_K: C, u_repeat_J_per_mol_K: u } = separation.curve;
  const point = (i: number, heat: number, carries: boolean): PlotPoint => {
    const scale = 1e3 / T_K[i]! ** 3;
    return {
      x: T_K[i]! ** 2,
      y: heat * scale,
      low: (heat - u[i]!) * scale,
      high: (heat + u[i]!) * scale,
      carries,
    };
  };
  const rows = [...T_K.keys()];
  const measured = rows
    .filter((i) => {
      const share = lines.rotonHeat[i]! / C[i]!;
      return share < ROTON_SHARE_SHOWN && (share > ROTON_SHARE_SEEN || !lines.carriesPhonons[i]);
    })
    .map((i) => point(i, C[i]!, false));
  const stripped = rows
    .filter((i) => lines.carriesPhonons[i])
    .map((i) => point(i, C[i]! - lines.rotonHeat[i]!, true));
  return [...measured, ...stripped];
}

/** ln[(C − C_ph)/(√T (3/4 + y + y²))] against 1/T, y = Δ/kT at the given gap; C in J/(mol K). */
export function rotonPlotPoints(separation: Separation, lines: ClassicalLines, gap_K: number): PlotPoint[] {
  const { T_K, Cv_J_per_mol_K: C, u_repeat_J_per_mol_K: u } = separation.curve;
  return [...T_K.keys()].flatMap((i) => {
    const heat = C[i]! - lines.phononHeat[i]!;
    // Closer to nothing than twice its uncertainty, a logarithm says little and its bar has no lower end.
    if (heat < ROTON_SHARE_LEAST * C[i]! || heat < 2 * u[i]!) return [];
    const reduced = shape(T_K[i]!, gap_K);
    return [
      {
        x: 1 / T_K[i]!,
        y: Math.log(heat / reduced),
        low: Math.log((heat - u[i]!) / reduced),
        high: Math.log((heat + u[i]!) / reduced),
        carries: lines.carriesRotons[i]!,
      },
    ];
  });
}
