import { DomainError } from "../errors.js";

// Gauss–Kronrod 7/15 pair (Kronrod 1965; abscissae and weights as in QUADPACK, Piessens et al. 1983).
// Odd entries of NODE are the Gauss points.
const NODE = [
  0.9914553711208126, 0.9491079123427585, 0.8648644233597691, 0.7415311855993945, 0.5860872354676911,
  0.4058451513773972, 0.20778495500789848, 0,
] as const;
const KRONROD = [
  0.022935322010529224, 0.06309209262997856, 0.10479001032225019, 0.14065325971552592, 0.1690047266392679,
  0.19035057806478542, 0.20443294007529889, 0.20948214108472782,
] as const;
const GAUSS = [0.1294849661688697, 0.27970539148927664, 0.3818300505051189, 0.4179591836734694] as const;

const MOST_PIECES = 4000;

interface Piece {
  readonly a: number;
  readonly b: number;
  readonly integral: number;
  readonly error: number;
  readonly magnitude: number;
}

function measure(f: (x: number) => number, a: number, b: number): Piece {
  const centre = (a + b) / 2;
  const half = (b - a) / 2;
  const middle = f(centre);
  let kronrod = KRONROD[7] * middle;
  let gauss = GAUSS[3] * middle;
  let magnitude = KRONROD[7] * Math.abs(middle);
  const left: number[] = [];
  const right: number[] = [];
  for (let i = 0; i < 7; i++) {
    const lower = f(centre - half * NODE[i]!);
    const upper = f(centre + half * NODE[i]!);
    left.push(lower);
    right.push(upper);
    kronrod += KRONROD[i]! * (lower + upper);
    magnitude += KRONROD[i]! * (Math.abs(lower) + Math.abs(upper));
    if (i % 2 === 1) gauss += GAUSS[(i - 1) / 2]! * (lower + upper);
  }
  const mean = kronrod / 2;
  let spread = KRONROD[7] * Math.abs(middle - mean);
  for (let i = 0; i < 7; i++) {
    spread += KRONROD[i]! * (Math.abs(left[i]! - mean) + Math.abs(right[i]! - mean));
  }
  const difference = Math.abs((kronrod - gauss) * half);
  const deviation = spread * Math.abs(half);
  // The Kronrod sum is far better than its difference from the Gauss sum; QUADPACK's empirical law.
  const error = deviation > 0 ? deviation * Math.min(1, ((200 * difference) / deviation) ** 1.5) : difference;
  return { a, b, integral: kronrod * half, error, magnitude: magnitude * Math.abs(half) };
}

/**
 * ∫ f from a to b, the worst piece halved until the estimated error is small enough.
 * @param f finite on the open interval (the ends themselves are never asked)
 * @param relativeTolerance of the integral; rounding of Σ|f| stops it too
 * @throws DomainError where f is not finite, or where it is too wild for 4000 pieces
 */
export function integrate(f: (x: number) => number, a: number, b: number, relativeTolerance = 1e-13): number {
  if (a === b) return 0;
  const pieces = [measure(f, a, b)];
  for (;;) {
    let integral = 0;
    let error = 0;
    let magnitude = 0;
    let worst = 0;
    for (let i = 0; i < pieces.length; i++) {
      const piece = pieces[i]!;
      integral += piece.integral;
      error += piece.error;
      magnitude += piece.magnitude;
      if (piece.error > pieces[worst]!.error) worst = i;
    }
    if (!Number.isFinite(integral))
      throw new DomainError(`the integrand is not finite between ${a} and ${b}`);
    if (error <= Math.max(relativeTolerance * Math.abs(integral), 4 * Number.EPSILON * magnitude)) {
      return integral;
    }
    if (pieces.length >= MOST_PIECES) {
      throw new DomainError(`the integral from ${a} to ${b} does not settle to ${relativeTolerance}`);
    }
    const piece = pieces[worst]!;
    const middle = (piece.a + piece.b) / 2;
    pieces[worst] = measure(f, piece.a, middle);
    pieces.push(measure(f, middle, piece.b));
  }
}
