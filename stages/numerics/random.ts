const MULTIPLIER_HIGH = 0x5851f42d;
const MULTIPLIER_LOW = 0x4c957f2d;

/**
 * The 32-bit words of PCG-XSH-RR 64/32 (O'Neill, HMC-CS-2014-0905 (2014)).
 * @param seed, stream non-negative integers below 2⁵³
 * @returns a function that gives the next word, 0…2³² − 1
 */
export function pcg32Words(seed: number, stream: number): () => number {
  const high = (integer: number) => Math.floor(integer / 0x1_0000_0000) >>> 0;
  // increment = 2·stream + 1
  const incrementHigh = ((high(stream) << 1) | ((stream >>> 0) >>> 31)) >>> 0;
  const incrementLow = (((stream >>> 0) << 1) | 1) >>> 0;
  let stateHigh = 0;
  let stateLow = 0;
  const add = (h: number, l: number) => {
    const low = stateLow + l;
    stateLow = low >>> 0;
    stateHigh = (stateHigh + h + (low > 0xffff_ffff ? 1 : 0)) >>> 0;
  };
  const step = () => {
    // 64-bit product modulo 2⁶⁴ from 16-bit halves of the low words.
    const a0 = stateLow & 0xffff;
    const a1 = stateLow >>> 16;
    const b0 = MULTIPLIER_LOW & 0xffff;
    const b1 = MULTIPLIER_LOW >>> 16;
    const cross = a1 * b0 + ((a0 * b0) >>> 16);
    const middle = a0 * b1 + (cross & 0xffff);
    const carry = a1 * b1 + (cross >>> 16) + (middle >>> 16);
    const mixed = Math.imul(stateHigh, MULTIPLIER_LOW) + Math.imul(stateLow, MULTIPLIER_HIGH);
    stateLow = Math.imul(stateLow, MULTIPLIER_LOW) >>> 0;
    stateHigh = (carry + mixed) >>> 0;
    add(incrementHigh, incrementLow);
  };
  step();
  add(high(seed), seed >>> 0);
  step();
  return () => {
    const h = stateHigh;
    const l = stateLow;
    step();
    // (((state >> 18) ^ state) >> 27), then a rotation by state >> 59.
    const shiftedHigh = h >>> 18;
    const shiftedLow = ((h << 14) | (l >>> 18)) >>> 0;
    const xHigh = (shiftedHigh ^ h) >>> 0;
    const xLow = (shiftedLow ^ l) >>> 0;
    const word = ((xHigh << 5) | (xLow >>> 27)) >>> 0;
    const rotation = h >>> 27;
    return ((word >>> rotation) | (word << (-rotation & 31))) >>> 0;
  };
}

/**
 * Uniform numbers in [0, 1) with 53 random bits: the same seed gives the same numbers everywhere.
 * @param seed a non-negative integer below 2⁵³
 */
export function pcg32(seed: number): () => number {
  const word = pcg32Words(seed, 0x526f746f6e);
  return () => ((word() >>> 5) * 0x400_0000 + (word() >>> 6)) / 0x20_0000_0000_0000;
}

/** Standard normal numbers from uniform ones, by Marsaglia's polar method (SIAM Rev. 6, 260 (1964)). */
export function normal(random: () => number): () => number {
  let spare: number | null = null;
  return () => {
    if (spare !== null) {
      const value = spare;
      spare = null;
      return value;
    }
    for (;;) {
      const u = 2 * random() - 1;
      const v = 2 * random() - 1;
      const s = u * u + v * v;
      if (s === 0 || s >= 1) continue;
      const scale = Math.sqrt((-2 * Math.log(s)) / s);
      spare = v * scale;
      return u * scale;
    }
  };
}
