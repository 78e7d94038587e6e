/** What we use of ml-regression, which ships no declarations. */
declare module "ml-regression" {
  /** Straight line by unweighted least squares; centre x first. */
  export class SimpleLinearRegression {
    constructor(x: ArrayLike<number>, y: ArrayLike<number>);
    readonly slope: number;
    readonly intercept: number;
    predict(x: number): number;
  }
}
