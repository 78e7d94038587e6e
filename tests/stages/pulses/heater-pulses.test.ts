import { describe, expect, test } from "vitest";
import type { HeaterEvents, HeaterSamples } from "../../../stages/ingest/types.js";
import { normal, pcg32 } from "../../../stages/numerics/random.js";
import { flagNames } from "../../../stages/pulses/flags.js";
import { type HeaterPulses, heaterPulses, leftOnAtEnd } from "../../../stages/pulses/heater-pulses.js";
import { expectRelative } from "../../expect-relative.js";

const WIRING = { lead_resistance_Ohm: 0, lead_share: 0.5 };

/** A 1 kΩ heater at 1 mA, 4 s every 100 s from `first_s` on, read at `interval_s`. */
function sampled(
  interval_s: number,
  first_s: number,
  edit: (I: number, V: number) => [number, number],
): HeaterSamples {
  const n = Math.floor(1000 / interval_s);
  const time_s = Float64Array.from({ length: n }, (_, i) => i * interval_s);
  const on = (t: number) => {
    const phase = (((t - first_s) % 100) + 100) % 100;
    return t >= first_s && phase < 4;
  };
  const rows = Array.from(time_s, (t) => (on(t) ? edit(1e-3, 1) : edit(0, 0)));
  return {
    kind: "sampled",
    time_s,
    current_A: Float64Array.from(rows, ([I]) => I),
    voltage_V: Float64Array.from(rows, ([, V]) => V),
  };
}

test("events: energy is VIt, and the inward part of the lead heat comes on top", () => {
  const events = {
    kind: "events",
    time_s: Float64Array.of(10),
    duration_s: Float64Array.of(4),
    current_A: Float64Array.of(1e-3),
    voltage_V: Float64Array.of(1),
  } as const;
  const pulses = heaterPulses(events, { lead_resistance_Ohm: 2.4, lead_share: 0.5 });
  // 1 mW for 4 s, and half of (1 mA)²·2.4 Ω for 4 s; products of short decimals, so rounding only.
  expectRelative(pulses.Q_J, [4e-3 + 0.5 * 2.4e-6 * 4], 1e-14);
  expectRelative(pulses.lead_heat_J, [4.8e-6], 1e-14);
});

test("sampled: pulses in step with the samples", () => {
  const pulses = heaterPulses(
    sampled(0.5, 50, (I, V) => [I, V]),
    WIRING,
  );
  expect(pulses.pulse.length).toBe(10);
  // Eight samples on; each edge is put halfway between two samples.
  expectRelative(pulses.Q_J, new Float64Array(10).fill(4e-3), 1e-12);
  expect(pulses.start_s[0]).toBeCloseTo(49.75, 9);
});

test("sampled: a length that is no multiple of the interval is shared by all pulses", () => {
  const pulses = heaterPulses(
    sampled(0.7, 50.1, (I, V) => [I, V]),
    WIRING,
  );
  const mean = pulses.Q_J.reduce((sum, Q) => sum + Q, 0) / pulses.Q_J.length;
  // Ten repeats: one sees the length to ±0.7/√6 s, their mean to 0.29/√10 = 0.09 s of 4 s.
  expect(Math.abs(mean / 4e-3 - 1)).toBeLessThan(0.05);
  expect(Math.max(...pulses.Q_J) / Math.min(...pulses.Q_J)).toBeCloseTo(1, 12);
});

test("sampled: a thermal voltage and a reading noise do not make pulses or energy", () => {
  const gaussian = normal(pcg32(5));
  const log = sampled(0.5, 50, (I, V) => [I + 1e-8 * gaussian(), V + 2e-4 + 1e-6 * gaussian()]);
  const pulses = heaterPulses(log, WIRING);
  expect(pulses.pulse.length).toBe(10);
  // 2e-4 of voltage offset would show as 2e-4; the readings' noise over eight samples leaves 4e-6.
  expectRelative(pulses.Q_J, new Float64Array(10).fill(4e-3), 3e-5);
});

test("sampled: a bias that heats all night is drift, not pulse", () => {
  const pulses = heaterPulses(
    sampled(0.5, 50, (I, V) => [I + 1e-5, V + 1e-2]),
    WIRING,
  );
  // (1.01 mA)²·1 kΩ less (0.01 mA)²·1 kΩ.
  expectRelative(pulses.Q_J, new Float64Array(10).fill(4 * (1.01e-3 * 1.01 - 1e-7)), 1e-9);
});

