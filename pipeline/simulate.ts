import { join } from "node:path";
import { pcg32 } from "../stages/numerics/random.js";
import { simulateScenario } from "../stages/simulate/simulate.js";
import { loadScenario } from "./config/load.js";
import { writeWhole } from "./store/write.js";

/** Writes a scenario's nights below `folder`. @returns the files written, relative to it */
export function simulateInto(scenario: string, folder: string): string[] {
  const files = simulateScenario(loadScenario(scenario).config, pcg32);
  for (const [path, content] of files) writeWhole(join(folder, ...path.split("/")), content);
  return [...files.keys()];
}
