/** A configured quantity, converted to SI. */
export interface Quantity {
  /** In SI units of its dimension. */
  readonly value: number;
  /** Standard uncertainty (k = 1), same unit; 0 where none was given. */
  readonly u: number;
  /** As the user wrote it. */
  readonly text: string;
}
