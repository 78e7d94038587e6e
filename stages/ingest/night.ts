import { Defect, InputError } from "../errors.js";
import type { LogColumns } from "./columns.js";
import type { ExcludedSpan, RunConfig } from "./config.js";
import { summarize } from "./summary.js";
import { timeKind } from "./time.js";
import type { HeaterLog, LogSummary, Note, RawNight, StageLog } from "./types.js";
import { SampleFlag } from "./types.js";

/** An excluded span on the night's time axis, both ends belonging to it. */
interface Span {
  readonly from_s: number;
  readonly to_s: number;
}

function spansOf(exclude: readonly ExcludedSpan[], origin_epoch_s: number | null): Span[] {
  return exclude.map(({ from, to }, i) => {
    const onAxis = (moment: ExcludedSpan["from"], end: "from" | "to") => {
      if (moment.kind === "elapsed") return moment.time_s;
      if (origin_epoch_s !== null) return moment.epoch_s - origin_epoch_s;
      throw new InputError({
        key: `exclude[${i}].${end}`,
        value: moment.text,
        expected: "a time on the log's own clock, which carries no dates",
        wayOut: 'write it as the log counts, such as "1200 s"',
      });
    };
    return { from_s: onAxis(from, "from"), to_s: onAxis(to, "to") };
  });
}

const isIn = (spans: readonly Span[], time_s: number) =>
  spans.some(({ from_s, to_s }) => time_s >= from_s && time_s <= to_s);

/** Throws the first fault that no excluded span covers. A sample without a time is where the one before it is. */
function settleFaults(columns: LogColumns, time_s: Float64Array, spans: readonly Span[]): Note[] {
  for (const { sample, error } of columns.faults) {
    let at = sample;
    while (at > 0 && Number.isNaN(time_s[at]!)) at--;
    if (!isIn(spans, time_s[at]!)) throw error;
  }
  const line = columns.faults[0]?.error.fault.line;
  if (line === undefined) return [];
  const text = "text where a number should be, in an excluded span";
  return [{ file: columns.file, line, count: columns.faults.length, text }];
}

function fromOrigin(time_s: Float64Array, origin_epoch_s: number | null): Float64Array {
  if (origin_epoch_s === null) return time_s;
  const elapsed_s = new Float64Array(time_s.length);
  for (let i = 0; i < time_s.length; i++) elapsed_s[i] = time_s[i]! - origin_epoch_s;
  return elapsed_s;
}

/** The elements that are kept; the column itself where that is all of them. (TypedArray.filter takes seconds here.) */
function pick(column: Float64Array, keep: (i: number) => boolean): Float64Array {
  let kept = 0;
  for (let i = 0; i < column.length; i++) if (keep(i)) kept++;
  if (kept === column.length) return column;
  const picked = new Float64Array(kept);
  for (let i = 0, at = 0; i < column.length; i++) if (keep(i)) picked[at++] = column[i]!;
  return picked;
}

/** Samples without a time of their own have no place in a log that carries no flags. */
const hasTime = (columns: LogColumns) => (i: number) =>
  (columns.flag[i]! & SampleFlag.TimeNotIncreasing) === 0;

/** Rows in order of their times; those without a time come last. */
function chronological(time_s: Float64Array): { order: number[]; sorted: boolean } {
  const key = (i: number) => (Number.isNaN(time_s[i]!) ? Number.POSITIVE_INFINITY : time_s[i]!);
  const order = Array.from(time_s, (_, i) => i);
  const sorted = order.every((i) => i === 0 || key(i) >= key(i - 1));
  if (!sorted) order.sort((a, b) => (key(a) === key(b) ? a - b : key(a) < key(b) ? -1 : 1));
  return { order, sorted };
}

interface Part<Log> {
  readonly log: Log;
  readonly summary: LogSummary;
  readonly notes: readonly Note[];
}

function heaterPart(columns: LogColumns, time_s: Float64Array): Part<HeaterLog> {
  const { readings, file, dialect } = columns;
  if (columns.kind === "sampled") {
    const [current, voltage] = readings as readonly [Float64Array, Float64Array];
    const keep = hasTime(columns);
    const log: HeaterLog = {
      kind: "sampled",
      time_s: pick(time_s, keep),
      current_A: pick(current, keep),
      voltage_V: pick(voltage, keep),
    };
    const usable = pick(log.time_s, (i) => !Number.isNaN(log.current_A[i]!));
    return { log, summary: summarize("heater", file, time_s.length, usable, "sampled", dialect), notes: [] };
  }
  const { order, sorted } = chronological(time_s);
  const [duration, current, voltage] = readings as readonly [Float64Array, Float64Array, Float64Array];
  const inOrder = (column: Float64Array) => Float64Array.from(order, (i) => column[i]!);
  const log: HeaterLog = {
    kind: "events",
    time_s: inOrder(time_s),
    duration_s: inOrder(duration),
    current_A: inOrder(current),
    voltage_V: inOrder(voltage),
  };
  const usable = pick(
    log.time_s,
    (i) => !Number.isNaN(log.time_s[i]! + log.duration_s[i]! + log.current_A[i]! + log.voltage_V[i]!),
  );
  return {
    log,
    summary: summarize("heater", file, time_s.length, usable, "events", dialect),
    notes: sorted
      ? []
      : [
          {
            file,
            count: 1,
            text: "pulses were not in order of time; they are sorted, and numbered in that order",
          },
        ],
  };
}

