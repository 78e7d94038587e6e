/** Normal variables of mean 0 and standard deviation 1, two uniform ones each (Box and Muller 1958). */
export function normal(random: () => number): number {
  // 1 − u is never 0.
  const radius = Math.sqrt(-2 * Math.log(1 - random()));
  return radius * Math.cos(2 * Math.PI * random());
}

/**
 * Noise with a spectrum near 1/f between two times: a sum of relaxing walks, two a decade, of equal variance
 * (van der Ziel, Physica 16, 359 (1950)).
 * @returns a function of the time since the last call; standard deviation 1
 */
export function slowNoise(
  band_s: readonly [number, number],
  random: () => number,
): (elapsed_s: number) => number {
  const [shortest_s, longest_s] = band_s;
  const count = 1 + Math.ceil(2 * Math.log10(longest_s / shortest_s));
  const times_s = Array.from(
    { length: count },
    (_, i) => shortest_s * (longest_s / shortest_s) ** (count === 1 ? 0 : i / (count - 1)),
  );
  const walks = times_s.map(() => normal(random));
  return (elapsed_s) => {
    let sum = 0;
    for (let i = 0; i < count; i++) {
      const kept = Math.exp(-elapsed_s / times_s[i]!);
      walks[i] = kept * walks[i]! + Math.sqrt(1 - kept * kept) * normal(random);
      sum += walks[i]!;
    }
    return sum / Math.sqrt(count);
  };
}
