import { PulseFlag } from "./types.js";

/** One reason to doubt a pulse: its bit, its name in configuration and tables, and what a person should read. */
export interface FlagWords {
  readonly bit: number;
  readonly name: string;
  readonly words: string;
}

export const PULSE_FLAGS: readonly FlagWords[] = [
  { bit: PulseFlag.NoData, name: "no-data", words: "too few thermometer samples before or after the pulse" },
  { bit: PulseFlag.RiseTooSmall, name: "rise-too-small", words: "temperature rise too small to be measured" },
  { bit: PulseFlag.RiseTooLarge, name: "rise-too-large", words: "temperature rise too large a part of T" },
  {
    bit: PulseFlag.DriftTooStrong,
    name: "drift-too-strong",
    words: "drift during the pulse rivals the rise",
  },
  { bit: PulseFlag.NotSettled, name: "not-settled", words: "settling takes over a third of the window" },
  { bit: PulseFlag.SamplesMissing, name: "samples-missing", words: "samples missing under the fit" },
  { bit: PulseFlag.Spikes, name: "spikes", words: "too many spikes under the fit" },
  {
    bit: PulseFlag.OutsideCalibration,
    name: "outside-calibration",
    words: "resistance outside the thermometer's calibration",
  },
  {
    bit: PulseFlag.HeaterResistance,
    name: "heater-resistance",
    words: "heater resistance off the night's median",
  },
  {
    bit: PulseFlag.Truncated,
    name: "truncated",
    words: "window cut short by the end of the log or the next pulse",
  },
  { bit: PulseFlag.Vetoed, name: "vetoed", words: "vetoed in run.yaml" },
  {
    bit: PulseFlag.ZeroEnergy,
    name: "zero-energy",
    words: "pulse of no energy or no length, or heater reading missing",
  },
  {
    bit: PulseFlag.VoltageInverted,
    name: "voltage-inverted",
    words: "voltage and current of opposite sign: lead swapped?",
  },
  {
    bit: PulseFlag.HeaterLeftOn,
    name: "heater-left-on",
    words: "heater still on when the log ends or the next pulse begins",
  },
  {
    bit: PulseFlag.SlowBoundary,
    name: "slow-boundary",
    words: "body and liquid take over a third of the window to come to one temperature",
  },
  {
    bit: PulseFlag.StageNotSteady,
    name: "stage-not-steady",
    words: "stage moved by enough to matter during the pulse or its drifts",
  },
  {
    bit: PulseFlag.Unexplained,
    name: "unexplained",
    words: "no method describes the trace: heat that no log shows, or a cell of another kind",
  },
  {
    bit: PulseFlag.HeaterUnsteady,
    name: "heater-unsteady",
    words: "heater power changed during the pulse",
  },
  {
    bit: PulseFlag.ReadingJumps,
    name: "reading-jumps",
    words: "reading jumped soon after the pulse: a change of range?",
  },
];

export const PULSE_FLAG_NAMES: readonly string[] = PULSE_FLAGS.map((flag) => flag.name);

/** The bits set in `flag`, as their names. */
export function flagNames(flag: number): string[] {
  return PULSE_FLAGS.filter(({ bit }) => (flag & bit) !== 0).map(({ name }) => name);
}

/** The bits of the flags named. Names come from the configuration, already checked. */
export function flagBits(names: readonly string[]): number {
  return PULSE_FLAGS.reduce((bits, { bit, name }) => (names.includes(name) ? bits | bit : bits), 0);
}
