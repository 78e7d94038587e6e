import { SampleFlag } from "./types.js";

const WORDS: readonly (readonly [bit: number, words: string])[] = [
  [SampleFlag.OverRange, "instrument over range"],
  [SampleFlag.NotANumber, "no reading"],
  [SampleFlag.TimeNotIncreasing, "time not increasing"],
  [SampleFlag.Ragged, "line with missing or surplus cells"],
  [SampleFlag.Excluded, "in an excluded span"],
  [SampleFlag.OutsideCalibration, "outside the calibration"],
];

/** What a person reads for the bits of a {@link SampleFlag}; empty for a good sample. */
export function sampleFlagWords(flag: number): string[] {
  return WORDS.filter(([bit]) => (flag & bit) !== 0).map(([, words]) => words);
}
