import { DomainError, InputError } from "../errors.js";
import { issueCalibration } from "./calibration.js";
import { completeNight, type ScenarioConfig } from "./config.js";
import { configFiles, folderOf } from "./config-files.js";
import { drawLaboratory, scenarioOfNight } from "./laboratory.js";
import { simulateNight } from "./night.js";
import { type ToldNight, writeNight } from "./write-night.js";

/** A generator of uniform numbers in [0, 1) from a seed. */
export type Generator = (seed: number) => () => number;

/**
 * Every night of a scenario, simulated but not yet written.
 * @throws InputError naming the night whose cell runs away
 */
export function tellNights(config: ScenarioConfig, generator: Generator): ToldNight[] {
  const laboratory = drawLaboratory(config, generator(config.seed));
  return config.nights.map((spec, i) => {
    const seed = spec.seed ?? 1000 * config.seed + i + 1;
    const random = generator(seed);
    const night = completeNight(config, spec);
    const scenario = scenarioOfNight(config, night, laboratory, random);
    try {
      return { config, night, seed, laboratory, scenario, simulated: simulateNight(scenario, random) };
    } catch (error) {
      if (!(error instanceof DomainError)) throw error;
      throw new InputError({
        key: `nights.${i}`,
        value: spec.run,
        expected: `a night that stays near its set points, but ${error.message}`,
        wayOut: "lower heat_leak, rise or per_setting, or strengthen link",
      });
    }
  });
}

/**
 * All files of a scenario: FOLDER/RUN/… for each night, and configurations beside them where wanted.
 * @returns path relative to the scenario's folder, with /, → content; same scenario, same bytes
 */
export function simulateScenario(config: ScenarioConfig, generator: Generator): Map<string, string> {
  const files = new Map<string, string>();
  const nights = tellNights(config, generator);
  for (const told of nights) {
    const folder = `${folderOf(config, told.night)}/${told.night.run}`;
    for (const [file, content] of writeNight(told)) files.set(`${folder}/${file}`, content);
  }
  if (config.configs === "beside") {
    const calibration = issueCalibration(config.thermometer, nights[0]!.laboratory.calibrationError_K);
    for (const [file, content] of configFiles(config, calibration)) files.set(file, content);
  }
  return files;
}
