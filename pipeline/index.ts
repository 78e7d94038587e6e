/** All that the command line does, for programs and notebooks. The command line is thin over this. */

export type { HeatCapacity } from "../stages/combine/types.js";
export { DomainError, InputError } from "../stages/errors.js";
export type { PulseTable } from "../stages/pulses/types.js";
export { separate } from "../stages/separate/separate.js";
export type { Separation, SeparationConfig, SeparationInput } from "../stages/separate/types.js";
export { analyseCampaign, type CampaignResult } from "./chain.js";
export { type CheckedFile, checkFile } from "./check.js";
export { type Campaign, loadCampaign } from "./config/campaign.js";
export { effectiveConfig } from "./config/effective.js";
export { loadCell, loadRun, loadSample, loadScenario, loadThermometer } from "./config/load.js";
export { jsonSchema } from "./config/schemas.js";
export { type FillPressure, fillPressure } from "./fill-pressure.js";
export { heliumShape } from "./helium-shape.js";
export { type Night, reduceNight } from "./night.js";
export { type NightlyResult, nightlyRecord, nightlyText, runNightly } from "./nightly/nightly.js";
export { publishCampaign } from "./publish.js";
export { readCalibration, readNight } from "./read-night.js";
export { reduceRun } from "./reduce.js";
export { separateTable } from "./separate-table.js";
export { simulateInto } from "./simulate.js";
