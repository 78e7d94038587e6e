import { createReadStream } from "node:fs";
import { InputError } from "../stages/errors.js";
import { readTable } from "../stages/ingest/table.js";
import { molarVolume_m3_per_mol, RELATIVE_U_DENSITY } from "../stages/physics/density.js";
import { separationRecord } from "../stages/publish/separation-json.js";
import { separationText } from "../stages/publish/terminal.js";
import { parseQuantity } from "../stages/quantities/quantity.js";
import { separate } from "../stages/separate/separate.js";
import type { Separation, SeparationConfig } from "../stages/separate/types.js";
import type { CommonOptions, ExitCode } from "./cli/common.js";
import { requireFile } from "./config/files.js";
import { located } from "./config/located.js";
import { consoleTeller } from "./progress.js";

export interface TableColumns {
  readonly t: string;
  readonly cv: string;
  /** null: the table states no uncertainty. */
  readonly u: string | null;
}

const FORMAT = { delimiter: "auto", decimal: "auto", comment: "#", gap_words: [] } as const;

/** Separation of a C(T) table in a CSV file. @throws InputError */
export async function separateTable(
  path: string,
  columns: TableColumns,
  config: SeparationConfig,
  molarVolume: { readonly value: number; readonly u: number } = publishedMolarVolume(),
): Promise<Separation> {
  const file = requireFile(located(path), {});
  const wanted = [columns.t, columns.cv, ...(columns.u === null ? [] : [columns.u])];
  const units = ["K", "J/(mol.K)", "J/(mol.K)"];
  const table = await readTable(
    createReadStream(file.path) as AsyncIterable<Uint8Array>,
    file.shown,
    wanted.map((column, i) => ({ column, unit: units[i]!, factor: 1 })),
    { ...FORMAT, gap_words: [] },
  );
  const [T_K, Cv, u] = table.columns;
  return separate(
    {
      T_K: T_K!,
      Cv_J_per_mol_K: Cv!,
      u_repeat_J_per_mol_K: u ?? null,
      sources: [],
      molar_volume_m3_per_mol: molarVolume,
    },
    config,
  );
}

function publishedMolarVolume() {
  const value = molarVolume_m3_per_mol(0.5);
  return { value, u: value * RELATIVE_U_DENSITY };
}

type Options = CommonOptions & Readonly<Record<string, unknown>>;

function optionFault(key: string, value: string, expected: string, example: string): InputError {
  return new InputError({ key: `--${key}`, value, expected, wayOut: `write --${key} ${example}` });
}

function configOf(options: Options): SeparationConfig {
  const text = (key: string): string => String(options[key]);
  const window = text("window").split(":").map(Number);
  const [from, to] = window;
  if (window.length !== 2 || !(from! > 0) || !(to! > from!)) {
    throw optionFault("window", text("window"), "two temperatures in K, the lower first", "0.35:1.15");
  }
  const powers = text("phonon-powers");
  const list = powers.split(",").map(Number);
  if (powers !== "auto" && !list.every((power) => Number.isInteger(power) && power >= 3 && power <= 15)) {
    throw optionFault("phonon-powers", powers, "auto, or whole powers of T from 3 to 15", "3,5,7");
  }
  const model = text("model");
  if (model !== "auto" && model !== "landau" && model !== "whole-curve") {
    throw optionFault("model", model, "auto, landau or whole-curve", "landau");
  }
  return {
    window_K: [from!, to!],
    phonon_powers: powers === "auto" ? "auto" : list,
    other_powers: [],
    model,
  };
}

/** The uncertainty column is read if it is named on the command line, or if the table has it. */
async function columnsOf(options: Options, path: string): Promise<TableColumns> {
  const { t, cv, u } = options as unknown as { t: string; cv: string; u: string };
  if (u !== "u_Cv_J_per_mol_K") return { t, cv, u };
  for await (const piece of createReadStream(path, { encoding: "utf8", end: 65_535 })) {
    if (String(piece).includes(u)) return { t, cv, u };
  }
  return { t, cv, u: null };
}

export async function separateCommandLine(options: Options): Promise<ExitCode> {
  const teller = consoleTeller(options);
  const path = String(options["dataset"]);
  const config = configOf(options);
  const given = options["molar-volume"] as string | undefined;
  const molarVolume = given === undefined ? undefined : molarVolumeOption(given);
  const { path: place } = requireFile(located(path), {});
  const separation = await separateTable(path, await columnsOf(options, place), config, molarVolume);
  teller.say(separationText(separation));
  teller.json(separationRecord(separation));
  return separation.sound_speed !== null && separation.roton_gap !== null ? 0 : 1;
}

function molarVolumeOption(text: string) {
  try {
    return parseQuantity(text, "molar volume");
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    throw new InputError({ ...error.fault, key: "--molar-volume", value: text });
  }
}
