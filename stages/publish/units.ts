import { superscript } from "./rounding.js";

/** Powers of the units in a quantity's text raised: "27.58 cm3/mol" as 27.58 cm³/mol. */
export function raisedUnits(quantity: string): string {
  return quantity.replace(/(?<=[A-Za-zµΩ])-?\d+(?:\.\d+)?/g, (digits) => superscript(digits));
}

/** "J/(mol.K4)" as a person writes it: J/(mol K⁴). */
export function unitText(unit: string): string {
  return raisedUnits(unit).replaceAll(".", " ");
}