test("a heater that is still on when the log ends is named", () => {
  const log = sampled(0.5, 98, (I, V) => [I, V]);
  const pulses = heaterPulses(log, WIRING);
  expect(flagNames(pulses.flag[pulses.flag.length - 1]!)).toContain("heater-left-on");
});

test("sampled: how well the common length is known, and that a programmed one is taken", () => {
  const inStep = heaterPulses(
    sampled(0.5, 50, (I, V) => [I, V]),
    WIRING,
  );
  // Both edges lie anywhere within their 0.5 s, all night the same: 0.5/√6 of 4 s, and no pulse scatters by it.
  expectRelative(inStep.u_length_relative, new Float64Array(10).fill(0.5 / Math.sqrt(6) / 4), 1e-12);
  expectRelative(inStep.u_Q_J, new Float64Array(10), 0);
  const programmed = heaterPulses(
    sampled(0.7, 50.1, (I, V) => [I, V]),
    WIRING,
    { value: 4, u: 0.002 },
  );
  expectRelative(programmed.Q_J, new Float64Array(10).fill(4e-3), 1e-12);
  expectRelative(programmed.u_length_relative, new Float64Array(10).fill(5e-4), 1e-12);
});

/*
 * What a heater log may hold that is no ordinary pulse. Ten pulses of 1 mW, of which the samples show 4 s each, every
 * 0.5 s, in step with them: 50.25 s, 150.25 s and so on. The others must keep their 4 mJ whatever happens to one.
 */
