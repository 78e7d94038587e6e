import { expect, test } from "vitest";
import {
  type HeliumIsotope,
  helium4VapourPressure_Pa,
  vapourPressure_Pa,
  vapourPressureTemperature_K,
} from "../../../stages/physics/vapour-pressure.js";
import { expectRelative } from "../../expect-relative.js";
import { column, published } from "./published.js";

const rows = published("its90-helium-points.csv");
const isotopeOf = (row: Readonly<Record<string, string>>): HeliumIsotope =>
  row["isotope"] === "3He" ? "helium-3" : "helium-4";

// 2e-7 K where ten digits of p were read. The computed points have seven: half a digit is up to 4e-7 of p, and
// dT/d ln p stays below 1.1 K.
test("ITS-90 points, T(p) to the digits of p and p(T) to 1e-6", () => {
  for (const row of rows) {
    const T = Number(row["T90_K"]);
    const p = Number(row["p_Pa"]);
    const limit = row["status"] === "READ" ? 2e-7 : 3e-7;
    expect(Math.abs(vapourPressureTemperature_K(p, isotopeOf(row)) - T), `${T} K`).toBeLessThan(limit);
    expectRelative([vapourPressure_Pa(T, isotopeOf(row))], [p], 1e-6);
  }
});

// The scale's two ⁴He equations meet at the lambda point; 1e-6 K is its printed coefficients' rounding.
test("the two ⁴He equations meet at 5041.8 Pa", () => {
  const below = vapourPressureTemperature_K(5041.815 * (1 - 1.2e-6), "helium-4");
  const above = vapourPressureTemperature_K(5041.815 * (1 + 1.2e-6), "helium-4");
  expect(Math.abs(above - below)).toBeLessThan(2e-6);
});

test("T(p) and p(T) undo each other", () => {
  for (let T = 1.25; T <= 5; T += 0.01) {
    expectRelative([vapourPressureTemperature_K(vapourPressure_Pa(T, "helium-4"), "helium-4")], [T], 1e-12);
  }
});

// Donnelly and Barenghi 1998, four digits (5e-4), 0.1 % below 1.25 K for what the ideal-gas formula neglects.
test("the vapour pressure from 0.65 to 5 K is the published table", () => {
  const table = published("helium-4-vapour-pressure.csv");
  expectRelative(column(table, "T_K").map(helium4VapourPressure_Pa), column(table, "p_Pa"), 1e-3);
});

// 2e-4: the entropy of the liquid (−0.4 %) and the virial coefficient (+0.4 %) cancel that closely.
test("the ideal-gas formula joins the ITS-90 at 1.25 K", () => {
  expectRelative([helium4VapourPressure_Pa(1.25 - 1e-9)], [114.734339], 2e-4);
});

test("nothing is given outside the scale", () => {
  expect(() => vapourPressure_Pa(1.2, "helium-4")).toThrow(
    /ITS-90 gives no helium-4 vapour pressure at 1.2 K/,
  );
  expect(() => vapourPressure_Pa(5.1, "helium-4")).toThrow(/ITS-90/);
  expect(() => vapourPressureTemperature_K(50, "helium-4")).toThrow(/50 Pa/);
  expect(() => vapourPressureTemperature_K(2e5, "helium-3")).toThrow(/helium-3/);
  expect(() => helium4VapourPressure_Pa(0)).toThrow(/0 K/);
});
