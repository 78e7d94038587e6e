import type { Quantity } from "../../stages/quantities/types.js";
import type { Campaign } from "./campaign.js";
import type { Run } from "./load.js";

/** Plain JSON. */
export type Json = null | boolean | number | string | readonly Json[] | { readonly [key: string]: Json };

/**
 * A configuration as plain JSON, every default filled in, quantities as written.
 * It holds no path of this computer: files appear as their configuration names them.
 */
export function effective(config: unknown): Json {
  if (
    config === null ||
    typeof config === "number" ||
    typeof config === "string" ||
    typeof config === "boolean"
  ) {
    return config;
  }
  if (Array.isArray(config)) return config.map(effective);
  const fields = config as Readonly<Record<string, unknown>>;
  if (isQuantity(fields)) return fields.text;
  return Object.fromEntries(
    Object.entries(fields)
      .filter(([key, value]) => value !== undefined && !isDerived(fields, key))
      .map(([key, value]) => [key, effective(value)]),
  );
}

function isQuantity(fields: object): fields is Quantity {
  const { text, value, u } = fields as Partial<Quantity>;
  return typeof text === "string" && typeof value === "number" && typeof u === "number";
}

/** A column's factor follows from its unit. */
function isDerived(fields: Readonly<Record<string, unknown>>, key: string): boolean {
  return key === "factor" && "unit" in fields;
}

/** What a night's own result depends on, beside its data. */
export function effectiveRun(campaign: Pick<Campaign, "cell" | "thermometer" | "reduction">, run: Run): Json {
  return effective({
    run: run.config,
    cell: campaign.cell.config,
    thermometer: campaign.thermometer.config,
    pulses: campaign.reduction.pulses,
  });
}

/** The addenda as configured. */
export function effectiveAddenda({ addenda }: Pick<Campaign, "addenda">): Json {
  return effective(
    addenda.kind === "runs" ? { ...addenda, runs: addenda.runs.map(({ config }) => config) } : addenda,
  );
}

/** Everything configured that a campaign's results depend on; not where they are written. */
export function effectiveConfig(campaign: Campaign): Json {
  return effective({
    campaign: campaign.campaign,
    cell: campaign.cell.config,
    thermometer: campaign.thermometer.config,
    sample: campaign.sample.config,
    runs: campaign.runs.map(({ config }) => config),
    addenda: effectiveAddenda(campaign),
    reduction: campaign.reduction,
    publication: campaign.publication,
  });
}
