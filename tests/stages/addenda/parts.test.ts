import { expect, test } from "vitest";
import { noAddenda } from "../../../stages/addenda/no-addenda.js";
import { addendaFromParts } from "../../../stages/addenda/parts.js";
import { integrate } from "../../../stages/numerics/quadrature.js";
import { expectRelative } from "../../expect-relative.js";

const grams = (value: number, u: number) => ({ value: value * 1e-3, u: u * 1e-3, text: `${value} ± ${u} g` });

// 24.1 g of copper is 24.1/63.546 mol; 0.74189 mJ/(mol K) at 1 K: Osborne, Flotow and Schreiner 1967, five digits.
test("copper by mass is copper by mole", () => {
  const addenda = addendaFromParts([{ material: "copper", mass: grams(24.1, 0.1) }]);
  expectRelative([addenda.heatCapacity_J_per_K(1)], [(24.1 / 63.546) * 0.74189e-3], 1e-5);
});

// Mass and specific heat are independent: 0.1/24.1 and 0.5 % in quadrature.
test("one source a material: mass and specific heat combined", () => {
  const addenda = addendaFromParts([
    { material: "copper", mass: grams(24.1, 0.1) },
    { material: "silver", mass: grams(2, 0) },
  ]);
  const [copper, silver] = addenda.sensitivities(Float64Array.of(0.5, 1));
  const C = addendaFromParts([{ material: "copper", mass: grams(24.1, 0) }]).heatCapacity_J_per_K(1);
  expectRelative([copper!.s_C_J_per_K[1]! / C], [Math.hypot(0.1 / 24.1, 0.005)], 1e-12);
  const Ag = addendaFromParts([{ material: "silver", mass: grams(2, 0) }]).heatCapacity_J_per_K(1);
  expectRelative([silver!.s_C_J_per_K[1]! / Ag], [0.003], 1e-12);
  expect(copper!.title).toMatch(/copper/);
});

// Two halves share the specific heat's error, not the weighing's.
test("two parts of one material count as one", () => {
  const whole = addendaFromParts([{ material: "copper", mass: grams(20, 0) }]);
  const halves = addendaFromParts([
    { material: "copper", mass: grams(10, 0) },
    { material: "copper", mass: grams(10, 0) },
  ]);
  const at = Float64Array.of(1);
  expect(halves.sensitivities(at).length).toBe(1);
  expectRelative(halves.sensitivities(at)[0]!.s_C_J_per_K, whole.sensitivities(at)[0]!.s_C_J_per_K, 1e-14);
});

test("the mean over a step is the integral's", () => {
  const addenda = addendaFromParts([
    { material: "copper", mass: grams(20, 0) },
    { material: "apiezon-n", mass: grams(0.2, 0.05) },
  ]);
  // Five Gauss points over a tenth of T.
  const exact = integrate((T) => addenda.heatCapacity_J_per_K(T), 1.2, 1.32, 1e-13) / 0.12;
  expectRelative([addenda.meanOver(1.2, 1.32)], [exact], 1e-10);
});

test("published ranges are intersected, and leaving them is reported", () => {
  const addenda = addendaFromParts([
    { material: "copper", mass: grams(20, 0) },
    { material: "silver", mass: grams(1, 0) },
  ]);
  expect(addenda.range_K).toEqual([0.4, 3.2]);
  expect(addenda.rangeNotes(Float64Array.of(0.35, 1))).toEqual([
    "addenda extrapolated below 0.4000 K, the lowest temperature of the published specific heats: 1 points, down to 0.3500 K",
  ]);
});

test("an unknown material is refused with the known ones", () => {
  expect(() => addendaFromParts([{ material: "brass", mass: grams(1, 0) }])).toThrow(
    /addenda\.parts\[0\]\.material is "brass"; expected one of copper,/,
  );
});

test("no addenda add nothing, and say so", () => {
  const none = noAddenda();
  expect(none.heatCapacity_J_per_K(1)).toBe(0);
  expect(none.meanOver(1, 2)).toBe(0);
  expect(none.sensitivities(Float64Array.of(1))).toEqual([]);
  expect(none.rangeNotes(Float64Array.of(0.01, 100))).toEqual([]);
  expect(none.notes.length).toBe(1);
});
