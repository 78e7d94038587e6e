import { dirname, join, relative, sep } from "node:path";
import { stringify } from "yaml";
import { CAUTIONS } from "../../stages/publish/cautions.js";
import { binnedCsv, datasetCsv, pointsCsv } from "../../stages/publish/dataset.js";
import { datasetMetadata } from "../../stages/publish/metadata.js";
import { reportHtml } from "../../stages/publish/report.js";
import { separationJson, separationRecord } from "../../stages/publish/separation-json.js";
import { nightsText, separationText } from "../../stages/publish/terminal.js";
import type { CampaignReport, NightReport } from "../../stages/publish/types.js";
import type { Contents } from "../../stages/pulses/cell-laws.js";
import { flagNames, PULSE_FLAGS } from "../../stages/pulses/flags.js";
import { addendaOf, analyseCampaign, type CampaignResult, contentsOf } from "../chain.js";
import { type Campaign, loadCampaign } from "../config/campaign.js";
import { effectiveAddenda, effectiveConfig, effectiveRun } from "../config/effective.js";
import type { Run } from "../config/load.js";
import type { Located } from "../config/located.js";
import { type Night, reduceNight } from "../night.js";
import { silentTeller, type Teller } from "../progress.js";
import { logFiles, readCalibration, readNight } from "../read-night.js";
import { fileDigest, valueDigest } from "../store/hash.js";
import { withLock } from "../store/lock.js";
import { writeWhole } from "../store/write.js";
import { programVersion } from "../version.js";
import { comparisons } from "./comparisons.js";
import { gates } from "./gates.js";
import { recallNight, storeNight } from "./night-store.js";

/** A night as it came to the campaign. */
export interface ReducedNight {
  readonly night: Night;
  readonly status: "reduced" | "reused";
  readonly kind: "sample" | "empty";
}

export interface NightlyResult {
  readonly campaign: Campaign;
  readonly nights: readonly ReducedNight[];
  readonly result: CampaignResult;
  readonly report: CampaignReport;
  readonly reportFile: string;
  /** Every gate passed. */
  readonly sound: boolean;
}

interface InputDigest {
  readonly file: string;
  readonly sha256: string;
}

/**
 * All nights of a campaign, then its curve, separation, budget, figures and report, written below its output folder.
 * A night whose bytes, configuration and program version are as they were is taken from there.
 * @throws InputError, Busy
 */
export async function runNightly(path: string, teller: Teller = silentTeller): Promise<NightlyResult> {
  const campaign = loadCampaign(path);
  return withLock(campaign.output.path, () => locked(campaign, teller));
}

async function locked(campaign: Campaign, teller: Teller): Promise<NightlyResult> {
  const output = campaign.output.path;
  const version = programVersion();
  const calibration = await readCalibration(campaign.thermometer);
  // Results name files as seen from the campaign's own folder, so that they do not depend on where it was run from.
  const nameOf = ({ path }: Located): string =>
    relative(dirname(campaign.file.path), path).split(sep).join("/");
  const digestOf = async (file: Located): Promise<InputDigest> => ({
    file: nameOf(file),
    sha256: await fileDigest(file.path),
  });
  const { table } = campaign.thermometer;
  const calibrationDigest = table === null ? [] : [await digestOf(table)];
  const digests: InputDigest[] = [...calibrationDigest];

  const reduceOne = async (
    run: Run,
    kind: ReducedNight["kind"],
    contents: Contents,
    known: unknown,
  ): Promise<ReducedNight> => {
    const logs: InputDigest[] = [];
    for (const file of logFiles(run)) logs.push(await digestOf(file));
    digests.push(...logs);
    const key = valueDigest([version, effectiveRun(campaign, run), calibrationDigest, logs, known]);
    const folder = join(output, "runs", run.run);
    const stored = recallNight(join(folder, "night.json"), key);
    const night =
      stored ??
      reduceNight(await readNight(run), calibration, run, campaign.cell, campaign.reduction.pulses, contents);
    const status = stored === null ? "reduced" : "reused";
    teller.step(`${status.padEnd(8)} ${run.run}: ${used(night)} of ${night.table.used.length} pulses`);
    writeWhole(join(folder, "points.csv"), pointsCsv(night.table));
    writeWhole(
      join(folder, "run.json"),
      `${JSON.stringify({ run: run.run, kind, key, version, inputs: logs, notes: night.notes, clock: night.clock }, null, 2)}\n`,
    );
    if (stored === null) storeNight(join(folder, "night.json"), key, night);
    return { night, status, kind };
  };

  const nights: ReducedNight[] = [];
  const emptyRuns = campaign.addenda.kind === "runs" ? campaign.addenda.runs : [];
  for (const run of emptyRuns) nights.push(await reduceOne(run, "empty", { kind: "empty" }, null));
  const of = (kind: ReducedNight["kind"]) =>
    nights.filter((night) => night.kind === kind).map(({ night }) => night);
  // The body must be known before the filled cell's pulses are judged: which heat is whose is not in their traces.
  const addenda = addendaOf(campaign, of("empty"));
  const known = {
    powers: addenda.powers,
    coefficient: addenda.coefficient,
    addenda: effectiveAddenda(campaign),
  };
  for (const run of campaign.runs) nights.push(await reduceOne(run, "sample", contentsOf(addenda), known));

  teller.step("combining nights, separating phonons and rotons");
  const result = analyseCampaign(campaign, of("sample"), addenda);
  const report = reportOf(campaign, nights, result, digests, version);

  teller.step("drawing figures, writing the report");
  const reportFile = join(output, "report", "index.html");
  await writeOutputs(output, campaign.campaign, report, result, reportFile);
  return { campaign, nights, result, report, reportFile, sound: report.gates.every(({ passed }) => passed) };
}