describe("odd runs in a sampled log", () => {
  type Reading = [I: number, V: number] | null;
  const ON: Reading = [1e-3, 1];
  const OFF: Reading = [0, 0];

  /** @param edit what is read at t; `pulse` counts from 0 while the heater is on, else −1; null: no sample */
  function edited(edit: (t: number, pulse: number) => Reading): HeaterSamples {
    const rows: [number, number, number][] = [];
    for (let i = 0; i < 2000; i++) {
      const t = i * 0.5;
      const on = t > 50 && (t - 50.1 + 100) % 100 < 4;
      const reading = edit(t, on ? Math.floor((t - 50.1) / 100) : -1);
      if (reading !== null) rows.push([t, ...reading]);
    }
    const column = (k: number): Float64Array => Float64Array.from(rows, (row) => row[k]!);
    return { kind: "sampled", time_s: column(0), current_A: column(1), voltage_V: column(2) };
  }
  const plain = (pulse: number): Reading => (pulse < 0 ? OFF : ON);
  const names = (pulses: HeaterPulses): string[][] => Array.from(pulses.flag, flagNames);

  /** All rows but those given have 4 mJ, a length shared by the night, and no flag. */
  function othersAreSound(pulses: HeaterPulses, but: readonly number[]): void {
    const others = [...pulses.pulse.keys()].filter((i) => !but.includes(i));
    expectRelative(
      others.map((i) => pulses.Q_J[i]!),
      others.map(() => 4e-3),
      1e-12,
    );
    for (const i of others) {
      expect(names(pulses)[i]).toEqual([]);
      // 0.5/√6 of 4 s, the edges of pulses in step; nothing of a pulse's own.
      expectRelative([pulses.u_length_relative[i]!], [0.5 / Math.sqrt(6) / 4], 1e-12);
      expect(pulses.u_Q_J[i]).toBe(0);
    }
  }

  test("left on to the end of the log", () => {
    const pulses = heaterPulses(
      edited((t, pulse) => (t > 700 ? ON : plain(pulse))),
      WIRING,
    );
    expect(pulses.pulse.length).toBe(8);
    expect(names(pulses)[7]).toEqual(["heater-left-on"]);
    othersAreSound(pulses, [7]);
  });

  test("left on for most of the night: the rest is still the rest", () => {
    const pulses = heaterPulses(
      edited((t, pulse) => (t > 300 ? ON : plain(pulse))),
      WIRING,
    );
    // Taken for the rest, what it was left at would make pulses of the pauses.
    expect([...pulses.start_s]).toEqual([50.25, 150.25, 250.25, 300.25]);
    expect(names(pulses)[3]).toEqual(["heater-left-on"]);
    othersAreSound(pulses, [3]);
  });

  test("on from the first sample", () => {
    const pulses = heaterPulses(
      edited((t, pulse) => (t < 3 ? ON : plain(pulse))),
      WIRING,
    );
    expect(pulses.pulse.length).toBe(11);
    // Nobody saw it begin. There is no flag for that end of the log alone.
    expect(names(pulses)[0]).toEqual(["heater-left-on"]);
    othersAreSound(pulses, [0]);
  });

  test("one sample on its own", () => {
    const pulses = heaterPulses(
      edited((t, pulse) => (t === 100 ? ON : plain(pulse))),
      WIRING,
    );
    expect(pulses.pulse.length).toBe(11);
    expect(names(pulses)[1]).toEqual(["zero-energy"]);
    othersAreSound(pulses, [1]);
  });

  test("pulses of a slow log may well be single samples", () => {
    const slow = sampled(4, 50, (I, V) => [I, V]);
    // 4 s at the 4 s grid: one sample each.
    const pulses = heaterPulses(slow, WIRING);
    expect(names(pulses).flat()).toEqual([]);
  });

  test("two pulses run together by a gap", () => {
    const pulses = heaterPulses(
      edited((t, pulse) => (t > 152 && t < 252 ? null : plain(pulse))),
      WIRING,
    );
    expect(pulses.pulse.length).toBe(9);
    expect(pulses.duration_s[1]).toBeCloseTo(104, 9);
    expect(names(pulses)[1]).toEqual(["samples-missing"]);
    othersAreSound(pulses, [1]);
  });

  test("samples missing in a pulse, and beside one: the common length still fits", () => {
    const inside = heaterPulses(
      edited((t, pulse) => (t > 151 && t < 153.2 ? null : plain(pulse))),
      WIRING,
    );
    othersAreSound(inside, []);
    // From 110 s on nothing is read until the second pulse is half over: its end tells where it began.
    const beside = heaterPulses(
      edited((t, pulse) => (t > 110 && t < 152 ? null : plain(pulse))),
      WIRING,
    );
    othersAreSound(beside, []);
    expect(beside.start_s[1]).toBeCloseTo(150.25, 9);
    // Where no length is common to all, nobody knows when it began.
    const uneven = edited((t, pulse) => {
      if (t > 110 && t < 152) return null;
      const longer = pulse % 2 === 0 && (t - 50.1) % 100 > 2;
      return longer ? OFF : plain(pulse);
    });
    expect(names(heaterPulses(uneven, WIRING))[1]).toEqual(["samples-missing"]);
  });

  test("a programmed length is not forced on what cannot have it", () => {
    const log = edited((t, pulse) => (t > 250 && t < 258 ? ON : plain(pulse)));
    const pulses = heaterPulses(log, WIRING, { value: 4.1, u: 0.001 });
    // From 250.25 s to 257.75 s.
    expectRelative([pulses.Q_J[2]!], [7.5e-3], 1e-12);
    expectRelative([pulses.u_Q_J[2]!], [(1e-3 * 0.5) / Math.sqrt(6)], 1e-12);
    expectRelative([pulses.Q_J[1]!, pulses.Q_J[3]!], [4.1e-3, 4.1e-3], 1e-12);
  });

  test("a voltage lead the wrong way round, once or all night", () => {
    const once = heaterPulses(
      edited((_, pulse) => (pulse === 3 ? [1e-3, -1] : plain(pulse))),
      WIRING,
    );
    expect(names(once)[3]).toEqual(["voltage-inverted"]);
    expectRelative([once.resistance_Ohm[3]!], [-1000], 1e-12);
    othersAreSound(once, [3]);
    const always = heaterPulses(
      edited((_, pulse) => (pulse < 0 ? OFF : [1e-3, -1])),
      WIRING,
    );
    expect(names(always)).toEqual(Array.from({ length: 10 }, () => ["voltage-inverted"]));
  });

  test("polarity reversed from pulse to pulse, or within one, heats all the same", () => {
    const reversed = (t: number, pulse: number): Reading => {
      if (pulse < 0) return OFF;
      const way = pulse % 2 === 0 || (pulse === 3 && t < 352.2) ? 1 : -1;
      return [1e-3 * way, way];
    };
    const pulses = heaterPulses(edited(reversed), WIRING);
    othersAreSound(pulses, []);
    expectRelative(pulses.resistance_Ohm, new Float64Array(10).fill(1000), 1e-12);
    // A bias that heats all night adds to one polarity and takes from the other: (1 ± 0.01)² less 0.01².
    const biased = heaterPulses(
      edited((t, pulse) => {
        const [I, V] = reversed(t, pulse)!;
        return [I + 1e-5, V + 1e-2];
      }),
      WIRING,
    );
    expectRelative(biased.Q_J.subarray(0, 2), [4e-3 * (1.01 ** 2 - 1e-4), 4e-3 * (0.99 ** 2 - 1e-4)], 1e-9);
  });

  test("a current that ramps: its heat, its uncertainty, and that it is told", () => {
    // I = 1 mA·x/4 s for 4 s, of which the samples see x = 0.4, 0.9, … 3.9 s.
    const pulses = heaterPulses(
      edited((t, pulse) => {
        const x = ((t - 50.1) % 100) / 4;
        return pulse < 0 ? OFF : [1e-3 * x, x];
      }),
      WIRING,
    );
    // ∫I²R dt = R·I²·t/3. Both edges lie anywhere within 0.5 s; at the end the power is three times the mean.
    const off = pulses.Q_J.map((Q) => Q - 4e-3 / 3);
    const u = pulses.Q_J.map((Q, i) => Math.hypot(pulses.u_Q_J[i]!, pulses.u_length_relative[i]! * Q));
    for (let i = 0; i < 10; i++) expect(Math.abs(off[i]!)).toBeLessThan(1.5 * u[i]!);
    expect(u[0]! / pulses.Q_J[0]!).toBeGreaterThan(0.05);
    expect(u[0]! / pulses.Q_J[0]!).toBeLessThan(0.15);
    // Thirds of two samples: 3.4² + 3.9² less 0.4² + 0.9², over 2 and over the mean of all eight squares.
    const squares = [0.4, 0.9, 1.4, 1.9, 2.4, 2.9, 3.4, 3.9].map((x) => x * x);
    const mean = squares.reduce((sum, P) => sum + P, 0) / 8;
    const change = (squares[6]! + squares[7]! - squares[0]! - squares[1]!) / 2 / mean;
    expectRelative(pulses.power_change, new Float64Array(10).fill(change), 1e-9);
    expect([
      ...heaterPulses(
        edited((_, pulse) => plain(pulse)),
        WIRING,
      ).power_change,
    ]).toEqual(new Array(10).fill(0));
  });
});

