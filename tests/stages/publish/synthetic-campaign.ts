import { normal, pcg32 } from "../../../stages/numerics/random.js";
import { phononSeries_J_per_mol } from "../../../stages/physics/phonon.js";
import { rotonShape } from "../../../stages/physics/roton.js";
import { CAUTIONS } from "../../../stages/publish/cautions.js";
import type { CampaignReport, NightReport } from "../../../stages/publish/types.js";
import {
  PulseFlag,
  type PulseMethod,
  type PulsePicture,
  type PulseTable,
} from "../../../stages/pulses/types.js";

/** Invented, of the size of the real ones. */
const TRUTH = { u1: 238.3, gap_K: 8.68, amplitude: 19.6, molarVolume: 27.58e-6, amount_mol: 0.1093 };

const series = phononSeries_J_per_mol({
  soundSpeed_m_per_s: TRUTH.u1,
  molarVolume_m3_per_mol: TRUTH.molarVolume,
  a2_m2: 1.55e-20,
  a3_m3: 0,
  a4_m4: 0,
});
const phonons = (T: number) => series[0]! * T ** 3 + series[2]! * T ** 5 + series[4]! * T ** 7;
const rotons = (T: number) => TRUTH.amplitude * rotonShape(T, TRUTH.gap_K);
const addenda_J_per_K = (T: number) => 2e-5 * T + 3e-5 * T ** 3;

export interface CampaignSize {
  readonly nights: number;
  readonly pulsesPerNight: number;
}

/** Rows of every night that are left out: one by a person, one for want of samples. */
const VETOED = 3;
const NOT_FITTED = 8;

