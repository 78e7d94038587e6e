import { chooseAddendaPowers } from "../stages/addenda/choose-powers.js";
import { fitEmptyCell } from "../stages/addenda/empty-cell.js";
import { noAddenda } from "../stages/addenda/no-addenda.js";
import { addendaFromParts } from "../stages/addenda/parts.js";
import type { Addenda } from "../stages/addenda/types.js";
import { betweenNights } from "../stages/budget/between-nights.js";
import { budget } from "../stages/budget/budget.js";
import type { BetweenNights, Budget } from "../stages/budget/types.js";
import { binnedCurve } from "../stages/combine/binned-curve.js";
import { combineNights, type NightPoints } from "../stages/combine/combine.js";
import type { BinnedCurve, HeatCapacity } from "../stages/combine/types.js";
import { InputError } from "../stages/errors.js";
import { amountFromGas } from "../stages/molar/amount.js";
import { toMolar } from "../stages/molar/to-molar.js";
import { molarVolume_m3_per_mol, RELATIVE_U_DENSITY } from "../stages/physics/density.js";
import type { Contents } from "../stages/pulses/cell-laws.js";
import type { Quantity } from "../stages/quantities/types.js";
import { separationConfig } from "../stages/separate/config.js";
import { separate } from "../stages/separate/separate.js";
import type { Separation } from "../stages/separate/types.js";
import type { Campaign } from "./config/campaign.js";
import { heliumShape } from "./helium-shape.js";
import type { EffectOfHeat, Night } from "./night.js";

/** Everything a campaign's nights come to. */
export interface CampaignResult {
  readonly amount: Quantity;
  readonly molarVolume: Quantity;
  readonly addenda: Addenda;
  readonly dataset: HeatCapacity;
  readonly binned: BinnedCurve;
  readonly separation: Separation;
  readonly budget: Budget;
  readonly between: BetweenNights;
  /** Scatter about the first fit over the stated repeatability; the fit's uncertainties are widened by it if above 1. */
  readonly scatterRatio: number;
  readonly notes: readonly string[];
}

export function amountOf(sample: Campaign["sample"]): Quantity {
  const { amount, gas } = sample.config;
  return amount ?? amountFromGas(gas!);
}

/** The configured molar volume, or the published one at low temperature along the vapour pressure. */
export function molarVolumeOf(sample: Campaign["sample"]): Quantity {
  const given = sample.config.molar_volume;
  if (given !== undefined) return given;
  const value = molarVolume_m3_per_mol(0.5);
  return { value, u: value * RELATIVE_U_DENSITY, text: "published, at vapour pressure" };
}

/** What the nights of the filled cell are told of it. A cell of which nothing is known may still be read. */
export function contentsOf(addenda: Addenda): Contents {
  return {
    kind: "filled",
    body: addenda.source === "none" ? null : (T_K) => addenda.heatCapacity_J_per_K(T_K),
    shape: heliumShape(),
  };
}

/**
 * The stages after the nights, in order: molar, combine, separate, budget.
 * @param addenda from the empty-cell nights or the parts, as the filled nights were reduced with
 */
export function analyseCampaign(
  campaign: Campaign,
  filled: readonly Night[],
  addenda: Addenda,
): CampaignResult {
  const amount = amountOf(campaign.sample);
  const molarVolume = molarVolumeOf(campaign.sample);
  const sample = {
    amount,
    condition: campaign.sample.config.condition,
    vapour_space: campaign.sample.config.vapour_space,
  };
  const notes = new Set<string>();
  const points = filled.map((night) => {
    const total = usedPoints(night);
    const molar = toMolar(total, addenda, sample);
    for (const note of molar.notes) notes.add(note);
    return nightPoints(night, total, molar, amount, addenda);
  });
  for (const note of volumeNotes(campaign, amount, molarVolume)) notes.add(note);
  const count = points.reduce((sum, night) => sum + night.T_K.length, 0);
  if (count === 0) {
    throw new InputError({
      file: campaign.file.shown,
      key: "runs",
      value: `${filled.length} nights`,
      expected: "at least one pulse that can be used",
      wayOut:
        "see the flags in points.csv of each night (rotonwell reduce), and reduction.pulses for their thresholds",
    });
  }
  const dataset = combineNights(points, { u_temperature_K: filled[0]!.u_temperature_K });
  const config = separationConfig(campaign.reduction.separate);
  const separateWith = (widening: number): Separation =>
    separate(
      {
        T_K: dataset.T_K,
        Cv_J_per_mol_K: dataset.Cv_J_per_mol_K,
        u_repeat_J_per_mol_K: dataset.u_repeat_J_per_mol_K.map((u) => u * widening),
        sources: dataset.sources,
        molar_volume_m3_per_mol: { value: molarVolume.value, u: molarVolume.u },
      },
      config,
    );
  const first = separateWith(1);
  // Scatter beyond the stated repeatability has a cause that no drift fit sees; Birge's remedy (Phys. Rev. 40, 207
  // (1932)) widens every point alike, so that the uncertainties of u₁ and Δ are those the points themselves show.
  const scatterRatio =
    first.degrees_of_freedom > 0 ? Math.sqrt(first.chi_squared / first.degrees_of_freedom) : 1;
  const separation = scatterRatio > 1 ? separateWith(scatterRatio) : first;
  return {
    amount,
    molarVolume,
    addenda,
    dataset,
    binned: binnedCurve(dataset, campaign.reduction.combine.bins_per_decade),
    separation,
    budget: budget(separation),
    // Before widening: a ratio of nights that scatter must not be made small by their own scatter.
    between: betweenNights(first, dataset.run),
    scatterRatio,
    notes: [...notes],
  };
}