function stagePart(columns: LogColumns, time_s: Float64Array): Part<StageLog> {
  const keep = hasTime(columns);
  const log: StageLog = { time_s: pick(time_s, keep), temperature_K: pick(columns.readings[0]!, keep) };
  const usable = pick(log.time_s, (i) => !Number.isNaN(log.temperature_K[i]!));
  return {
    log,
    summary: summarize("stage", columns.file, time_s.length, usable, "sampled", columns.dialect),
    notes: [],
  };
}

/**
 * Puts the logs of a night on one time axis. Relative times stay as written; absolute times count from the first
 * usable thermometer sample, and `origin_epoch_s` says when that was.
 * @param columns what {@link readLogFile} gave, of all files of the night, in any order
 * @throws InputError if a text among the numbers is not in an excluded span, if relative and absolute logs are mixed,
 * or if the thermometer has no usable sample
 */
export function assembleNight(columns: readonly LogColumns[], run: Pick<RunConfig, "exclude">): RawNight {
  const ofLog = (log: LogColumns["log"]) => columns.find((candidate) => candidate.log === log);
  const thermometer = ofLog("thermometer");
  const heater = ofLog("heater");
  const stage = ofLog("stage");
  if (thermometer === undefined || heater === undefined)
    throw new Defect("a night without thermometer or heater");
  const kind = timeKind(thermometer.timeUnit);
  for (const other of [heater, stage])
    if (other !== undefined && timeKind(other.timeUnit) !== kind)
      throw new InputError({
        file: other.file,
        key: `logs.${other.log}.time.unit`,
        value: other.timeUnit,
        expected: `${kind === "absolute" ? "dates or Unix time" : "times from the log's own zero"}, as in the thermometer's log ${thermometer.file}`,
        wayOut: "have both instruments log dates, or both log seconds from one start",
      });

  const firstUsable = thermometer.flag.indexOf(0);
  if (firstUsable < 0) {
    if (thermometer.faults[0] !== undefined) throw thermometer.faults[0].error;
    throw new InputError({
      file: thermometer.file,
      expected: "at least one usable reading of the thermometer, but every one is a gap or over range",
      wayOut: "check the column that logs.thermometer.resistance names, and the instrument's range",
    });
  }
  const origin_epoch_s = kind === "absolute" ? thermometer.time_s[firstUsable]! : null;
  const spans = spansOf(run.exclude, origin_epoch_s);
  const axis = (log: LogColumns) => fromOrigin(log.time_s, origin_epoch_s);

  const time_s = axis(thermometer);
  const faultNotes = settleFaults(thermometer, time_s, spans);
  const resistance_Ohm = spans.length > 0 ? thermometer.readings[0]!.slice() : thermometer.readings[0]!;
  const flag = spans.length > 0 ? thermometer.flag.slice() : thermometer.flag;
  if (spans.length > 0)
    for (let i = 0; i < flag.length; i++)
      if (isIn(spans, time_s[i]!)) {
        flag[i] = flag[i]! | SampleFlag.Excluded;
        resistance_Ohm[i] = Number.NaN;
      }
  const usable_s = pick(time_s, (i) => flag[i] === 0);
  const thermometerSummary = summarize(
    "thermometer",
    thermometer.file,
    flag.length,
    usable_s,
    "sampled",
    thermometer.dialect,
  );

  const heaterTime_s = axis(heater);
  faultNotes.push(...settleFaults(heater, heaterTime_s, spans));
  const heaterRead = heaterPart(heater, heaterTime_s);
  let stageRead: Part<StageLog> | null = null;
  if (stage !== undefined) {
    const stageTime_s = axis(stage);
    faultNotes.push(...settleFaults(stage, stageTime_s, spans));
    stageRead = stagePart(stage, stageTime_s);
  }

  return {
    thermometer: { time_s, resistance_Ohm, flag },
    heater: heaterRead.log,
    stage: stageRead?.log ?? null,
    origin_epoch_s,
    notes: [
      ...columns.flatMap(({ notes }) => notes),
      ...faultNotes,
      ...heaterRead.notes,
      ...(stageRead?.notes ?? []),
    ],
    summaries: [thermometerSummary, heaterRead.summary, ...(stageRead === null ? [] : [stageRead.summary])],
  };
}
