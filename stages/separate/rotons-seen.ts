/** By how much rotons must lower χ² to count as seen: 5 standard deviations squared, as for any new thing. */
const SEEN = 25;

/**
 * A gap always comes out, even of noise: two more parameters find some bend to follow.
 * @param gain χ² without rotons less χ² with them
 * @returns why they are not taken for rotons; null if they are
 */
export function rotonsSeen(gain: number): string | null {
  // Without a degree of freedom there is no scale to judge by (NaN); the uncertainty says so itself.
  return gain < SEEN ? `leaving the rotons out costs χ² only ${gain.toPrecision(2)}` : null;
}
