import type { Command } from "./common.js";

export const separateCommand: Command = {
  usage: "separate <dataset>",
  summary: "phonon and roton terms of any C(T) table",
  options: (yargs) =>
    yargs
      .positional("dataset", { type: "string", demandOption: true, describe: "CSV file" })
      .option("t", { type: "string", default: "T_K", describe: "column with T in K" })
      .option("cv", { type: "string", default: "Cv_J_per_mol_K", describe: "column with Cv in J/(mol K)" })
      .option("u", {
        type: "string",
        default: "u_Cv_J_per_mol_K",
        describe: "column with its standard uncertainty, if any",
      })
      .option("window", { type: "string", default: "0.35:1.15", describe: "temperatures fitted, K" })
      .option("phonon-powers", { type: "string", default: "auto", describe: "powers of T, such as 3,5,7" })
      .option("model", { type: "string", default: "auto", describe: "landau or whole-curve" })
      .option("molar-volume", {
        type: "string",
        describe: 'such as "27.58 cm3/mol"; published value if left out',
      }),
  async run(options) {
    const { separateCommandLine } = await import("../separate-table.js");
    return separateCommandLine(options);
  },
};