/** A full cell holds its volume over the molar volume; more is said where it holds something else. */
function volumeNotes(campaign: Campaign, amount: Quantity, molarVolume: Quantity): string[] {
  if (campaign.sample.config.condition !== "constant-volume") return [];
  const { volume } = campaign.cell.config;
  const found = volume.value / amount.value;
  const relative = (quantity: Quantity): number => quantity.u / quantity.value;
  // Volumes given without ± are taken for good to a part in five hundred.
  const u =
    molarVolume.value * Math.max(2e-3, Math.hypot(relative(volume), relative(amount), relative(molarVolume)));
  const pull = (found - molarVolume.value) / u;
  if (Math.abs(pull) <= 2) return [];
  const cm3 = (value: number): string => `${(value * 1e6).toPrecision(5)} cm3/mol`;
  return [
    `cell volume over amount is ${cm3(found)}, the molar volume ${cm3(molarVolume.value)}: ${Math.abs(pull).toFixed(1)} standard uncertainties apart; the cell is not full, or one of the three is wrong`,
  ];
}

interface UsedPoints {
  readonly row: readonly number[];
  readonly T_K: Float64Array;
  readonly dT_K: Float64Array;
  readonly C_total_J_per_K: Float64Array;
  readonly u_C_total_J_per_K: Float64Array;
}

function usedPoints({ table }: Night): UsedPoints {
  const row = [...table.used.keys()].filter((i) => table.used[i] === 1);
  const take = (column: Float64Array): Float64Array => Float64Array.from(row, (i) => column[i]!);
  return {
    row,
    T_K: take(table.T_K),
    dT_K: take(table.mean_over_K),
    C_total_J_per_K: take(table.C_total_J_per_K),
    u_C_total_J_per_K: take(table.u_C_total_J_per_K),
  };
}

/** @throws InputError where the empty-cell nights do not give their powers */
export function addendaOf(campaign: Pick<Campaign, "addenda">, empty: readonly Night[]): Addenda {
  if (campaign.addenda.kind === "none") return noAddenda();
  if (campaign.addenda.kind === "parts") return addendaFromParts(campaign.addenda.parts);
  const nights = empty.map(usedPoints);
  const join = (pick: (points: UsedPoints) => Float64Array): Float64Array =>
    Float64Array.from(nights.flatMap((points) => [...pick(points)]));
  const T = join((points) => points.T_K);
  const C = join((points) => points.C_total_J_per_K);
  const u = join((points) => points.u_C_total_J_per_K);
  const dT = join((points) => points.dT_K);
  const { powers } = campaign.addenda;
  return fitEmptyCell(T, C, u, powers === "auto" ? chooseAddendaPowers(T, C, u, dT) : powers, dT);
}

function nightPoints(
  night: Night,
  total: UsedPoints,
  molar: ReturnType<typeof toMolar>,
  amount: Quantity,
  addenda: Addenda,
): NightPoints {
  const n = total.T_K.length;
  // An error of the heat falls on all that the pulses measured. Addenda measured with the same heater are off by the
  // same factor and take their part of it; a parts list and the vapour's part are calculated, and take none.
  const measuredAddenda = addenda.source === "empty-cell";
  const leverage = total.row.map((_, i) => {
    const share = molar.addenda_share[i]!;
    return (measuredAddenda ? 1 - share : 1) / (1 - share - molar.vapour_share[i]!);
  });
  const heat = (effect: EffectOfHeat) => ({
    name: effect.name,
    title: effect.title,
    relative: Float64Array.from(total.row, (row, i) => effect.relative[row]! * leverage[i]!),
  });
  return {
    run: night.run,
    pulse: Int32Array.from(total.row, (row) => night.table.pulse[row]!),
    T_K: molar.T_K,
    Cv_J_per_mol_K: molar.Cv_J_per_mol_K,
    u_repeat_J_per_mol_K: molar.u_repeat_J_per_mol_K,
    dT_K: total.dT_K,
    addenda_share: molar.addenda_share,
    calculated_slope_J_per_mol_K2: molar.T_K.map((T) =>
      measuredAddenda ? 0 : slopeOf((t) => addenda.heatCapacity_J_per_K(t), T) / amount.value,
    ),
    relativeSources: [
      ...night.heatSources.map(heat),
      {
        name: "amount",
        title: "amount of helium",
        relative: new Float64Array(n).fill(-amount.u / amount.value),
      },
    ],
    absoluteSources: molar.sources.filter(({ name }) => name !== "amount"),
  };
}

/** Central difference over a thousandth of T: addenda are smooth sums of powers, so it errs by 1e-6 or so. */
function slopeOf(heatCapacity: (T_K: number) => number, T: number): number {
  const h = 5e-4 * T;
  return (heatCapacity(T + h) - heatCapacity(T - h)) / (2 * h);
}
