/**
 * The path of steepest descent from a saddle, in mass-weighted coordinates q = sqrt(m) x:
 *
 *   dq/ds = -g/|g|,   taken in linearly implicit Euler steps  dq = -(H + |g|/s I)^(-1) g
 *
 * An explicit step would oscillate across the stiff stretches; the implicit one is short (at most s) far from the minimum and Newton's step near it.
 * The Hessian is learnt on the way from that of the saddle.
 *
 * Sources: K. Fukui, Acc. Chem. Res. 14, 363 (1981), the path; E. Hairer and G. Wanner, Solving Ordinary Differential Equations II, Springer 1996,
 * chapter IV.7, the step.
 */
import type { Coordinates } from '@tordial/geometry';
import { largest } from '../minimise.js';
import type { Calculation, Question } from '../potential.js';
import { bofillUpdate } from './bofill-update.js';
import { length } from './projected-modes.js';
import { solveShifted } from './shifted-solve.js';

export interface PathDown {
  /** Angstrom. */
  readonly coordinates: Coordinates;
  /** kcal/mol. */
  readonly energy: number;
  /** Largest gradient component, kcal/mol/angstrom. */
  readonly gradientMax: number;
  /** The path never went up and came to where the gradient is small. */
  readonly arrived: boolean;
  readonly evaluations: number;
}

/** Longest step of the path, angstrom amu^(1/2), and the first one off the saddle. */
const STEP = 0.5;
const FIRST_STEP = 0.1;
const MOST_STEPS = 600;
/** Gradient (kcal/mol/angstrom) below which a minimiser may take over. */
const NEAR = 0.05;
/** kcal/mol that rounding may add. */
const ROUNDING = 1e-9;

/**
 * Follows the path down from a saddle, to one side: `direction` is the mode of the negative eigenvalue in mass-weighted coordinates (unit length), signed.
 * `hessian` at the saddle (kcal/mol/angstrom^2, row-major), `masses` in amu.
 */
export function* pathDown(
  saddle: Coordinates,
  energyOfSaddle: number,
  hessian: Float64Array,
  direction: Float64Array,
  masses: ArrayLike<number>,
): Calculation<PathDown> {
  const size = saddle.length;
  const root = Float64Array.from({ length: size }, (_, n) => Math.sqrt(masses[Math.floor(n / 3)]));
  const H = hessian.map((value, n) => value / (root[Math.floor(n / size)] * root[n % size]));
  const x = saddle.slice();
  const question: Question = { x: new Float64Array(size), gradient: new Float64Array(size) };
  const g = new Float64Array(size);
  const next = new Float64Array(size);
  const factor = new Float64Array(size * size);
  let energy = energyOfSaddle;
  let evaluations = 0;
  let residual = Number.POSITIVE_INFINITY;
  let longest = STEP;

  let step: Float64Array = direction.map((value) => FIRST_STEP * value);
  for (let n = 0; n < MOST_STEPS; n++) {
    for (let k = 0; k < size; k++) question.x[k] = x[k] + step[k] / root[k];
    const trial = yield question;
    evaluations++;
    for (let k = 0; k < size; k++) next[k] = question.gradient[k] / root[k];
    if (n > 0)
      bofillUpdate(
        H,
        step,
        next.map((value, k) => value - g[k]),
      );
    if (!(trial <= energy + ROUNDING)) {
      longest /= 2;
      if (longest < 1e-3) break;
      step = n === 0 ? step.map((value) => value / 2) : downhill(H, g, longest, factor);
      continue;
    }
    x.set(question.x);
    g.set(next);
    energy = trial;
    residual = largest(question.gradient);
    // just off the saddle the gradient is as small as near the minimum
    if (residual < NEAR && energy < energyOfSaddle - 1e-4 && n > 3 && length(step) < longest / 2)
      return { coordinates: x, energy, gradientMax: residual, arrived: true, evaluations };
    longest = Math.min(STEP, 1.5 * longest);
    step = downhill(H, g, longest, factor);
  }
  return { coordinates: x, energy, gradientMax: residual, arrived: false, evaluations };
}

/** -(H + shift)^-1 g with the least shift that makes it positive definite and the step at most `longest`. `factor` is scratch. */
function downhill(H: Float64Array, g: Float64Array, longest: number, factor: Float64Array): Float64Array {
  const step = new Float64Array(g.length);
  for (let shift = length(g) / longest; ; shift *= 2) {
    if (!solveShifted(H, shift, g, step, factor) || length(step) > 1.01 * longest) continue;
    return step.map((value) => -value);
  }
}
