/** The reading of an instrument with that digitising step; 0 for none. */
export function digitise(value: number, step: number): number {
  return step > 0 ? Math.round(value / step) * step : value;
}

/** Decimals that show every digit of a reading with that step, or null where there is no step. */
export function decimalsOf(step: number): number | null {
  if (!(step > 0)) return null;
  for (let decimals = 0; decimals < 12; decimals++) {
    const scaled = step * 10 ** decimals;
    if (Math.abs(scaled - Math.round(scaled)) < 1e-6 * scaled) return decimals;
  }
  return 12;
}

/** A column's numbers as an instrument prints them: fixed decimals, or nine significant digits. */
export function printer(decimals: number | null): (value: number) => string {
  const text =
    decimals === null ? (value: number) => value.toPrecision(9) : (value: number) => value.toFixed(decimals);
  // −0.000 is no reading.
  return (value) => text(value).replace(/^-(?=0(\.0*)?$)/, "");
}
