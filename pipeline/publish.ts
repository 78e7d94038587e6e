import { createHash } from "node:crypto";
import { existsSync, readdirSync } from "node:fs";
import { join } from "node:path";
import { InputError } from "../stages/errors.js";
import { binnedCsv, datasetCsv } from "../stages/publish/dataset.js";
import { datasetMetadata } from "../stages/publish/metadata.js";
import { separationJson } from "../stages/publish/separation-json.js";
import type { CommonOptions, ExitCode } from "./cli/common.js";
import { runNightly } from "./nightly/nightly.js";
import { consoleTeller, silentTeller, type Teller } from "./progress.js";
import { writeWhole } from "./store/write.js";

/**
 * Reduces the campaign and freezes its dataset: points, binned curve, metadata, separation, budget, checksums.
 * @param accept why to publish although a gate fails; it is written into the dataset
 * @returns files written, relative to `folder`
 * @throws InputError if the folder holds anything, or a gate fails and no reason is given
 */
export async function publishCampaign(
  path: string,
  folder: string,
  accept: string | null,
  teller: Teller = silentTeller,
): Promise<string[]> {
  if (existsSync(folder) && readdirSync(folder).length > 0) {
    throw new InputError({
      file: folder,
      expected: "a new or empty folder: a published dataset is frozen",
      wayOut: "name another folder, or remove this one yourself",
    });
  }
  const { campaign, report, result } = await runNightly(path, teller);
  const failed = report.gates.filter(({ passed }) => !passed);
  if (failed.length > 0 && accept === null) {
    throw new InputError({
      file: path,
      expected: `a campaign whose gates all pass; failed: ${failed.map(({ name, words }) => `${name} (${words})`).join("; ")}`,
      wayOut: 'mend the cause, or give --accept "reason", which is printed with the dataset',
    });
  }
  const name = campaign.campaign;
  const files = new Map<string, string>([
    [`${name}.csv`, datasetCsv(result.dataset, report)],
    [`${name}.binned.csv`, binnedCsv(result.binned)],
    [`${name}.metadata.json`, datasetMetadata(result.dataset, report, `${name}.csv`)],
    ["separation.json", separationJson(result.separation)],
    ["budget.json", `${JSON.stringify(report.budget, null, 2)}\n`],
    [
      "gates.json",
      `${JSON.stringify({ gates: report.gates, accepted: failed.length > 0 ? accept : null }, null, 2)}\n`,
    ],
  ]);
  const sums = [...files].map(
    ([file, content]) => `${createHash("sha256").update(content).digest("hex")}  ${file}\n`,
  );
  files.set("SHA256SUMS", sums.join(""));
  for (const [file, content] of files) writeWhole(join(folder, file), content);
  return [...files.keys()];
}

export async function publishCommandLine(
  options: CommonOptions & Readonly<Record<string, unknown>>,
  campaign: string,
  folder: string,
): Promise<ExitCode> {
  const teller = consoleTeller(options);
  const accept = (options["accept"] as string | undefined) ?? null;
  const files = await publishCampaign(campaign, folder, accept, teller);
  teller.say(
    `${files.length} files written into ${folder}; sha256sum --check SHA256SUMS there verifies them`,
  );
  teller.json({ folder, files });
  return accept === null ? 0 : 1;
}
