import { statSync } from "node:fs";
import { dirname, join, relative, sep } from "node:path";
import type { AddendaPowers, PartConfig } from "../../stages/addenda/config.js";
import type { PublicationConfig } from "../../stages/publish/config.js";
import type { Reduction } from "./campaign-schema.js";
import { fewNames, listFolder } from "./files.js";
import { glob, isPattern } from "./glob.js";
import {
  type Cell,
  loadCell,
  loadRun,
  loadSample,
  type Run,
  requireFit,
  type Sample,
  type Thermometer,
} from "./load.js";
import { type Located, located, locatedFrom } from "./located.js";
import { type ReadConfig, readConfig } from "./read-config.js";

export type Addenda =
  | { readonly kind: "runs"; readonly runs: readonly Run[]; readonly powers: AddendaPowers }
  | { readonly kind: "parts"; readonly parts: readonly PartConfig[] }
  | { readonly kind: "none" };

/** A campaign with every file it names. */
export interface Campaign {
  readonly file: Located;
  /** Its name. */
  readonly campaign: string;
  readonly cell: Cell;
  readonly thermometer: Thermometer;
  readonly sample: Sample;
  /** In the order of their files by code unit, or of the list where runs is one. */
  readonly runs: readonly Run[];
  readonly addenda: Addenda;
  readonly reduction: Reduction;
  readonly publication: PublicationConfig;
  /** Folder of the results; it need not exist. */
  readonly output: Located;
}

/** @throws InputError for the first fault in any file of the campaign */
export function loadCampaign(path: string): Campaign {
  const file = located(path);
  const read = readConfig(file, "campaign");
  const { config } = read;
  const cell = loadCell(read.fileAt(["cell"]));
  const sample = loadSample(read.fileAt(["sample"]));
  requireFit(cell, sample);

  const runFiles = filesOf(read, file, config.runs, ["runs"]);
  const emptyFiles =
    config.addenda?.runs === undefined ? [] : filesOf(read, file, config.addenda.runs, ["addenda", "runs"]);
  const shared = runFiles.find((run) => emptyFiles.some((empty) => empty.path === run.path));
  if (shared !== undefined) {
    throw read.fault(
      ["addenda", "runs"],
      `nights with the empty cell; ${shared.shown} is also among runs`,
      "keep filled and empty nights in folders of their own, and name each once",
    );
  }
  const runs = runFiles.map(loadRun);
  const emptyRuns = emptyFiles.map(loadRun);
  requireUniqueNames([...runs, ...emptyRuns]);

  const output = locatedFrom(file, config.output ?? join("out", config.campaign));
  requireOutputApart(read, output, [
    file,
    cell.file,
    cell.thermometer.file,
    sample.file,
    ...inputsOf(runs),
    ...inputsOf(emptyRuns),
  ]);
  return {
    file,
    campaign: config.campaign,
    cell,
    thermometer: cell.thermometer,
    sample,
    runs,
    addenda:
      config.addenda === undefined
        ? { kind: "none" }
        : config.addenda.parts === undefined
          ? { kind: "runs", runs: emptyRuns, powers: config.addenda.powers }
          : { kind: "parts", parts: config.addenda.parts },
    reduction: config.reduction,
    publication: config.publication,
    output,
  };
}

type ReadCampaign = ReadConfig<"campaign">;

/** The files of a pattern or a list, each once. */
function filesOf(
  read: ReadCampaign,
  file: Located,
  written: string | readonly string[],
  path: readonly string[],
): Located[] {
  const folder = { path: dirname(file.path), shown: dirname(file.shown) };
  const entries =
    typeof written === "string"
      ? [{ text: written, path }]
      : written.map((text, i) => ({ text, path: [...path, i] }));
  const files = entries.flatMap((entry) => {
    if (!isPattern(entry.text)) return [read.fileAt(entry.path)];
    const { files: matches, stoppedAt, unmatched } = glob(entry.text, folder);
    if (matches.length > 0) return matches.map((match) => ({ ...match, namedBy: read.mention(entry.path) }));
    throw read.fault(
      entry.path,
      "a pattern that matches at least one run file",
      whatIsThere(stoppedAt, unmatched),
    );
  });
  return [...new Map(files.map((one) => [one.path, one])).values()];
}

function whatIsThere(folder: Located, unmatched: string): string {
  const names = listFolder(folder.path) ?? [];
  if (names.length === 0) return `the folder ${folder.shown} is empty`;
  return `in ${folder.shown} nothing matches ${unmatched}; it holds ${fewNames(unmatched, names)}`;
}

/** Names that differ in case only would share a folder on some systems. */
function requireUniqueNames(runs: readonly Run[]): void {
  const seen = new Map<string, Run>();
  for (const run of runs) {
    const other = seen.get(run.run.toLowerCase());
    if (other !== undefined) {
      throw readConfig(run.file, "run").fault(
        ["run"],
        `a name of its own; ${other.file.shown} has it too`,
        "rename one of the two nights, since each keeps its results in a folder of its name",
      );
    }
    seen.set(run.run.toLowerCase(), run);
  }
}

function inputsOf(runs: readonly Run[]): Located[] {
  return runs.flatMap(({ file, logs }) => [
    file,
    logs.thermometer,
    logs.heater,
    ...(logs.stage === null ? [] : [logs.stage]),
  ]);
}

/** Results never lie over inputs: raw logs are read, never written. */
function requireOutputApart(read: ReadCampaign, output: Located, inputs: readonly Located[]): void {
  const wayOut = "choose a folder for results alone, such as output: ../out/fjord-7";
  const inside = inputs.find(({ path }) => {
    const way = relative(output.path, path);
    return way !== "" && way !== ".." && !way.startsWith(`..${sep}`);
  });
  if (inside !== undefined) {
    throw read.fault(["output"], `a folder that holds no input; ${inside.shown} lies in it`, wayOut);
  }
  const there = statSync(output.path, { throwIfNoEntry: false });
  if (there !== undefined && !there.isDirectory()) {
    throw read.fault(["output"], "a folder; there is a file of this name", wayOut);
  }
}
