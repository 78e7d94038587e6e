import { existsSync, readFileSync, statSync } from "node:fs";
import { InputError } from "../stages/errors.js";
import { pointsCsv } from "../stages/publish/dataset.js";
import type { Contents } from "../stages/pulses/cell-laws.js";
import { addendaOf, contentsOf } from "./chain.js";
import type { CommonOptions, ExitCode } from "./cli/common.js";
import { type Campaign, loadCampaign } from "./config/campaign.js";
import { defaultReduction } from "./config/campaign-schema.js";
import { type Cell, loadCell, loadRun, loadSample, type Run, requireFit } from "./config/load.js";
import { heliumShape } from "./helium-shape.js";
import { type Night, reduceNight } from "./night.js";
import { consoleTeller } from "./progress.js";
import { readCalibration, readNight } from "./read-night.js";
import { writeWhole } from "./store/write.js";

interface Job {
  readonly run: Run;
  readonly cell: Cell;
  readonly pulses: ReturnType<typeof defaultReduction>["pulses"];
  /** What is in the cell; by default a liquid in a body that nobody knows. */
  readonly contents?: Contents;
}

/** One night to heat capacity points. @throws InputError */
export async function reduceRun({ run, cell, pulses, contents }: Job): Promise<Night> {
  const calibration = await readCalibration(cell.thermometer);
  return reduceNight(await readNight(run), calibration, run, cell, pulses, contents ?? unknownBody());
}

function unknownBody(): Contents {
  return { kind: "filled", body: null, shape: heliumShape() };
}

/** What the cell held on a night of a campaign: its empty-cell nights are reduced first. @throws InputError */
async function contentsOn(campaign: Campaign, run: Run, pulses: Job["pulses"]): Promise<Contents> {
  const empty: Run[] = campaign.addenda.kind === "runs" ? [...campaign.addenda.runs] : [];
  if (empty.includes(run)) return { kind: "empty" };
  // Drift lines ask nothing of the body.
  if (pulses.method === "drift") return unknownBody();
  const nights: Night[] = [];
  for (const each of empty) {
    nights.push(await reduceRun({ run: each, cell: campaign.cell, pulses, contents: { kind: "empty" } }));
  }
  return contentsOf(addendaOf(campaign, nights));
}

/** What stands at `--out` may be points of before, never a log or a configuration. @throws InputError */
function requireOwnFile(out: string): void {
  if (!existsSync(out)) return;
  const head = statSync(out).isFile() ? readFileSync(out, "utf8").slice(0, OWN_HEAD.length) : "";
  if (head === OWN_HEAD || (statSync(out).isFile() && statSync(out).size === 0)) return;
  throw new InputError({
    key: "--out",
    value: out,
    expected: "a new file, or points written before",
    wayOut: "name another file: what is there is not overwritten",
  });
}

const OWN_HEAD = "pulse,start_s,";

type Options = CommonOptions & Readonly<Record<string, unknown>>;

async function jobOf(options: Options): Promise<Job> {
  const text = (key: string): string | undefined => options[key] as string | undefined;
  const campaignFile = text("campaign");
  if (campaignFile !== undefined) {
    const campaign = loadCampaign(campaignFile);
    const wanted = text("run-id") ?? text("run");
    const empty = campaign.addenda.kind === "runs" ? campaign.addenda.runs : [];
    const all = [...campaign.runs, ...empty];
    const run = all.find((each) => each.run === wanted);
    if (run === undefined) {
      throw new InputError({
        key: "--run",
        ...(wanted === undefined ? {} : { value: wanted }),
        expected: `a night of ${campaign.campaign}: ${all.map((each) => each.run).join(", ")}`,
        wayOut: `rotonwell reduce --campaign ${campaignFile} --run ${all[0]?.run ?? "NIGHT"}`,
      });
    }
    const { pulses } = campaign.reduction;
    return { run, cell: campaign.cell, pulses, contents: await contentsOn(campaign, run, pulses) };
  }
  const [runFile, cellFile] = [text("run"), text("cell")];
  if (runFile === undefined || cellFile === undefined) {
    throw new InputError({
      key: runFile === undefined ? "run" : "--cell",
      expected: "a run file with its cell, or a campaign and the night's name",
      wayOut:
        "rotonwell reduce RUN.yaml --cell CELL.yaml --sample SAMPLE.yaml, or reduce --campaign CAMPAIGN.yaml --run NIGHT",
    });
  }
  const cell = loadCell(cellFile);
  const sampleFile = text("sample");
  if (sampleFile !== undefined) requireFit(cell, loadSample(sampleFile));
  return { run: loadRun(runFile), cell, pulses: defaultReduction().pulses };
}

export async function reduceCommandLine(options: Options): Promise<ExitCode> {
  const teller = consoleTeller(options);
  const night = await reduceRun(await jobOf(options));
  const csv = pointsCsv(night.table);
  const out = options["out"] as string | undefined;
  if (out !== undefined) {
    requireOwnFile(out);
    writeWhole(out, csv);
  }
  const used = night.table.used.reduce((sum, u) => sum + u, 0);
  teller.step(`${night.run}: ${used} of ${night.table.used.length} pulses used`);
  for (const note of night.notes) teller.step(`  ${note}`);
  if (options.json) {
    const columns = Object.fromEntries(
      Object.entries(night.table).map(([name, column]) => [
        name,
        Array.from(column as ArrayLike<number | string>, (x) =>
          typeof x === "number" && !Number.isFinite(x) ? null : x,
        ),
      ]),
    );
    teller.json({ run: night.run, clock: night.clock, notes: night.notes, points: columns });
  } else if (out === undefined && !options.quiet) {
    process.stdout.write(csv);
  }
  return 0;
}
