import { correctFiniteStep } from "./finite-step.js";
import type { CommonSource, HeatCapacity } from "./types.js";

/** A source that moves C in proportion to something a pulse at a time: the change is `relative`·C. */
export interface RelativeSource {
  readonly name: string;
  readonly title: string;
  /** Length n of the night's points, per standard uncertainty, with its sign. */
  readonly relative: Float64Array;
}

/** Molar heat capacity points of one night. Every column has length n. */
export interface NightPoints {
  readonly run: string;
  readonly pulse: Int32Array;
  readonly T_K: Float64Array;
  readonly Cv_J_per_mol_K: Float64Array;
  readonly u_repeat_J_per_mol_K: Float64Array;
  readonly dT_K: Float64Array;
  readonly addenda_share: Float64Array;
  /**
   * d/dT, per mole, of what was subtracted by calculation: it was taken at the temperature read, so an error of the
   * scale moves it too. 0 where the addenda were measured on the same thermometer.
   */
  readonly calculated_slope_J_per_mol_K2: Float64Array;
  /** Sources that scale with C, and sources given as they are. Same names in every night, or none. */
  readonly relativeSources: readonly RelativeSource[];
  readonly absoluteSources: readonly CommonSource[];
}

export interface CombineOptions {
  /** Standard uncertainty of the temperature scale, common to all points. */
  readonly u_temperature_K: number;
}

/**
 * Nights into one set of points in order of temperature; each point keeps its night and pulse. Corrects for the
 * finite step, and writes every common source as a column of Cv changes. Columns that scale with C are taken from
 * the smooth curve, not from the scattered points: a fit whose covariance follows the scatter is drawn below its
 * data (Peelle's puzzle; Hanson, Kawano and Talou, AIP Conf. Proc. 769, 304 (2005)).
 */
export function combineNights(nights: readonly NightPoints[], options: CombineOptions): HeatCapacity {
  const index = nights.flatMap((night, k) => Array.from(night.T_K, (T, i) => ({ T, k, i })));
  index.sort((a, b) => a.T - b.T || a.k - b.k || a.i - b.i);
  const gather = (pick: (night: NightPoints) => ArrayLike<number>): Float64Array =>
    Float64Array.from(index, ({ k, i }) => pick(nights[k]!)[i]!);

  const T_K = gather((night) => night.T_K);
  const u_repeat = gather((night) => night.u_repeat_J_per_mol_K);
  const dT_K = gather((night) => night.dT_K);
  const measured = gather((night) => night.Cv_J_per_mol_K);
  const { C, curve } = correctFiniteStep(T_K, measured, u_repeat, dT_K);
  const smooth = curve.C.map((value, i) => (Number.isFinite(value) ? value : C[i]!));

  const calculatedSlope = gather((night) => night.calculated_slope_J_per_mol_K2);
  const sources: CommonSource[] = [];
  const names = (pick: (night: NightPoints) => readonly { name: string; title: string }[]) =>
    new Map(nights.flatMap((night) => pick(night).map(({ name, title }) => [name, title] as const)));
  if (options.u_temperature_K > 0) {
    sources.push({
      name: "temperature_scale",
      title: "thermometer scale",
      // A thermometer that reads high by u puts the point where C is larger: at its stated T, C comes out low.
      s_Cv_J_per_mol_K: curve.slope.map((slope, i) =>
        Number.isFinite(slope) ? -(slope + calculatedSlope[i]!) * options.u_temperature_K : 0,
      ),
    });
  }
  for (const [name, title] of names((night) => night.relativeSources)) {
    const relative = gather(
      (night) => night.relativeSources.find((source) => source.name === name)?.relative ?? zeros(night),
    );
    sources.push({ name, title, s_Cv_J_per_mol_K: relative.map((value, i) => value * smooth[i]!) });
  }
  for (const [name, title] of names((night) => night.absoluteSources)) {
    const s_Cv_J_per_mol_K = gather(
      (night) =>
        night.absoluteSources.find((source) => source.name === name)?.s_Cv_J_per_mol_K ?? zeros(night),
    );
    sources.push({ name, title, s_Cv_J_per_mol_K });
  }
  const moving = sources.filter((source) => source.s_Cv_J_per_mol_K.some((s) => s !== 0));

  return {
    T_K,
    Cv_J_per_mol_K: C,
    u_repeat_J_per_mol_K: u_repeat,
    u_Cv_J_per_mol_K: u_repeat.map((u, i) =>
      Math.hypot(u, ...moving.map((source) => source.s_Cv_J_per_mol_K[i]!)),
    ),
    dT_K,
    addenda_share: gather((night) => night.addenda_share),
    run: index.map(({ k }) => nights[k]!.run),
    pulse: Int32Array.from(index, ({ k, i }) => nights[k]!.pulse[i]!),
    sources: moving,
  };
}

const zeros = (night: NightPoints): Float64Array => new Float64Array(night.T_K.length);