/** A campaign from closed forms and seeded noise: sample nights, an empty-cell night and one that failed. */
export function syntheticCampaign(size: CampaignSize): CampaignReport {
  const gauss = normal(pcg32(20261114));
  const sampleNights = Array.from({ length: size.nights }, (_, i) =>
    sampleNight(`2026-11-${String(10 + i).padStart(2, "0")}-a`, i, size.pulsesPerNight, gauss),
  );
  const empty = {
    ...sampleNight("2026-11-02-empty", 0, 6, gauss),
    kind: "empty" as const,
    status: "reused" as const,
  };
  const failed: NightReport = {
    run: "2026-11-30-a",
    status: "failed",
    kind: "sample",
    pulses: 0,
    used: 0,
    vetoed: 0,
    flags: [],
    notes: [],
    table: null,
    pictures: [],
    error: "thermometer.csv: the log is empty",
  };

  const rows = sampleNights
    .flatMap((night) =>
      Array.from(night.table!.T_K, (T, i) => ({
        T,
        C: (night.table!.C_total_J_per_K[i]! - addenda_J_per_K(T)) / TRUTH.amount_mol,
        u: night.table!.u_C_total_J_per_K[i]! / TRUTH.amount_mol,
        dT: night.table!.dT_K[i]!,
        share: addenda_J_per_K(T) / night.table!.C_total_J_per_K[i]!,
        run: night.run,
        pulse: night.table!.pulse[i]!,
        used: night.table!.used[i] === 1,
      })),
    )
    .filter(({ used }) => used)
    .sort((a, b) => a.T - b.T);
  const column = (of: (row: (typeof rows)[number]) => number) => Float64Array.from(rows, of);
  const T_K = column(({ T }) => T);
  const Cv = column(({ C }) => C);
  const u_repeat = column(({ u }) => u);
  const sources = [
    { name: "amount", title: "amount of helium", s_Cv_J_per_mol_K: Cv.map((C) => -0.0036 * C) },
    {
      name: "addenda_1",
      title: "addenda, first principal part",
      s_Cv_J_per_mol_K: T_K.map((T) => -2e-6 * T),
    },
    {
      name: "temperature_scale",
      title: "thermometer calibration",
      s_Cv_J_per_mol_K: Cv.map((C, i) => (C * 0.0012) / T_K[i]!),
    },
  ];
  const u_Cv = u_repeat.map((u, i) => Math.hypot(u, ...sources.map((s) => s.s_Cv_J_per_mol_K[i]!)));

  const inside = rows.filter(({ T }) => T >= 0.35 && T <= 1.15);
  const windowed = (of: (row: (typeof rows)[number]) => number) => Float64Array.from(inside, of);
  const chi_squared = inside.reduce((sum, { T, C, u }) => sum + ((C - phonons(T) - rotons(T)) / u) ** 2, 0);
  const soundSpeed = { value: 238.12, standard_uncertainty: 0.61, unit: "m/s" };
  const gap = { value: 8.683, standard_uncertainty: 0.011, unit: "K" };

  return {
    campaign: "fjord-7",
    cell: "thimble",
    sample: "fill-7",
    substance: "helium-4",
    condition: "constant volume",
    amount: "0.1093 ± 0.0004 mol",
    molar_volume: "27.58 ± 0.03 cm3/mol",
    temperature_scale: "ITS-90",
    publication: { authors: [] },
    configuration: "campaign: fjord-7\nreduction:\n  separate:\n    window: [0.35 K, 1.15 K]\n",
    provenance: {
      version: "0.1.0",
      inputs: sampleNights.map(({ run }, i) => ({
        file: `nights/${run}/thermometer.csv`,
        sha256: String(i).repeat(64).slice(0, 64),
      })),
      constants: "CODATA 2022",
      seed: 7,
    },
    nights: [empty, ...sampleNights, failed],
    dataset: {
      T_K,
      Cv_J_per_mol_K: Cv,
      u_repeat_J_per_mol_K: u_repeat,
      u_Cv_J_per_mol_K: u_Cv,
      dT_K: column(({ dT }) => dT),
      addenda_share: column(({ share }) => share),
      run: rows.map(({ run }) => run),
      pulse: Int32Array.from(rows, ({ pulse }) => pulse),
      sources,
    },
    binned: {
      T_K: Float64Array.of(0.4, 0.5),
      Cv_J_per_mol_K: Float64Array.of(0.005, 0.0097),
      u_Cv_J_per_mol_K: Float64Array.of(1e-5, 2e-5),
      points: Int32Array.of(9, 11),
    },
    separation: {
      model: "whole-curve",
      phonon_powers: [3, 5, 7],
      points: inside.length,
      window: { from: 0.35, to: 1.15, unit: "K" },
      sound_speed: soundSpeed,
      roton_gap: gap,
      phonon_coefficient: { value: series[0]!, standard_uncertainty: 0.0006, unit: "J/(mol.K4)" },
      roton_amplitude: { value: TRUTH.amplitude, standard_uncertainty: 0.7, unit: "J/(mol.K1.5)" },
      parameters: [
        { name: "sound speed", ...soundSpeed },
        { name: "roton gap", ...gap },
        { name: "roton amplitude", value: TRUTH.amplitude, standard_uncertainty: 0.7, unit: "J/(mol.K1.5)" },
      ],
      chi_squared,
      degrees_of_freedom: inside.length - 3,
      aicc: chi_squared + 6,
      correlation: {
        names: ["sound speed", "roton gap", "roton amplitude"],
        matrix: [
          [1, -0.412, -0.377],
          [-0.412, 1, 0.981],
          [-0.377, 0.981, 1],
        ],
      },
      graphical: {
        sound_speed: { value: 239.4, standard_uncertainty: 1.4, unit: "m/s" },
        roton_gap: { value: 8.72, standard_uncertainty: 0.05, unit: "K" },
      },
      alternatives: [
        {
          model: "landau",
          phonon_powers: [3, 5, 7],
          sound_speed: { ...soundSpeed, value: 238.4 },
          roton_gap: { ...gap, value: 8.731 },
          chi_squared: chi_squared + 3,
          degrees_of_freedom: inside.length - 5,
          aicc: chi_squared + 13.2,
        },
        {
          model: "landau",
          phonon_powers: [3],
          sound_speed: { ...soundSpeed, value: 243.9 },
          roton_gap: { ...gap, value: 8.89 },
          chi_squared: chi_squared * 4,
          degrees_of_freedom: inside.length - 3,
          aicc: chi_squared * 4 + 6,
        },
      ],
      missing: [],
      influences: [],
      curve: {
        row: Int32Array.from(inside, (point) => rows.indexOf(point)),
        T_K: windowed(({ T }) => T),
        Cv_J_per_mol_K: windowed(({ C }) => C),
        u_repeat_J_per_mol_K: windowed(({ u }) => u),
        fit_J_per_mol_K: windowed(({ T }) => phonons(T) + rotons(T)),
        phonon_J_per_mol_K: windowed(({ T }) => phonons(T)),
        roton_J_per_mol_K: windowed(({ T }) => rotons(T)),
      },
    },
    budget: {
      lines: [
        {
          name: "repeatability",
          title: "repeatability",
          relative_Cv: 0.0061,
          sound_speed_m_per_s: 0.21,
          roton_gap_K: 0.009,
          share_sound_speed: 0.12,
          share_roton_gap: 0.67,
        },
        {
          name: "amount",
          title: "amount of helium",
          relative_Cv: 0.0036,
          sound_speed_m_per_s: 0.29,
          roton_gap_K: 0.0001,
          share_sound_speed: 0.23,
          share_roton_gap: 0.0001,
        },
        {
          name: "molar_volume",
          title: "molar volume",
          relative_Cv: null,
          sound_speed_m_per_s: 0.09,
          roton_gap_K: 0,
          share_sound_speed: 0.02,
          share_roton_gap: 0,
        },
        {
          name: "temperature_scale",
          title: "thermometer calibration",
          relative_Cv: 0.002,
          sound_speed_m_per_s: -0.48,
          roton_gap_K: 0.0063,
          share_sound_speed: 0.63,
          share_roton_gap: 0.3299,
        },
      ],
      u_sound_speed_m_per_s: 0.61,
      u_roton_gap_K: 0.011,
    },
    between_nights: {
      nights: sampleNights.map(({ run }, i) => ({
        run,
        points: size.pulsesPerNight,
        relative_offset: 0.0004 * (i - 2),
        u_relative_offset: 0.00095,
      })),
      birge_ratio: 0.91,
    },
    addenda: {
      description: "Empty cell, one night, fitted with powers 1 and 3.",
      mean_share: 0.034,
      coefficients: [
        { power: 1, value: 2e-5, u: 3e-7 },
        { power: 3, value: 3e-5, u: 4e-7 },
      ],
    },
    gates: [
      { name: "points", passed: true, words: `${rows.length} points; at least 30 wanted` },
      { name: "fit", passed: true, words: "χ²/ν = 1.0; at most 2 wanted" },
    ],
    cautions: CAUTIONS,
    comparisons: [
      {
        quantity: "sound speed",
        value: 238.3,
        u: 0.1,
        unit: "m/s",
        source: "ultrasound, extrapolated to T = 0",
        difference: -0.18,
        normalisedDifference: -0.29,
      },
      {
        quantity: "roton gap",
        value: 8.608,
        u: 0.012,
        unit: "K",
        source: "neutrons, below 1.1 K",
        difference: 0.075,
        normalisedDifference: 4.6,
      },
    ],
  };
}

