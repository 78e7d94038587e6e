import type { BinnedCurve, HeatCapacity } from "../combine/types.js";
import { flagNames } from "../pulses/flags.js";
import type { PulseTable } from "../pulses/types.js";
import { csvText } from "./csv.js";
import type { CampaignFacts } from "./types.js";

/** One column of the published dataset, as its header and its metadata describe it. */
export interface DatasetColumn {
  readonly name: string;
  /** "" for words and counts. */
  readonly unit: string;
  readonly datatype: "number" | "integer" | "string";
  readonly meaning: string;
}

const MOLAR = "J/(mol.K)";

/** The columns in their order; one `s_` column a common source. */
export function datasetColumns(dataset: HeatCapacity): DatasetColumn[] {
  const number = (name: string, unit: string, meaning: string): DatasetColumn => ({
    name,
    unit,
    datatype: "number",
    meaning,
  });
  return [
    number("T_K", "K", "temperature, middle of the step"),
    number("Cv_J_per_mol_K", MOLAR, "molar heat capacity at constant volume, corrected for the finite step"),
    number("u_Cv_J_per_mol_K", MOLAR, "its standard uncertainty (k = 1), everything: √(u_repeat² + Σ s²)"),
    number("u_repeat_J_per_mol_K", MOLAR, "repeatability (k = 1), taken as independent from point to point"),
    ...dataset.sources.map(({ name, title }) =>
      number(
        `s_${name}_J_per_mol_K`,
        MOLAR,
        `signed change of Cv for one standard uncertainty of: ${title}; common to all points`,
      ),
    ),
    { name: "run", unit: "", datatype: "string", meaning: "night of the pulse" },
    {
      name: "pulse",
      unit: "",
      datatype: "integer",
      meaning: "number of the pulse in that night's heater log",
    },
  ];
}

export const COVARIANCE_RULE =
  "covariance of Cv = diag(u_repeat²) + Σ s sᵀ, summed over the s_ columns: each source moves all points together";

/**
 * The frozen dataset: one row a point, in order of temperature, with all that rebuilds its covariance.
 * @returns CSV; `#` lines say what a reader needs, then one header row
 */
export function datasetCsv(dataset: HeatCapacity, facts: CampaignFacts): string {
  const columns = datasetColumns(dataset);
  const { T_K, Cv_J_per_mol_K, u_Cv_J_per_mol_K, u_repeat_J_per_mol_K, sources, run, pulse } = dataset;
  const comments = [
    datasetTitle(facts),
    ...(facts.publication.authors.length > 0 ? [`Authors: ${facts.publication.authors.join(", ")}`] : []),
    ...(facts.publication.licence === undefined ? [] : [`Licence: ${facts.publication.licence}`]),
    `Campaign ${facts.campaign}, cell ${facts.cell}, sample ${facts.sample}`,
    `${facts.substance}, ${facts.condition}, ${facts.amount}, molar volume ${facts.molar_volume}`,
    `Temperature scale: ${facts.temperature_scale}`,
    `Rule: ${COVARIANCE_RULE}`,
    ...columns.map(({ name, unit, meaning }) => `${name}${unit === "" ? "" : ` [${unit}]`}: ${meaning}`),
    `Made by rotonwell ${facts.provenance.version}`,
  ];
  const rows = Array.from(T_K, (T, i) => [
    T,
    Cv_J_per_mol_K[i]!,
    u_Cv_J_per_mol_K[i]!,
    u_repeat_J_per_mol_K[i]!,
    ...sources.map((source) => source.s_Cv_J_per_mol_K[i]!),
    run[i]!,
    pulse[i]!,
  ]);
  return csvText(
    comments,
    columns.map(({ name }) => name),
    rows,
  );
}

export function datasetTitle(facts: CampaignFacts): string {
  return facts.publication.title ?? `Heat capacity of ${facts.substance}, ${facts.sample}`;
}

/** The numeric columns of a pulse table that points.csv shows before `method`, in this order. */
const POINT_COLUMNS = [
  "start_s",
  "duration_s",
  "T_before_K",
  "T_after_K",
  "T_K",
  "dT_K",
  "u_dT_K",
  "mean_over_K",
  "Q_J",
  "u_Q_J",
  "lead_heat_J",
  "heater_resistance_Ohm",
  "C_total_J_per_K",
  "u_C_total_J_per_K",
  "noise_K",
  "drift_K_per_s",
  "settle_s",
  "step_s",
  "spikes",
  "link_W_per_K",
  "u_link_W_per_K",
  "boundary_time_s",
  "u_boundary_time_s",
  "boundary_W_per_K",
  "u_boundary_W_per_K",
  "drift_bias",
  "aic_drift",
  "aic_two_body",
  "aic_relaxation",
] as const satisfies readonly (keyof PulseTable)[];

/** Every pulse of a night, used or not: one row each, its flags by name and the reason of a veto. */
export function pointsCsv(table: PulseTable): string {
  const rows = Array.from(table.pulse, (pulse, i) => [
    pulse,
    ...POINT_COLUMNS.map((name) => table[name][i]!),
    table.method[i]!,
    table.used[i]!,
    flagNames(table.flag[i]!).join(" "),
    table.reason[i]!,
  ]);
  return csvText([], ["pulse", ...POINT_COLUMNS, "method", "used", "flags", "reason"], rows);
}

/** Weighted means in bins equal in ln T: for the eye and for tables, not for fits. */
export function binnedCsv(binned: BinnedCurve): string {
  const rows = Array.from(binned.T_K, (T, i) => [
    T,
    binned.Cv_J_per_mol_K[i]!,
    binned.u_Cv_J_per_mol_K[i]!,
    binned.points[i]!,
  ]);
  return csvText(
    [
      "Weighted means in bins of equal width in ln T, k = 1. For the eye and for tables: fits use the points.",
    ],
    ["T_K", "Cv_J_per_mol_K", "u_Cv_J_per_mol_K", "points"],
    rows,
  );
}