async function writeOutputs(
  output: string,
  name: string,
  report: CampaignReport,
  result: CampaignResult,
  reportFile: string,
): Promise<void> {
  const { renderFigures } = await import("../../stages/publish/figures/figures.js");
  const figures = await renderFigures(report);
  const csv = `${name}.csv`;
  writeWhole(join(output, "dataset", csv), datasetCsv(result.dataset, report));
  writeWhole(join(output, "dataset", `${name}.metadata.json`), datasetMetadata(result.dataset, report, csv));
  writeWhole(join(output, "dataset", `${name}.binned.csv`), binnedCsv(result.binned));
  writeWhole(join(output, "separation.json"), separationJson(result.separation));
  for (const [key, svg] of Object.entries(figures)) {
    if (!key.includes("/")) writeWhole(join(output, "report", "figures", `${key}.svg`), svg);
  }
  writeWhole(reportFile, reportHtml(report, figures));
}

function used({ table }: Night): number {
  return table.used.reduce((sum, u) => sum + u, 0);
}

function nightReport({ night, kind }: ReducedNight): NightReport {
  const counts = PULSE_FLAGS.map(({ bit, words }) => ({
    words,
    count: night.table.flag.reduce((sum, flag) => sum + ((flag & bit) !== 0 ? 1 : 0), 0),
  }));
  return {
    run: night.run,
    // A page must not tell how often the program ran: the same inputs give the same bytes.
    status: "reduced",
    kind,
    pulses: night.table.used.length,
    used: used(night),
    vetoed: night.table.flag.reduce((sum, flag) => sum + (flagNames(flag).includes("vetoed") ? 1 : 0), 0),
    flags: counts.filter(({ count }) => count > 0),
    notes: night.notes,
    table: night.table,
    pictures: night.pictures,
  };
}

function reportOf(
  campaign: Campaign,
  nights: readonly ReducedNight[],
  result: CampaignResult,
  inputs: readonly InputDigest[],
  version: string,
): CampaignReport {
  const { addenda, dataset } = result;
  const { sample, cell } = campaign;
  const unique = inputs.filter(({ file }, i) => inputs.findIndex((other) => other.file === file) === i);
  return {
    campaign: campaign.campaign,
    cell: cell.config.cell,
    sample: sample.config.sample,
    substance: sample.config.substance,
    condition: sample.config.condition,
    amount: result.amount.text,
    molar_volume: result.molarVolume.text,
    temperature_scale: campaign.thermometer.config.scale,
    publication: campaign.publication,
    configuration: stringify(effectiveConfig(campaign)),
    provenance: { version, inputs: unique, constants: "SI 2019, CODATA 2022", seed: null },
    nights: nights.map(nightReport),
    dataset,
    binned: result.binned,
    separation: result.separation,
    budget: result.budget,
    between_nights: result.between,
    addenda: {
      description: [describeAddenda(result), ...result.notes].join("; "),
      mean_share: dataset.addenda_share.reduce((sum, share) => sum + share, 0) / dataset.addenda_share.length,
      coefficients: addenda.powers.map((power, i) => ({
        power,
        value: addenda.coefficient[i]!,
        u: Math.sqrt(addenda.covariance[i]![i]!),
      })),
    },
    gates: gates(
      result,
      nights.map(({ night }) => night),
    ),
    cautions: CAUTIONS,
    comparisons: comparisons(result),
  };
}

function describeAddenda({ addenda }: CampaignResult): string {
  if (addenda.source === "parts") return "sum over the cell's parts, published specific heats";
  if (addenda.source === "none") return "none given";
  return `fit to the empty-cell nights, χ² = ${addenda.chiSquared.toPrecision(3)} for ${addenda.degreesOfFreedom} degrees of freedom`;
}

/** What a program reads: contract of `nightly --json`. */
export function nightlyRecord({ campaign, nights, result, report }: NightlyResult) {
  return {
    campaign: campaign.campaign,
    runs: nights.map((reduced, i) => {
      const { run, pulses, vetoed, flags } = report.nights[i]!;
      return {
        run,
        kind: reduced.kind,
        status: reduced.status,
        pulses,
        used: used(reduced.night),
        vetoed,
        flags,
      };
    }),
    separation: separationRecord(result.separation),
    budget: report.budget,
    gates: report.gates,
    comparisons: report.comparisons,
    scatter_ratio: result.scatterRatio,
    notes: result.notes,
    output: campaign.output.path,
  };
}

export function nightlyText({ report, reportFile, result }: NightlyResult): string {
  const notes = result.notes.map((note) => `Note: ${note}`);
  const failed = report.gates
    .filter(({ passed }) => !passed)
    .map(({ name, words }) => `GATE FAILED: ${name}: ${words}`);
  return [
    ...failed,
    ...notes,
    nightsText(report),
    separationText(report.separation),
    `report  ${reportFile}`,
  ].join("\n");
}