function sampleNight(run: string, index: number, pulses: number, gauss: () => number): NightReport {
  const T_K = Float64Array.from(
    { length: pulses },
    (_, i) => 0.32 * (1.2 / 0.32) ** ((i + 0.18 * index) / pulses),
  );
  const total = T_K.map((T) => TRUTH.amount_mol * (phonons(T) + rotons(T)) + addenda_J_per_K(T));
  const u_C = total.map((C) => 0.006 * C);
  const C_total = total.map((C, i) => C + u_C[i]! * gauss());
  const dT_K = T_K.map((T) => 0.02 * T);
  const flags: Readonly<Record<number, number>> = {
    [VETOED]: PulseFlag.Vetoed,
    [NOT_FITTED]: PulseFlag.SamplesMissing,
    5: PulseFlag.Spikes | PulseFlag.Truncated,
  };
  const flag = Int32Array.from(T_K, (_, i) => flags[i] ?? 0);
  const used = Uint8Array.from(T_K, (_, i) => (i === VETOED || i === NOT_FITTED ? 0 : 1));
  const method = Array.from(T_K, (_, i) => (i % 3 === 0 ? "two-body" : "drift") as PulseMethod);
  const constant = (value: number) => Float64Array.from(T_K, () => value);
  const table: PulseTable = {
    pulse: Int32Array.from(T_K, (_, i) => i + 1),
    start_s: Float64Array.from(T_K, (_, i) => 600 * (i + 1)),
    duration_s: constant(8),
    T_before_K: T_K.map((T, i) => T - dT_K[i]! / 2),
    T_after_K: T_K.map((T, i) => T + dT_K[i]! / 2),
    T_K,
    dT_K,
    mean_over_K: dT_K,
    u_dT_K: constant(1.2e-5),
    Q_J: C_total.map((C, i) => C * dT_K[i]!),
    u_Q_J: C_total.map((C, i) => 1e-4 * C * dT_K[i]!),
    lead_heat_J: constant(0),
    heater_resistance_Ohm: constant(412.3),
    C_total_J_per_K: C_total,
    u_C_total_J_per_K: u_C,
    method,
    flag,
    reason: Array.from(T_K, (_, i) => (i === VETOED ? "door slammed" : "")),
    used,
    noise_K: constant(4.2e-5 * (1 + 0.1 * index)),
    drift_K_per_s: constant(1e-7),
    settle_s: constant(6),
    step_s: constant(4),
    drift_bias: constant(1e-5),
    aic_drift: constant(Number.NaN),
    aic_two_body: constant(Number.NaN),
    aic_relaxation: constant(Number.NaN),
    link_W_per_K: constant(4e-9),
    u_link_W_per_K: constant(Number.NaN),
    boundary_time_s: Float64Array.from(method, (each) =>
      each === "two-body" ? OVERHEATING.boundary_s : Number.NaN,
    ),
    u_boundary_time_s: Float64Array.from(method, (each) => (each === "two-body" ? 0.21 : Number.NaN)),
    boundary_W_per_K: constant(Number.NaN),
    u_boundary_W_per_K: constant(Number.NaN),
    spikes: Int32Array.from(T_K, () => 0),
  };
  return {
    run,
    status: "reduced",
    kind: "sample",
    pulses,
    used: used.reduce((sum, each) => sum + each, 0),
    vetoed: 1,
    flags: [{ words: "too many spikes under the fit", count: 1 }],
    notes: index === 0 ? ["heater clock 0.31 s behind the thermometer's; corrected"] : [],
    table,
    pictures: Array.from(T_K, (_, i) => picture(i + 1, table, i, gauss)),
  };
}

