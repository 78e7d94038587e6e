import { median } from "simple-statistics";
import type { Estimate, Separation } from "../separate/types.js";
import { roundToUncertainty, significant, superscript, withZeros } from "./rounding.js";
import type { CampaignReport, Comparison, NightReport } from "./types.js";
import { unitText } from "./units.js";

/** "238.10 ± 0.60 m/s", or a dash. */
export function estimateText(of: Estimate | null): string {
  if (of === null) return "–";
  return `${roundToUncertainty(of.value, of.standard_uncertainty)} ${unitText(of.unit)}`;
}

const MODEL_WORDS = { landau: "Landau form", "whole-curve": "Whole excitation curve" } as const;

/** "Landau form, phonons T³ T⁵ T⁷". */
export function modelText(of: Pick<Separation, "model" | "phonon_powers">): string {
  const words = MODEL_WORDS[of.model];
  if (of.model === "whole-curve" || of.phonon_powers.length === 0) return words;
  return `${words}, phonons ${of.phonon_powers.map(powerText).join(" ")}`;
}

/** T³; T⁻². */
export function powerText(power: number): string {
  return `T${superscript(power)}`;
}

/** Two standard uncertainties of the difference: what the report calls agreement. */
export const AGREEMENT_LIMIT = 2;

export function agrees(comparison: Comparison): boolean {
  return Math.abs(comparison.normalisedDifference) <= AGREEMENT_LIMIT;
}

/** "agrees with 238.30(10) m/s (source): 0.3 standard uncertainties lower". */
export function comparisonText(comparison: Comparison): string {
  const { value, u, unit, source, normalisedDifference } = comparison;
  const verb = agrees(comparison) ? "agrees with" : "differs from";
  const side = normalisedDifference < 0 ? "lower" : "higher";
  return `${verb} ${roundToUncertainty(value, u, "concise")} ${unitText(unit)} (${source}): ${significant(
    Math.abs(normalisedDifference),
    2,
  )} standard uncertainties ${side}`;
}

/** Shares and relative numbers: 0.0123 as "1.2 %". */
export function percent(x: number): string {
  return Number.isFinite(x) ? `${significant(100 * x, 2)} %` : "–";
}

/** Median over a night's used pulses of its thermometer noise, in K; NaN where none was used. */
export function nightNoise_K(night: NightReport): number {
  const { table } = night;
  if (table === null) return Number.NaN;
  return medianOf(Array.from(table.noise_K).filter((_, i) => table.used[i] === 1));
}

/** Median over a night's points of addenda over total heat capacity; NaN where it gave none. */
export function nightAddendaShare(report: Pick<CampaignReport, "dataset">, run: string): number {
  const { dataset } = report;
  return medianOf(Array.from(dataset.addenda_share).filter((_, i) => dataset.run[i] === run));
}

function medianOf(values: readonly number[]): number {
  const numbers = values.filter(Number.isFinite);
  return numbers.length === 0 ? Number.NaN : median(numbers);
}

/** Noise as the bench says it: "12 µK", "1.3 mK". */
export function temperatureText(x_K: number): string {
  if (!Number.isFinite(x_K)) return "–";
  const size = Math.abs(x_K);
  if (size < 1e-3) return `${significant(1e6 * x_K, 2)} µK`;
  return size < 1 ? `${withZeros(1e3 * x_K, 3)} mK` : `${withZeros(x_K, 4)} K`;
}
