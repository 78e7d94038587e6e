import Papa from "papaparse";
import { expect, test } from "vitest";
import { binnedCsv, datasetCsv, pointsCsv } from "../../../stages/publish/dataset.js";
import { datasetMetadata } from "../../../stages/publish/metadata.js";
import { expectRelative } from "../../expect-relative.js";
import { syntheticCampaign } from "./synthetic-campaign.js";

const campaign = syntheticCampaign({ nights: 3, pulsesPerNight: 8 });
const { dataset } = campaign;

function read(csv: string) {
  return Papa.parse<Record<string, string>>(csv, { header: true, comments: "#", skipEmptyLines: true });
}

function cells(csv: string, name: string): string[] {
  return read(csv).data.map((row) => row[name]!);
}

// Nine significant digits are written, so half a unit in the ninth is what a reader can be off: 5e-9.
const NINE_DIGITS = 5e-9;

test("the dataset comes back through a CSV reader, every column", () => {
  const { data, errors } = read(datasetCsv(dataset, campaign));
  expect(errors).toEqual([]);
  const column = (name: string) => data.map((row) => Number(row[name]));
  expectRelative(column("T_K"), dataset.T_K, NINE_DIGITS);
  expectRelative(column("Cv_J_per_mol_K"), dataset.Cv_J_per_mol_K, NINE_DIGITS);
  expectRelative(column("u_Cv_J_per_mol_K"), dataset.u_Cv_J_per_mol_K, NINE_DIGITS);
  expectRelative(column("u_repeat_J_per_mol_K"), dataset.u_repeat_J_per_mol_K, NINE_DIGITS);
  for (const source of dataset.sources)
    expectRelative(column(`s_${source.name}_J_per_mol_K`), source.s_Cv_J_per_mol_K, NINE_DIGITS);
  expect(cells(datasetCsv(dataset, campaign), "run")).toEqual([...dataset.run]);
  expect(column("pulse")).toEqual([...dataset.pulse]);
});

test("a reader can rebuild the stated uncertainty from the columns alone", () => {
  const { data } = read(datasetCsv(dataset, campaign));
  const rebuilt = data.map((row) =>
    Math.hypot(
      ...Object.entries(row)
        .filter(([name]) => name === "u_repeat_J_per_mol_K" || name.startsWith("s_"))
        .map(([, value]) => Number(value)),
    ),
  );
  expectRelative(rebuilt, dataset.u_Cv_J_per_mol_K, 2 * NINE_DIGITS);
});

test("the header says sample, scale, covariance and version, and every line of it is a comment", () => {
  const csv = datasetCsv(dataset, {
    ...campaign,
    publication: { title: "Two\nlines", authors: ["A. Name"] },
  });
  const head = csv.slice(0, csv.indexOf("\nT_K,")).split("\n");
  expect(head.every((line) => line.startsWith("# "))).toBe(true);
  const text = head.join("\n");
  for (const words of [
    "Two lines",
    "A. Name",
    "fill-7",
    "ITS-90",
    "diag(u_repeat²) + Σ s sᵀ",
    "rotonwell 0.1.0",
  ])
    expect(text).toContain(words);
});

test("a # in a name is quoted, for readers that end a line there", () => {
  const csv = datasetCsv({ ...dataset, run: dataset.run.map((run) => `${run}#2`) }, campaign);
  expect(csv).toContain(`"${dataset.run[0]}#2"`);
  expect(cells(csv, "run")[0]).toBe(`${dataset.run[0]}#2`);
});

test("the metadata describe the columns of the dataset, in their order, and name its inputs", () => {
  const metadata = JSON.parse(datasetMetadata(dataset, campaign, "fjord-7.csv"));
  const described = metadata.tableSchema.columns.map((column: { name: string }) => column.name);
  expect(described).toEqual(read(datasetCsv(dataset, campaign)).meta.fields);
  expect(metadata.url).toBe("fjord-7.csv");
  const provenance = metadata.notes.find((note: { about: string }) => note.about === "provenance");
  expect(provenance).toMatchObject({ version: "0.1.0", seed: 7, constants: "CODATA 2022" });
  expect(provenance.inputs).toEqual(campaign.provenance.inputs);
  expect(provenance.effective_configuration).toBe(campaign.configuration);
});

test("every pulse has its row, used or not, with its flags by name and the reason of a veto", () => {
  const { table } = campaign.nights[1]!;
  const { data, errors } = read(pointsCsv(table!));
  expect(errors).toEqual([]);
  expect(data).toHaveLength(8);
  expect(data[3]).toMatchObject({ pulse: "4", used: "0", flags: "vetoed", reason: "door slammed" });
  expect(data[5]).toMatchObject({ used: "1", flags: "spikes truncated" });
  expectRelative(
    cells(pointsCsv(table!), "C_total_J_per_K").map(Number),
    table!.C_total_J_per_K,
    NINE_DIGITS,
  );
});

test("what is no number is an empty field", () => {
  const { table } = campaign.nights[1]!;
  const without = { ...table!, dT_K: table!.dT_K.map((x, i) => (i === 0 ? Number.NaN : x)) };
  const csv = pointsCsv(without);
  expect(csv).not.toContain("NaN");
  expect(cells(csv, "dT_K")[0]).toBe("");
});

test("the binned curve has its four columns", () => {
  const csv = binnedCsv(campaign.binned);
  expect(read(csv).meta.fields).toEqual(["T_K", "Cv_J_per_mol_K", "u_Cv_J_per_mol_K", "points"]);
  expect(cells(csv, "points")).toEqual(["9", "11"]);
});
