import { BODY, type CellEquations, cellEquations, LIQUID, SENSOR, STAGE } from "./cell-equations.js";
import {
  type CellHeat,
  heatContent_J,
  heatOfCell,
  temperatureOfContent_K,
  totalHeat_J_per_K,
} from "./heat-of-cell.js";
import { type DrivenPulse, type HeaterColumns, readHeater } from "./heater-log.js";
import { normal } from "./random.js";
import { rodas4 } from "./rodas4.js";
import type { Scenario } from "./scenario.js";
import { reader } from "./thermometer.js";

/** What is true of each pulse. Every column has length n. */
export interface TruePulses {
  /** On the thermometer's clock. */
  readonly start_s: Float64Array;
  readonly duration_s: Float64Array;
  /** Heat that reached the body, lead heat included. */
  readonly Q_J: Float64Array;
  readonly lead_heat_J: Float64Array;
  /** Body and liquid in balance, at the start of the pulse. */
  readonly T_before_K: Float64Array;
  /** To where Q alone brings them. */
  readonly T_after_K: Float64Array;
  readonly T_K: Float64Array;
  /** At T_K itself, not the mean over the step. */
  readonly C_total_J_per_K: Float64Array;
}

/** True temperatures at the thermometer's readings. Every column has length n. */
export interface TrueTrace {
  readonly body_K: Float64Array;
  /** The body's own where there is no liquid. */
  readonly liquid_K: Float64Array;
  readonly stage_K: Float64Array;
}

export interface SimulatedNight {
  /** As read: spikes and over-range numbers included. Every column has length n. */
  readonly thermometer: { readonly time_s: Float64Array; readonly resistance_Ohm: Float64Array };
  readonly heater: HeaterColumns;
  readonly stage: { readonly time_s: Float64Array; readonly temperature_K: Float64Array } | null;
  readonly truth: { readonly pulses: TruePulses; readonly trace: TrueTrace };
}

export interface SimulationOptions {
  /** Error of one step, relative. At 1e-10 a night is within 1e-8 of its limit (night.test.ts). */
  readonly tolerance: number;
  /** Tables of heat capacity, where a caller has them already. */
  readonly heat?: CellHeat;
}

/** Instruments write times in ms. */
const toMilliseconds = (time_s: number) => Math.round(time_s * 1000) / 1000;
/** A source is set to so many digits. */
const toSourceDigits = (current_A: number) => Number(current_A.toPrecision(5));

/**
 * One night in the laboratory: the stage is stepped through its set points, the heater pulsed, the thermometer read.
 * @param random uniform in [0, 1); the only source of chance
 * @throws DomainError if the cell leaves the range of its tables (heatOfCell)
 */
export function simulateNight(
  scenario: Scenario,
  random: () => number,
  options: SimulationOptions = { tolerance: 1e-10 },
): SimulatedNight {
  const { cell, protocol, sampling } = scenario;
  const heat = options.heat ?? heatOfCell(scenario);
  const equations = cellEquations(cell, heat, {
    stage_s: protocol.stageTimeConstant_s,
    lag_s: scenario.thermometer.lag_s,
  });
  const integrator = rodas4(equations, options.tolerance);
  const y = initialState(scenario, equations);
  const record = recorder(scenario, random);
  const edges = [...new Set(scenario.disturbances.flatMap(({ from_s, to_s }) => [from_s, to_s]))].sort(
    (a, b) => a - b,
  );
  let now_s = 0;
  record.read(y);

  /** Integrates with the heater at one power, stopping at each reading and wherever a disturbance begins or ends. */
  function runUntil(end_s: number, heater_W: number): void {
    while (now_s < end_s) {
      const reading_s = record.next_s();
      const edge_s = edges.find((time) => time > now_s) ?? Number.POSITIVE_INFINITY;
      const to_s = Math.min(end_s, reading_s, edge_s);
      equations.drive.heater_W = heater_W;
      for (const { from_s, to_s: until_s, power_W } of scenario.disturbances) {
        if (now_s >= from_s && now_s < until_s) equations.drive.heater_W += power_W;
      }
      integrator.advance(y, to_s - now_s);
      now_s = to_s;
      if (to_s === reading_s) record.read(y);
    }
  }

  const pulses: DrivenPulse[] = [];
  const truth: TruePulse[] = [];
  for (const setting_K of protocol.settings_K) {
    equations.drive.setting_K = setting_K;
    runUntil(now_s + protocol.settle_s, 0);
    for (let i = 0; i < protocol.pulsesPerSetting; i++) {
      // The heater's programme knows nothing of when the thermometer is read.
      runUntil(toMilliseconds(now_s + sampling.interval_s * random()), 0);
      const before = { body_K: y[BODY]!, liquid_K: heat.liquid === null ? y[BODY]! : y[LIQUID]! };
      const pulse = planPulse(scenario, heat, before, now_s);
      pulses.push(pulse.driven);
      truth.push(pulse.truth);
      const power_W = pulse.truth.Q_J / protocol.pulseLength_s;
      const off_s = toMilliseconds(now_s + protocol.pulseLength_s);
      if (protocol.stepInPulse_K > 0) {
        runUntil(now_s + protocol.pulseLength_s / 2, power_W);
        equations.drive.setting_K +=
          pulses.length % 2 === 1 ? protocol.stepInPulse_K : -protocol.stepInPulse_K;
      }
      runUntil(off_s, power_W);
      runUntil(toMilliseconds(now_s + protocol.wait_s), 0);
    }
  }

  const readings = record.columns();
  const column = (key: keyof TruePulse) => Float64Array.from(truth, (pulse) => pulse[key]);
  return {
    thermometer: { time_s: readings.time_s, resistance_Ohm: readings.resistance_Ohm },
    heater: readHeater(pulses, now_s, cell, scenario.heater, random),
    stage: readStage(scenario, readings, random),
    truth: {
      pulses: {
        start_s: column("start_s"),
        duration_s: column("duration_s"),
        Q_J: column("Q_J"),
        lead_heat_J: column("lead_heat_J"),
        T_before_K: column("T_before_K"),
        T_after_K: column("T_after_K"),
        T_K: column("T_K"),
        C_total_J_per_K: column("C_total_J_per_K"),
      },
      trace: { body_K: readings.body_K, liquid_K: readings.liquid_K, stage_K: readings.stage_K },
    },
  };
}

