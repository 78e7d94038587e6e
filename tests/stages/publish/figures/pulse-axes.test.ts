import { expect, test } from "vitest";
import {
  GUTTER,
  niceStep,
  placeTime,
  temperatureTicks,
  timePieces,
  timeTicks,
} from "../../../../stages/publish/figures/pulse-axes.js";

const [LEFT, RIGHT] = [0, 400];

test("time is linear in pieces, with a gap between each two and all of the width used", () => {
  const pieces = timePieces({ from_s: -60, to_s: 300 }, { duration_s: 8, settled_s: 0 }, LEFT, RIGHT);
  expect(pieces.map(({ from_s, to_s }) => [from_s, to_s])).toEqual([
    [-60, 0],
    [0, 25],
    [25, 300],
  ]);
  expect(pieces[0]!.start).toBe(LEFT);
  expect(pieces.at(-1)!.end).toBeCloseTo(RIGHT, 9);
  pieces.slice(1).forEach(({ start }, i) => {
    expect(start - pieces[i]!.end).toBeCloseTo(GUTTER, 9);
  });
  for (const { from_s, to_s, start, end } of pieces)
    expect(placeTime(pieces, (from_s + to_s) / 2)).toBeCloseTo((start + end) / 2, 9);
  // Nothing leaves the axis, and time never runs backwards.
  expect(placeTime(pieces, -1e4)).toBe(LEFT);
  expect(placeTime(pieces, 1e4)).toBeCloseTo(RIGHT, 9);
  const places = Array.from({ length: 361 }, (_, i) => placeTime(pieces, -60 + i));
  for (let i = 1; i < places.length; i++) expect(places[i]!).toBeGreaterThan(places[i - 1]!);
});

test("a pulse of 0.2 s beside a quarter of an hour keeps a tenth of the width", () => {
  const pieces = timePieces({ from_s: -300, to_s: 900 }, { duration_s: 0.2, settled_s: 80 }, LEFT, RIGHT);
  expect(pieces.map(({ to_s }) => to_s)).toEqual([0, 0.2, 80, 900]);
  expect(placeTime(pieces, 0.2) - placeTime(pieces, 0)).toBeGreaterThan(0.1 * (RIGHT - LEFT));
  // Seen in proportion it would have a fifteenth of a unit.
  const words = timeTicks(pieces).map((tick) => tick.words);
  for (const knot of ["0", "0.2", "80"]) expect(words).toContain(knot);
});

test("spans that begin with the pulse, end within it or miss it have fewer pieces", () => {
  const pulse = { duration_s: 8, settled_s: 0 };
  const spans = (from_s: number, to_s: number) =>
    timePieces({ from_s, to_s }, pulse, LEFT, RIGHT).map((piece) => [piece.from_s, piece.to_s]);
  expect(spans(0, 300)).toEqual([
    [0, 25],
    [25, 300],
  ]);
  expect(spans(-60, 5)).toEqual([
    [-60, 0],
    [0, 5],
  ]);
  expect(spans(-60, -2)).toEqual([[-60, -2]]);
  expect(spans(400, 500)).toEqual([[400, 500]]);
  expect(spans(3, 3)).toEqual([[3, 4]]);
});

test("ticks are round times at their places, and joints have theirs", () => {
  const pieces = timePieces({ from_s: -1080, to_s: 990 }, { duration_s: 20, settled_s: 0 }, 4, 476);
  const ticks = timeTicks(pieces);
  for (const { at, words } of ticks)
    if (words !== "") expect(placeTime(pieces, Number(words.replace("−", "-")))).toBeCloseTo(at, 6);
  const spoken = ticks.filter(({ words }) => words !== "");
  expect(spoken.map(({ words }) => words)).toEqual(expect.arrayContaining(["−1000", "0", "20", "60", "800"]));
});

test("words on one axis do not run into each other", () => {
  const spans = [
    [-1080, 990, 20, 0],
    [-300, 900, 0.2, 80],
    [-150, 900, 5, 41],
    [-145, 330, 30, 0],
    [-60, 190, 8, 8],
    [-7, 31, 1.5, 0],
    // Five letters to a tick before, and a tick just below the end of the pulse.
    [-3000, 4000, 5.6, 100],
  ] as const;
  for (const [from_s, to_s, duration_s, settled_s] of spans) {
    const spoken = timeTicks(timePieces({ from_s, to_s }, { duration_s, settled_s }, 4, 476)).filter(
      ({ words }) => words !== "",
    );
    expect(spoken.length).toBeGreaterThan(5);
    // Half of both words, at 7.6 units a letter: the widest of the faces in figures/look.ts.
    for (let i = 1; i < spoken.length; i++) {
      const [a, b] = [spoken[i - 1]!, spoken[i]!];
      expect(b.at - a.at).toBeGreaterThan((7.6 * (a.words.length + b.words.length)) / 2);
    }
  }
});

test("temperatures are differences from the level before, in the unit that suits them", () => {
  const rise = temperatureTicks(0.6431, 0.658, 0.6441091);
  expect(rise.title).toBe("(T − 0.6440 K) / mK");
  expect(rise.ticks.map(({ words }) => words)).toEqual(["0", "5", "10"]);
  rise.ticks.forEach(({ temperature_K, words }) => {
    // Sums of decimals below 1: a few units in the last place of a double.
    expect(Math.abs(temperature_K - (0.644 + Number(words) / 1e3))).toBeLessThan(1e-15);
  });
  expect(temperatureTicks(0.41999, 0.42006, 0.42).title).toBe("(T − 0.420000 K) / µK");
  expect(temperatureTicks(0.4, 1.6, 0.5)).toMatchObject({ title: "T / K" });
  expect(temperatureTicks(0.6431, 0.658, Number.NaN).title).toBe("(T − 0.6430 K) / mK");
  const sinking = temperatureTicks(0.6, 0.64, 0.64).ticks.map(({ words }) => words);
  expect(sinking).toEqual(["−40", "−30", "−20", "−10", "0"]);
});

test("steps are 1, 2 or 5 times a power of ten", () => {
  expect([0.011, 0.02, 0.7, 1, 3, 51].map(niceStep).map((x) => Number(x.toPrecision(12)))).toEqual([
    0.02, 0.02, 1, 1, 5, 100,
  ]);
});
