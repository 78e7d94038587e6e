import { expect } from "vitest";

/**
 * Each `actual` within `tolerance` of `expected`, relative to |expected| (absolute where expected is 0).
 * @param actual, expected equally long
 */
export function expectRelative(
  actual: ArrayLike<number>,
  expected: ArrayLike<number>,
  tolerance: number,
): void {
  expect(actual.length).toBe(expected.length);
  for (let i = 0; i < expected.length; i++) {
    const want = expected[i]!;
    const error = Math.abs(actual[i]! - want) / (want === 0 ? 1 : Math.abs(want));
    expect(error, `element ${i}: ${actual[i]} against ${want}`).toBeLessThanOrEqual(tolerance);
  }
}
