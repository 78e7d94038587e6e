import { InputError } from "../errors.js";
import {
  extrapolatedSpecificHeat_J_per_kg_K,
  MATERIAL_NAMES,
  MATERIALS,
  type MaterialName,
} from "../physics/materials.js";
import { meanOverStep } from "../physics/step-mean.js";
import type { Quantity } from "../quantities/types.js";
import { rangeNotes } from "./range-notes.js";
import type { Addenda } from "./types.js";

/** One part of the cell. */
export interface CellPart {
  readonly material: string;
  /** SI: kg. */
  readonly mass: Quantity;
}

interface KnownPart {
  readonly material: MaterialName;
  readonly mass: Quantity;
}

function known(part: CellPart, index: number): KnownPart {
  const material = MATERIAL_NAMES.find((name) => name === part.material);
  if (material === undefined) {
    throw new InputError({
      key: `addenda.parts[${index}].material`,
      value: part.material,
      expected: `one of ${MATERIAL_NAMES.join(", ")}`,
      wayOut: "choose the nearest of these, or measure the empty cell and give addenda.runs instead",
    });
  }
  return { material, mass: part.mass };
}

/**
 * Addenda as the sum of mass × published specific heat.
 *
 * Each material is one common source: its mass and its specific heat, combined, move all points together. Parts of
 * one material are put together first, since they share its specific heat; different materials are independent.
 * @throws InputError for a material that is not in the table
 */
export function addendaFromParts(parts: readonly CellPart[]): Addenda {
  const merged = mergeByMaterial(parts.map(known));
  const low = Math.max(...merged.map((part) => MATERIALS[part.material].range_K[0]));
  const high = Math.min(...merged.map((part) => MATERIALS[part.material].range_K[1]));
  const range_K = [low, high] as const;

  const heatCapacity = (T_K: number) =>
    merged.reduce(
      (sum, { material, mass }) =>
        sum + mass.value * extrapolatedSpecificHeat_J_per_kg_K(material, T_K).value,
      0,
    );
  return {
    source: "parts",
    powers: [],
    coefficient: [],
    covariance: [],
    range_K,
    chiSquared: 0,
    degreesOfFreedom: 0,
    notes:
      low <= high
        ? []
        : ["the published ranges of the parts have no temperature in common: every point extrapolates one"],
    heatCapacity_J_per_K: heatCapacity,
    meanOver: (T1_K, T2_K) => meanOverStep(heatCapacity, T1_K, T2_K),
    sensitivities: (T_K) =>
      merged.map(({ material, mass }) => ({
        title: `addenda: ${material}, ${(mass.value * 1e3).toPrecision(4)} g`,
        s_C_J_per_K: T_K.map((T) => {
          const { value, u } = extrapolatedSpecificHeat_J_per_kg_K(material, T);
          return Math.hypot(mass.u * value, mass.value * u);
        }),
      })),
    rangeNotes: (T_K) => rangeNotes(T_K, range_K, "the published specific heats"),
  };
}

function mergeByMaterial(parts: readonly KnownPart[]): readonly KnownPart[] {
  const sums = new Map<MaterialName, Quantity>();
  for (const { material, mass } of parts) {
    const sum = sums.get(material);
    sums.set(
      material,
      sum === undefined
        ? mass
        : { value: sum.value + mass.value, u: Math.hypot(sum.u, mass.u), text: `${sum.text} + ${mass.text}` },
    );
  }
  return [...sums].map(([material, mass]) => ({ material, mass }));
}
