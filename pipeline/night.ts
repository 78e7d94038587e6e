import { basename } from "node:path";
import { sampleFlagWords } from "../stages/ingest/flag-words.js";
import type { RawNight } from "../stages/ingest/types.js";
import { analysePulses } from "../stages/pulses/analyse.js";
import { type Contents, localLaw } from "../stages/pulses/cell-laws.js";
import {
  type ClockOffset,
  clockOffset,
  NO_OFFSET,
  onThermometerClock,
} from "../stages/pulses/clock-offset.js";
import type { HeaterConfig, PulsesConfig } from "../stages/pulses/config.js";
import { type HeaterPulses, heaterPulses, leftOnAtEnd } from "../stages/pulses/heater-pulses.js";
import type { PulseMethod, PulsePicture, PulseTable } from "../stages/pulses/types.js";
import { samplingInterval_s } from "../stages/pulses/window.js";
import { scaleNotes } from "../stages/thermometry/scale.js";
import { selfHeatingEffect } from "../stages/thermometry/self-heating.js";
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

/** @param contents what is in the cell, and what is known of the body that holds it */
export function reduceNight(
  raw: RawNight,
  calibration: Calibration,
  run: Run,
  cell: Cell,
  config: PulsesConfig,
  contents: Contents,
): Night {
  const trace = toTemperature(raw.thermometer, calibration);
  const { heater } = cell.config;
  const { heater: log } = run.config.logs;
  const read = heaterPulses(
    raw.heater,
    { lead_resistance_Ohm: heater.lead_resistance.value, lead_share: heater.lead_share.value },
    log.kind === "sampled" ? (log.pulse_length ?? null) : null,
  );
  const clock = clockOf(run, () => clockOffset(trace, read, calibration.lag_s));
  const pulses = leftOnAtEnd(
    onThermometerClock(read, clock),
    trace.time_s[trace.time_s.length - 1] ?? Number.NaN,
  );
  const verdicts = run.config.veto.map(({ pulse, reason, keep }) => ({ pulse, reason, keep: keep === true }));
  const { table, pictures } = analysePulses({
    trace,
    heater: pulses,
    stage: raw.stage,
    contents,
    u_clock_s: clockLeft_s(clock, trace.time_s),
    lag_s: calibration.lag_s,
    // An edge lies anywhere between two samples of the heater.
    u_start_s: raw.heater.kind === "events" ? 0 : samplingInterval_s(raw.heater.time_s) / Math.sqrt(12),
    verdicts,
    config,
  });
  return {
    run: run.run,
    table,
    pictures,
    clock,
    u_temperature_K: calibration.u_temperature_K,
    heatSources: [...heatSources(run.run, pulses, heater), ...riseSources(calibration, table)],
    notes: [
      ...raw.notes.map(
        ({ file, line, count, text }) =>
          `${basename(file)}${line === undefined ? "" : `:${line}`}: ${text}${count > 1 ? ` (${count} times)` : ""}`,
      ),
      ...flaggedSamples(trace.flag),
      ...scaleNotes(calibration),
      ...methodNotes(table, contents),
      ...(clock.applied
        ? [
            `heater clock moved by ${clock.offset_s.toFixed(2)} s ± ${clock.u_s.toFixed(2)} s${
              clock.rate === 0 ? "" : `, and by ${(3600 * clock.rate).toPrecision(2)} s an hour`
            }`,
          ]
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

/** What may be left between the clocks: never less than what lies hidden between two samples. */
function clockLeft_s(clock: ClockOffset, time_s: Float64Array): number {
  const hidden_s = samplingInterval_s(time_s) / 4;
  return Number.isFinite(clock.u_s) ? Math.hypot(clock.u_s, hidden_s) : hidden_s;
}

/**
 * What is common to all rises of a night, as a relative change of C. An offset of the scale cancels in a rise; an error of
 * its slope does not, and a self-heating that changes within the rise does not either. Self-heating moves T too, and with it
 * the C that belongs there: for C ∝ T³ at constant power the two cancel.
 */
function riseSources(calibration: Calibration, { T_K, dT_K, C_total_J_per_K }: PulseTable): EffectOfHeat[] {
  const { relative, shift_K } = selfHeatingEffect(calibration, T_K, dT_K);
  const heated = (i: number): number => {
    const { power } = localLaw(T_K, C_total_J_per_K, T_K[i]!, (T) => T ** 3);
    const change = relative[i]! - (power * shift_K[i]!) / T_K[i]!;
    return Number.isFinite(change) ? change : 0;
  };
  return [
    {
      name: "temperature_slope",
      title: "slope of the thermometer scale",
      relative: T_K.map(() => -calibration.u_slope),
    },
    {
      name: "self_heating",
      title: "self-heating of the thermometer",
      relative: calibration.selfHeating === null ? T_K.map(() => 0) : T_K.map((_, i) => heated(i)),
    },
  ];
}

/** Which pulses asked for a model, and what that rests on. */
function methodNotes(table: PulseTable, contents: Contents): string[] {
  const count = (method: PulseMethod): number => table.method.filter((each) => each === method).length;
  const [two, one] = [count("two-body"), count("relaxation")];
  if (two + one === 0) return [];
  const parts = [
    ...(two > 0 ? [`${two} with body and liquid`] : []),
    ...(one > 0 ? [`${one} with one body`] : []),
  ];
  return [
    `forward model for ${two + one} of ${table.method.length} pulses: ${parts.join(", ")}`,
    ...(two > 0 && contents.kind === "filled" && contents.body === null
      ? [
          "the body's own heat capacity is not known to the model: with the campaign's addenda its pulses are surer",
        ]
      : []),
  ];
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