function picture(pulse: number, table: PulseTable, i: number, gauss: () => number): PulsePicture {
  const noise_K = 0.03 * table.dT_K[i]!;
  const drawn =
    table.method[i] === "two-body"
      ? overheatingPicture({ pulse, base_K: table.T_before_K[i]!, dT_K: table.dT_K[i]!, noise_K }, gauss)
      : driftPicture({ pulse, base_K: table.T_before_K[i]!, dT_K: table.dT_K[i]!, noise_K }, gauss);
  return i === NOT_FITTED ? notFitted(drawn) : drawn;
}

export interface SyntheticPulse {
  readonly pulse: number;
  readonly base_K: number;
  readonly dT_K: number;
  readonly noise_K: number;
}

/** The same samples where nothing was read from them. */
export function notFitted(picture: PulsePicture): PulsePicture {
  return {
    ...picture,
    method: "drift",
    residual_K: picture.residual_K.map(() => Number.NaN),
    noise_K: Number.NaN,
    fits: [],
    windows: [],
    step: null,
  };
}

/** Two drift lines of eight seconds of heat. */
export function driftPicture(
  { pulse, base_K: before, dT_K, noise_K }: SyntheticPulse,
  gauss: () => number,
): PulsePicture {
  const settling = (t: number) => before + dT_K * (1 + 0.15 * Math.exp(-Math.max(0, t - 8) / 7));
  const risen = (t: number) => (t < 0 ? before : t < 8 ? before + (dT_K * t) / 8 : settling(t));
  // As the pulses' own pictures are: denser about the pulse.
  const time_s = Float64Array.from({ length: 160 }, (_, j) =>
    j < 40 ? -60 + j : j < 110 ? -20 + 0.6 * (j - 40) : 22 + 3.4 * (j - 110),
  );
  const stretch = (from: number, to: number, level: (t: number) => number) => {
    const times = Float64Array.from({ length: 25 }, (_, j) => from + ((to - from) * j) / 24);
    return { time_s: times, temperature_K: times.map(level) };
  };
  const temperature_K = time_s.map((t) => risen(t) + noise_K * gauss());
  return {
    pulse,
    method: "drift",
    time_s,
    temperature_K,
    residual_K: temperature_K.map((T, j) =>
      time_s[j]! < 0 || time_s[j]! > 8 ? T - risen(time_s[j]!) : Number.NaN,
    ),
    noise_K,
    fits: [stretch(-60, 4, () => before), stretch(4, 188.6, settling)],
    windows: [
      { from_s: -60, to_s: 0 },
      { from_s: 8, to_s: 188.6 },
    ],
    step: { time_s: 4, from_K: before, to_K: settling(4) },
    duration_s: 8,
  };
}

