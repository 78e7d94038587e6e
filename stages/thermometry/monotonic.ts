import { InputError } from "../errors.js";

// A series of a dozen terms has its turns far wider apart than a two-thousandth of its range.
const STEPS = 2000;

/** A calibration curve as a function of ln R, over its whole range. */
export interface Curve {
  readonly key: string;
  readonly lnRange: readonly [number, number];
  temperature_K(resistance_Ohm: number): number;
}

/**
 * Walks a curve from end to end.
 * @returns lowest and highest temperature
 * @throws InputError where the temperature is not positive or the curve turns back
 */
export function checkMonotonic(curve: Curve): [number, number] {
  const [from, to] = curve.lnRange;
  const at = (i: number) => Math.exp(from + ((to - from) * i) / STEPS);
  const ends = [curve.temperature_K(at(0)), curve.temperature_K(at(STEPS))];
  const way = Math.sign(ends[1]! - ends[0]!);
  let before = Number.NaN;
  for (let i = 0; i <= STEPS; i++) {
    const temperature = curve.temperature_K(at(i));
    const where = `at ${at(i).toPrecision(4)} Ohm it gives ${temperature.toPrecision(4)} K`;
    if (!(temperature > 0 && temperature < Number.POSITIVE_INFINITY))
      throw new InputError({
        key: curve.key,
        value: where,
        expected: "a temperature above zero over the whole range",
        wayOut: "check the coefficients, their order and their variable against the certificate",
      });
    if (i > 0 && !(way * (temperature - before) > 0))
      throw new InputError({
        key: curve.key,
        value: where,
        expected: "a curve that only rises or only falls over the range; here it turns back",
        wayOut: "check the coefficients against the certificate, or narrow resistance_range",
      });
    before = temperature;
  }
  return [Math.min(...ends), Math.max(...ends)];
}