function initialState(scenario: Scenario, equations: CellEquations): Float64Array {
  const { cell, protocol } = scenario;
  const stage_K = protocol.settings_K[0]!;
  let T_K = stage_K;
  if (protocol.start === "balanced") {
    // Leak in, link out: Newton's method on a function whose slope, κT^p, never changes sign.
    for (let round = 0; round < 60; round++) {
      const missing_W = cell.heatLeak_W - equations.linkHeat_W(T_K, stage_K);
      T_K += missing_W / (cell.link.coefficient * T_K ** cell.link.power);
    }
  }
  equations.drive.setting_K = stage_K;
  const y = new Float64Array(4);
  y[STAGE] = stage_K;
  y[BODY] = T_K;
  y[LIQUID] = T_K;
  y[SENSOR] = T_K;
  return y;
}

interface TruePulse {
  readonly start_s: number;
  readonly duration_s: number;
  readonly Q_J: number;
  readonly lead_heat_J: number;
  readonly T_before_K: number;
  readonly T_after_K: number;
  readonly T_K: number;
  readonly C_total_J_per_K: number;
}

/** The current that brings about the wanted rise, and what that pulse truly does. */
function planPulse(
  scenario: Scenario,
  heat: CellHeat,
  before: { readonly body_K: number; readonly liquid_K: number },
  start_s: number,
): { driven: DrivenPulse; truth: TruePulse } {
  const { heaterResistance_Ohm, leadResistance_Ohm, leadShare } = scenario.cell;
  const { pulseLength_s: duration_s, rise } = scenario.protocol;
  const content_J = heatContent_J(heat, before.body_K, before.liquid_K);
  const T_before_K = temperatureOfContent_K(heat, content_J, before.body_K);
  const aim_K = T_before_K * (1 + rise);
  const wanted_J = heatContent_J(heat, aim_K, aim_K) - content_J;
  const warming_Ohm = heaterResistance_Ohm + leadShare * leadResistance_Ohm;
  const current_A = toSourceDigits(Math.sqrt(wanted_J / (duration_s * warming_Ohm)));
  const Q_J = current_A ** 2 * warming_Ohm * duration_s;
  const T_after_K = temperatureOfContent_K(heat, content_J + Q_J, aim_K);
  const T_K = (T_before_K + T_after_K) / 2;
  return {
    driven: { start_s, end_s: toMilliseconds(start_s + duration_s), current_A },
    truth: {
      start_s,
      duration_s,
      Q_J,
      lead_heat_J: current_A ** 2 * leadShare * leadResistance_Ohm * duration_s,
      T_before_K,
      T_after_K,
      T_K,
      C_total_J_per_K: totalHeat_J_per_K(heat, T_K),
    },
  };
}

interface Readings extends TrueTrace {
  readonly time_s: Float64Array;
  readonly resistance_Ohm: Float64Array;
}

/** Reads the thermometer at its times; columns grow as the night goes on. */
function recorder(scenario: Scenario, random: () => number) {
  const { interval_s, jitter_s, gaps } = scenario.sampling;
  const read = reader(scenario.thermometer, random);
  const time_s: number[] = [];
  const resistance_Ohm: number[] = [];
  const body_K: number[] = [];
  const liquid_K: number[] = [];
  const stage_K: number[] = [];
  const hasLiquid = scenario.filling !== null;
  let count = 0;
  let last_s = -interval_s;
  let next_s = 0;
  function schedule(): void {
    count++;
    // Never two readings at one time, however late the first one was.
    const late_s = jitter_s > 0 ? jitter_s * random() : 0;
    next_s = Math.max(toMilliseconds(count * interval_s + late_s), toMilliseconds(next_s + 0.001));
  }
  return {
    next_s: () => next_s,
    read(y: Float64Array): void {
      if (!gaps.some(({ from_s, to_s }) => next_s >= from_s && next_s < to_s)) {
        time_s.push(next_s);
        resistance_Ohm.push(read(scenario.thermometer.lag_s > 0 ? y[SENSOR]! : y[BODY]!, next_s - last_s));
        body_K.push(y[BODY]!);
        liquid_K.push(hasLiquid ? y[LIQUID]! : y[BODY]!);
        stage_K.push(y[STAGE]!);
      }
      last_s = next_s;
      schedule();
    },
    columns: (): Readings => ({
      time_s: Float64Array.from(time_s),
      resistance_Ohm: Float64Array.from(resistance_Ohm),
      body_K: Float64Array.from(body_K),
      liquid_K: Float64Array.from(liquid_K),
      stage_K: Float64Array.from(stage_K),
    }),
  };
}

function readStage(scenario: Scenario, readings: Readings, random: () => number): SimulatedNight["stage"] {
  if (scenario.stageReading === null) return null;
  const { every, noise_K } = scenario.stageReading;
  const count = Math.ceil(readings.time_s.length / every);
  return {
    time_s: Float64Array.from({ length: count }, (_, i) => readings.time_s[i * every]!),
    temperature_K: Float64Array.from(
      { length: count },
      (_, i) => readings.stage_K[i * every]! + noise_K * normal(random),
    ),
  };
}