describe("odd rows in a log of events", () => {
  const events = (duration_s: readonly number[], voltage_V: readonly number[] = []): HeaterEvents => ({
    kind: "events",
    time_s: Float64Array.from(duration_s, (_, i) => 100 * (i + 1)),
    duration_s: Float64Array.from(duration_s),
    current_A: new Float64Array(duration_s.length).fill(1e-3),
    voltage_V: Float64Array.from(duration_s, (_, i) => voltage_V[i] ?? 1),
  });
  const names = (log: HeaterEvents): string[][] => Array.from(heaterPulses(log, WIRING).flag, flagNames);

  test("no length, a negative one, one that is missing", () => {
    expect(names(events([4, 0, -4, Number.NaN, 4]))).toEqual([
      [],
      ["zero-energy"],
      ["zero-energy"],
      ["zero-energy"],
      [],
    ]);
  });

  test("still on when the next one begins; ending with its beginning is not", () => {
    expect(names(events([4, 150, 4, 100, 4]))).toEqual([[], ["heater-left-on"], [], [], []]);
  });

  test("still on when the thermometer's log ends", () => {
    const pulses = heaterPulses(events([4, 4, 60]), WIRING);
    expect(Array.from(leftOnAtEnd(pulses, 350).flag, flagNames)).toEqual([[], [], ["heater-left-on"]]);
    expect([...leftOnAtEnd(pulses, 360).flag]).toEqual([0, 0, 0]);
    expect(leftOnAtEnd(pulses, 350).Q_J).toBe(pulses.Q_J);
  });

  test("a voltage lead the wrong way round, once or all night; polarity reversed with both", () => {
    expect(names(events([4, 4, 4], [1, -1, 1]))).toEqual([[], ["voltage-inverted"], []]);
    expect(names(events([4, 4], [-1, -1]))).toEqual([["voltage-inverted"], ["voltage-inverted"]]);
    const log = events([4, 4], [1, -1]);
    log.current_A[1]! *= -1;
    const pulses = heaterPulses(log, WIRING);
    expect([...pulses.flag]).toEqual([0, 0]);
    expectRelative(pulses.Q_J, [4e-3, 4e-3], 1e-14);
  });
});
