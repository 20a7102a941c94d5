import type { Coordinates } from '@tordial/geometry';

/** A symmetric positive definite approximation P of the Hessian. */
export interface Preconditioner {
  /** Writes P^-1 v into `out`; all of the length of the coordinates. */
  solve(v: Float64Array, out: Float64Array): void;
  /** Adapts P to the geometry x if that has moved far from where P was made; says whether P changed. */
  follow?(x: Coordinates): boolean;
}
