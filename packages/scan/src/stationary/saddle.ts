/**
 * Stationary points of a given order by partitioned rational function optimisation (P-RFO).
 *
 * In the eigenvectors v_i of the Hessian, with F_i = g . v_i, the energy is maximised along `order` of them and minimised along the rest:
 *
 *   step = - sum_i F_i / (lambda_i - mu) v_i,    mu = sum_i F_i^2 / (mu - lambda_i)
 *
 * with the largest root mu for the modes climbed and the smallest one for the others. The modes climbed are followed from step to step by their
 * overlap. The Hessian is learnt from the steps and made anew now and then; the step stays within a trusted distance.
 *
 * Sources: A. Banerjee, N. Adams, J. Simons, R. Shepard, J. Phys. Chem. 89, 52 (1985); J. Baker, J. Comput. Chem. 7, 385 (1986); the trusted
 * distance: R. Fletcher, Practical Methods of Optimization, Wiley 1987, chapter 5.
 */
import { type Coordinates, TordialError } from '@tordial/geometry';
import { largest } from '../minimise.js';
import type { Calculation, Question } from '../potential.js';
import { bofillUpdate } from './bofill-update.js';
import { numericalHessian } from './hessian.js';
import { dot, length, type Modes, projectedModes, rigidMotions } from './projected-modes.js';

export interface SaddleOptions {
  /** Directions to climb: 1 (default) for a saddle, 0 for a minimum, 2 for a second-order saddle point. */
  readonly order?: number;
  /** Displacements to climb along at first, one for each direction, of the length of the coordinates; the softest modes when left out. */
  readonly follow?: readonly Float64Array[];
  /** Converged when no component of the gradient exceeds this, kcal/mol/angstrom; 1e-4. */
  readonly tolerance?: number;
  /** Steps after which it gives up; 200. */
  readonly maxSteps?: number;
  /** Longest step, angstrom over all coordinates; 0.3. */
  readonly maxStep?: number;
  /** Steps between two Hessians by differences; 10. With 1 each step has its own. */
  readonly renewal?: number;
  /** Displacement of the differences, angstrom. */
  readonly displacement?: number;
  /** The Hessian at the start, where it is known; kcal/mol/angstrom^2, row-major. */
  readonly hessian?: Float64Array;
  /** Motions that cost nothing and are left out, orthonormal: translation and rotation (default); none for a surface that is no molecule. */
  readonly taken?: (x: Coordinates) => readonly Float64Array[];
}

export interface StationaryStructure {
  readonly coordinates: Coordinates;
  /** kcal/mol. */
  readonly energy: number;
  /** Largest component of the gradient, kcal/mol/angstrom. */
  readonly gradientMax: number;
  readonly converged: boolean;
  /** By differences at the result, kcal/mol/angstrom^2, row-major. */
  readonly hessian: Float64Array;
  /** Of that Hessian without translation and rotation, unweighted. */
  readonly modes: Modes;
  /** Negative eigenvalues: what the point is, which need not be what was asked for. */
  readonly order: number;
  readonly evaluations: number;
}

/** Eigenvalues (kcal/mol/angstrom^2) below minus this count as negative; between, as flat. */
export const FLAT_CURVATURE = 1e-3;
const SMALLEST_RADIUS = 1e-4;

/**
 * Refines `start` (left as it is) to a stationary point of the order asked for. Whatever it finds is returned with the order that its eigenvalues prove.
 * Throws `saddle/order` for an order that is none or directions that do not fit it, `scan/energy` where the start has no finite energy.
 */
