import { basename } from "node:path";
import { InputError } from "../stages/errors.js";
import { sampleFlagWords } from "../stages/ingest/flag-words.js";
import type { RawNight } from "../stages/ingest/types.js";
import { analysePulses } from "../stages/pulses/analyse.js";
import {
  type ClockOffset,
  clockOffset,
  NO_OFFSET,
  onThermometerClock,
} from "../stages/pulses/clock-offset.js";
import type { HeaterConfig, PulsesConfig } from "../stages/pulses/config.js";
import { type HeaterPulses, heaterPulses } from "../stages/pulses/heater-pulses.js";
import type { PulsePicture, PulseTable } from "../stages/pulses/types.js";
import { scaleNotes } from "../stages/thermometry/scale.js";
import { toTemperature } from "../stages/thermometry/to-temperature.js";
import type { Calibration } from "../stages/thermometry/types.js";
import type { Cell, Run } from "./config/load.js";

/** A source that is common to all heats of a night: relative change of Q, one row a pulse, per standard uncertainty. */
export interface EffectOfHeat {
  readonly name: string;
  readonly title: string;
  readonly relative: Float64Array;
}

/** One night, reduced: ingest, thermometry, pulses. */
export interface Night {
  readonly run: string;
  readonly table: PulseTable;
  readonly pictures: readonly PulsePicture[];
  readonly clock: ClockOffset;
  readonly u_temperature_K: number;
  readonly heatSources: readonly EffectOfHeat[];
  /** What a person should know of the night. */
  readonly notes: readonly string[];
}

/** @throws InputError for a forced method that is not there */
export function reduceNight(
  raw: RawNight,
  calibration: Calibration,
  run: Run,
  cell: Cell,
  config: PulsesConfig,
): Night {
  requireMethod(config);
  const trace = toTemperature(raw.thermometer, calibration);
  const { heater } = cell.config;
  const { heater: log } = run.config.logs;
  const read = heaterPulses(
    raw.heater,
    { lead_resistance_Ohm: heater.lead_resistance.value, lead_share: heater.lead_share.value },
    log.kind === "sampled" ? (log.pulse_length ?? null) : null,
  );
  const clock = clockOf(run, () => clockOffset(trace, read));
  const pulses = onThermometerClock(read, clock.offset_s);
  const verdicts = run.config.veto.map(({ pulse, reason, keep }) => ({ pulse, reason, keep: keep === true }));
  const { table, pictures } = analysePulses({ trace, heater: pulses, verdicts, config });
  return {
    run: run.run,
    table,
    pictures,
    clock,
    u_temperature_K: calibration.u_temperature_K,
    heatSources: heatSources(run.run, pulses, heater),
    notes: [
      ...raw.notes.map(
        ({ file, line, count, text }) =>
          `${basename(file)}${line === undefined ? "" : `:${line}`}: ${text}${count > 1 ? ` (${count} times)` : ""}`,
      ),
      ...flaggedSamples(trace.flag),
      ...scaleNotes(calibration),
      ...(clock.applied
        ? [`heater clock moved by ${clock.offset_s.toFixed(2)} s ± ${clock.u_s.toFixed(2)} s`]
        : []),
    ],
  };
}

function clockOf(run: Run, estimate: () => ClockOffset): ClockOffset {
  const given = run.config.clock.heater_offset;
  if (given === "auto") return estimate();
  return {
    ...NO_OFFSET,
    offset_s: given.value,
    estimate_s: given.value,
    u_s: given.u,
    applied: given.value !== 0,
  };
}

function flaggedSamples(flag: Uint8Array): string[] {
  const counts = new Map<number, number>();
  for (const bits of flag) if (bits !== 0) counts.set(bits, (counts.get(bits) ?? 0) + 1);
  return [...counts].map(([bits, count]) => `${count} samples: ${sampleFlagWords(bits).join(", ")}`);
}

/** Each ± of the heater, as a relative change of the heat of each pulse. */
function heatSources(run: string, pulses: HeaterPulses, heater: HeaterConfig): EffectOfHeat[] {
  const column = (of: (i: number) => number): Float64Array =>
    Float64Array.from(pulses.pulse, (_, i) => of(i));
  const leads = (i: number): number => pulses.lead_heat_J[i]! / pulses.Q_J[i]!;
  // What a whole ohm of leads would add, all of it inward.
  const perOhm = (i: number): number => pulses.currentSquared_A2s[i]! / pulses.Q_J[i]!;
  const { lead_share: share, lead_resistance: resistance } = heater;
  return [
    {
      name: "lead_share",
      title: "share of lead heat",
      relative: column((i) => perOhm(i) * resistance.value * share.u),
    },
    {
      name: "lead_resistance",
      title: "lead resistance",
      // A share of 0 ± u does not make the resistance certain: what flows in may be u of it.
      relative: column((i) => perOhm(i) * resistance.u * Math.hypot(share.value, share.u)),
    },
    {
      name: "heater_current",
      title: "heater current scale",
      relative: column((i) => heater.current_gain.value * (1 + leads(i))),
    },
    {
      name: "heater_voltage",
      title: "heater voltage scale",
      relative: column((i) => heater.voltage_gain.value * (1 - leads(i))),
    },
    {
      // Each night's own: another night is sampled in another step.
      name: `pulse_length_${run.toLowerCase().replace(/[^a-z0-9]+/g, "_")}`,
      title: `pulse length, night ${run}`,
      relative: pulses.u_length_relative,
    },
  ];
}

/** One method serves every pulse so far; another is refused by name, never replaced in silence. */
function requireMethod({ method }: PulsesConfig): void {
  if (method === "auto" || method === "drift") return;
  throw new InputError({
    key: "reduction.pulses.method",
    value: method,
    expected: "auto or drift: the others are not in this version",
    wayOut: "write method: auto; stages/pulses/README.md says for which cells drift lines are not enough",
  });
}
