import type { BetweenNights, Budget } from "../budget/types.js";
import type { BinnedCurve, HeatCapacity } from "../combine/types.js";
import type { PulsePicture, PulseTable } from "../pulses/types.js";
import type { Separation } from "../separate/types.js";
import type { PublicationConfig } from "./config.js";

/** What makes a result again: the same inputs, configuration, version and seed give the same bytes. */
export interface Provenance {
  readonly version: string;
  readonly inputs: readonly { readonly file: string; readonly sha256: string }[];
  /** Which set of constants, such as "CODATA 2022". */
  readonly constants: string;
  /** Of the random numbers; null where none were drawn. */
  readonly seed: number | null;
}

/** What a dataset and a report say of the measurement. Amounts as a person wrote them, with ± and unit. */
export interface CampaignFacts {
  readonly campaign: string;
  readonly cell: string;
  readonly sample: string;
  readonly substance: string;
  readonly condition: string;
  readonly amount: string;
  readonly molar_volume: string;
  /** Name of the temperature scale; it travels with the data. */
  readonly temperature_scale: string;
  readonly publication: PublicationConfig;
  /** The effective configuration, every default filled in. */
  readonly configuration: string;
  readonly provenance: Provenance;
}

/** One night as the report tells of it. */
export interface NightReport {
  readonly run: string;
  readonly status: "reduced" | "reused" | "failed";
  readonly kind: "sample" | "empty";
  readonly pulses: number;
  readonly used: number;
  readonly vetoed: number;
  /** What a person should read, and how many pulses it befell. */
  readonly flags: readonly { readonly words: string; readonly count: number }[];
  readonly notes: readonly string[];
  /** null where the night failed before it had any. */
  readonly table: PulseTable | null;
  readonly pictures: readonly PulsePicture[];
  /** Why it failed. */
  readonly error?: string | undefined;
}

/** What was taken off for the empty cell. */
export interface AddendaReport {
  readonly description: string;
  /** Mean over the dataset of addenda over total heat capacity. */
  readonly mean_share: number;
  /** Of Σ aᵢT^pᵢ, in J/K^{p+1}; empty where the addenda came from a parts list. */
  readonly coefficients: readonly { readonly power: number; readonly value: number; readonly u: number }[];
}

export interface GateVerdict {
  readonly name: string;
  readonly passed: boolean;
  /** What was found and what was wanted. */
  readonly words: string;
}

/** Our value against a published one. */
export interface Comparison {
  /** "sound speed" and "roton gap" stand beside the headline; other words only in the table. */
  readonly quantity: string;
  /** The published value and its standard uncertainty. */
  readonly value: number;
  readonly u: number;
  readonly unit: string;
  readonly source: string;
  /** Ours minus published. */
  readonly difference: number;
  /** The difference over its standard uncertainty, ours and theirs together. */
  readonly normalisedDifference: number;
}

/** Everything that a report of a campaign shows. */
export interface CampaignReport extends CampaignFacts {
  readonly nights: readonly NightReport[];
  readonly dataset: HeatCapacity;
  readonly binned: BinnedCurve;
  readonly separation: Separation;
  readonly budget: Budget;
  readonly between_nights?: BetweenNights | undefined;
  readonly addenda: AddendaReport;
  readonly gates: readonly GateVerdict[];
  readonly cautions: readonly string[];
  readonly comparisons: readonly Comparison[];
}