export function* stationaryPoint(start: Coordinates, options: SaddleOptions = {}): Calculation<StationaryStructure> {
  const { order = 1, follow = [], tolerance = 1e-4, maxSteps = 200, maxStep = 0.3, renewal = 10, displacement } = options;
  const taken = options.taken ?? ((x: Coordinates) => rigidMotions(x));
  const size = start.length;
  if (!(Number.isInteger(order) && order >= 0 && order < size))
    throw new TordialError('saddle/order', `a stationary point of order ${order} of ${size} coordinates: give a whole number from 0 up`);
  if (follow.length > order || follow.some((direction) => direction.length !== size))
    throw new TordialError('saddle/order', `${follow.length} directions to follow for order ${order}: at most one each, as long as x`);

  const x = start.slice();
  const gradient = new Float64Array(size);
  const question: Question = { x: start.slice(), gradient: new Float64Array(size) };
  let energy = yield question;
  let evaluations = 1;
  gradient.set(question.gradient);
  let residual = largest(gradient);
  if (!Number.isFinite(energy) || !Number.isFinite(residual))
    throw new TordialError('scan/energy', 'the potential gives no finite energy and gradient where a stationary point is looked for');

  let hessian: Float64Array | null = options.hessian?.slice() ?? null;
  let age = 0;
  let radius = maxStep / 2;
  let climbed: readonly Float64Array[] = follow;
  for (let n = 0; n < maxSteps && residual > tolerance; n++) {
    if (!hessian || age >= renewal) {
      hessian = yield* numericalHessian(x, displacement);
      evaluations += 2 * size;
      age = 0;
    }
    const modes = projectedModes(hessian, taken(x));
    // where the surface already curves down along as many modes as are climbed, those are the ones, whatever the first guess was
    const settled = n === 0 && negative(modes.eigenvalues) === order;
    const chosen = chooseModes(modes, settled ? [] : climbed, order);
    const step = rationalStep(modes, chosen, gradient);
    const reach = length(step);
    const scale = reach > radius ? radius / reach : 1;
    for (let k = 0; k < size; k++) step[k] *= scale;
    const expected = dot(gradient, step) + quadratic(hessian, step) / 2;

    for (let k = 0; k < size; k++) question.x[k] = x[k] + step[k];
    const trial = yield question;
    evaluations++;
    const trialResidual = largest(question.gradient);
    if (!Number.isFinite(trial) || !Number.isFinite(trialResidual)) {
      radius = Math.max(SMALLEST_RADIUS, length(step) / 4);
      continue;
    }
    // the Hessian learns from a refused step too
    bofillUpdate(
      hessian,
      step,
      question.gradient.map((value, k) => value - gradient[k]),
    );
    age++;
    const ratio = (trial - energy) / expected;
    const small = Math.abs(expected) < 1e-6 * (1 + residual);
    if (!small && (ratio < 0 || ratio > 2.5) && length(step) > SMALLEST_RADIUS) {
      radius = length(step) / 2;
      if (n % 2 === 1) age = renewal;
      continue;
    }
    if (!small && (ratio < 0.25 || ratio > 1.75)) radius = Math.max(SMALLEST_RADIUS, length(step) / 2);
    else if (scale < 1 && ratio > 0.75 && ratio < 1.33) radius = Math.min(maxStep, 1.6 * radius);
    climbed = chosen.map((mode) => modes.vectors[mode]);
    x.set(question.x);
    gradient.set(question.gradient);
    energy = trial;
    residual = trialResidual;
  }

  const final = yield* numericalHessian(x, displacement);
  const modes = projectedModes(final, taken(x));
  return {
    coordinates: x,
    energy,
    gradientMax: residual,
    converged: residual <= tolerance,
    hessian: final,
    modes,
    order: negative(modes.eigenvalues),
    evaluations: evaluations + 2 * size,
  };
}

function negative(eigenvalues: Float64Array): number {
  let count = 0;
  for (let n = 0; n < eigenvalues.length; n++) if (eigenvalues[n] < -FLAT_CURVATURE) count++;
  return count;
}

/** The modes to climb: for each direction followed that with the largest overlap, then the softest ones. */
function chooseModes({ vectors }: Modes, follow: readonly Float64Array[], order: number): number[] {
  const chosen: number[] = [];
  for (const direction of follow) {
    let best = -1;
    let overlap = -1;
    vectors.forEach((vector, mode) => {
      const cosine = Math.abs(dot(vector, direction));
      if (chosen.includes(mode) || cosine <= overlap) return;
      best = mode;
      overlap = cosine;
    });
    chosen.push(best);
  }
  for (let mode = 0; chosen.length < order; mode++) if (!chosen.includes(mode)) chosen.push(mode);
  return chosen;
}

/** The partitioned rational function step: up along the chosen modes, down along all others. */
function rationalStep({ eigenvalues, vectors }: Modes, chosen: readonly number[], gradient: Float64Array): Float64Array {
  const forces = vectors.map((vector) => dot(vector, gradient));
  const others = vectors.map((_, mode) => mode).filter((mode) => !chosen.includes(mode));
  const step = new Float64Array(gradient.length);
  const add = (modes: readonly number[], mu: number): void => {
    for (const mode of modes) {
      const gap = eigenvalues[mode] - mu;
      if (forces[mode] === 0 || gap === 0) continue;
      const along = -forces[mode] / gap;
      for (let k = 0; k < step.length; k++) step[k] += along * vectors[mode][k];
    }
  };
  const pick = (values: ArrayLike<number>, modes: readonly number[]): number[] => modes.map((mode) => values[mode]);
  add(others, smallestRoot(pick(eigenvalues, others), pick(forces, others)));
  // the largest root of a matrix is minus the smallest one of its negative
  add(
    chosen,
    -smallestRoot(
      pick(eigenvalues, chosen).map((value) => -value),
      pick(forces, chosen),
    ),
  );
  return step;
}

/** The smallest eigenvalue of [[diag(lambda), F], [F^T, 0]]: the root of mu = sum F^2 / (mu - lambda) below every lambda and 0. */
function smallestRoot(lambda: readonly number[], F: readonly number[]): number {
  const top = Math.min(0, ...lambda);
  let low = top - length(F) - 1e-12;
  let high = top;
  for (let n = 0; n < 200 && high - low > 1e-15 * Math.abs(low); n++) {
    const mu = (low + high) / 2;
    let value = mu;
    for (let i = 0; i < F.length; i++) if (F[i] !== 0) value -= (F[i] * F[i]) / (mu - lambda[i]);
    if (value > 0) high = mu;
    else low = mu;
  }
  return low;
}

function quadratic(hessian: Float64Array, v: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < v.length; i++) sum += v[i] * dot(hessian.subarray(i * v.length, (i + 1) * v.length), v);
  return sum;
}