/** A light body between heater and liquid: it runs ahead of the liquid while heated, then both leak to the stage. */
export const OVERHEATING = {
  body_share: 0.3,
  boundary_s: 9,
  link_s: 1400,
  duration_s: 5,
  from_s: -150,
  to_s: 900,
} as const;

/**
 * Body b with heater and thermometer, liquid l behind a boundary, a weak link from b to the stage; with θ above the stage
 * C_b θ_b' = P − g(θ_b − θ_l) − kθ_b and C_l θ_l' = g(θ_b − θ_l). Closed form: two exponentials, from the eigenvalues.
 * @returns θ_b of heat of one in the time `duration_s`, in units of the rise of both together without the link
 */
export function overheating(t: number): number {
  const { body_share: b, boundary_s, link_s, duration_s } = OVERHEATING;
  // C_b + C_l = 1. The difference of the two decays with g(1/C_b + 1/C_l) = 1/boundary_s, both with k = 1/link_s.
  const g = (b * (1 - b)) / boundary_s;
  const k = 1 / link_s;
  const [a11, a22] = [-(g + k) / b, -g / (1 - b)];
  const middle = (a11 + a22) / 2;
  const half = Math.sqrt(((a11 - a22) / 2) ** 2 + (g * g) / (b * (1 - b)));
  const [fast, slow] = [middle - half, middle + half];
  const weight = (a11 - slow) / (fast - slow);
  const rise = (s: number) =>
    s <= 0 ? 0 : (weight * Math.expm1(fast * s)) / fast + ((1 - weight) * Math.expm1(slow * s)) / slow;
  return (rise(t) - rise(t - duration_s)) / (b * duration_s);
}

/** The forward model of such a cell, through everything, with its own noise. */
export function overheatingPicture(
  { pulse, base_K, dT_K, noise_K }: SyntheticPulse,
  gauss: () => number,
): PulsePicture {
  const { duration_s, from_s, to_s } = OVERHEATING;
  const model = (t: number) => base_K + dT_K * overheating(t);
  // Closest about the pulse.
  const time_s = Float64Array.from({ length: 159 }, (_, j) =>
    j < 40
      ? from_s + 3.4 * j
      : j < 100
        ? -15 + 0.5 * (j - 39)
        : 15.5 + (to_s - 15.5) * ((j - 100) / 58) ** 1.6,
  );
  const temperature_K = time_s.map((t) => model(t) + noise_K * gauss());
  const block_s = time_s.filter((_, j) => j > 1 && j < 157);
  return {
    pulse,
    method: "two-body",
    time_s,
    temperature_K,
    residual_K: temperature_K.map((T, j) => (j > 1 && j < 157 ? T - model(time_s[j]!) : Number.NaN)),
    noise_K,
    fits: [{ time_s: block_s, temperature_K: block_s.map(model) }],
    windows: [{ from_s: block_s[0]!, to_s: block_s.at(-1)! }],
    step: { time_s: duration_s / 2, from_K: base_K, to_K: base_K + dT_K },
    duration_s,
  };
}
