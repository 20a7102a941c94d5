/**
 * Nonlinear least squares: minimises sum_i w_i (y_i - f_i(p))^2 by the method of Levenberg and Marquardt.
 *
 * Each step is one of ml-levenberg-marquardt, in parameters scaled so that every column of the Jacobian has length 1 (Marquardt's scaling);
 * it is kept when it lowers the sum and its damping is changed accordingly. The Jacobian is taken by five-point central differences. What
 * the damped steps leave over is taken out by Gauss-Newton steps through a singular value decomposition, and the result counts as
 * found only when the residuals are orthogonal to the model's tangent plane (relative offset).
 *
 * Sources: K. Levenberg, Quart. Appl. Math. 2, 164 (1944); D. W. Marquardt, J. SIAM 11, 431 (1963); criterion of D. M. Bates and
 * D. G. Watts, Technometrics 23, 179 (1981); covariance as in D. M. Bates and D. G. Watts, Nonlinear Regression Analysis and Its
 * Applications (1988), chapter 2.
 */
import { TordialError } from '@tordial/geometry';
import { levenbergMarquardt as libraryStep } from 'ml-levenberg-marquardt';
import { Matrix, SingularValueDecomposition } from 'ml-matrix';

export interface NonlinearProblem {
  /** Observed values y. */
  readonly observed: ArrayLike<number>;
  /** Writes the model's values at `parameters` into `values`, one an observation. */
  readonly model: (parameters: Float64Array, values: Float64Array) => void;
  /** Starting parameters. */
  readonly start: ArrayLike<number>;
  /** Weights of the squared residuals, all 1 when left out. */
  readonly weights?: ArrayLike<number>;
  /** How many of the last observations are restraints on the parameters rather than data; 0. */
  readonly restraints?: number;
  /** Independent data for the degrees of freedom, where they are fewer than the observations (repeated ones, say). */
  readonly independent?: number;
  /** Steps tried before giving up; 2000. */
  readonly maxIterations?: number;
}

export interface NonlinearFit {
  readonly parameters: Float64Array;
  /** Covariance of the parameters, row by row; null without degrees of freedom. */
  readonly covariance: readonly (readonly number[])[] | null;
  /** Square roots of its diagonal. */
  readonly standardErrors: readonly number[] | null;
  /** Weighted, of the data without the restraints. */
  readonly residualSumOfSquares: number;
  readonly degreesOfFreedom: number;
  readonly iterations: number;
}

/** Relative offset at which a solution counts as found: the parameters are off by this share of their standard errors. */
const OFFSET = 1e-7;
/** Smallest ratio of singular values of the scaled Jacobian at which the data determine all parameters. */
const DETERMINED = 1e-9;
const DAMPING = { start: 1e-2, up: 11, down: 9, least: 1e-12, most: 1e14 };

/**
 * Fits a model to data.
 *
 * Throws `fit/model` when the model is not finite at the start, `fit/points` for fewer observations than parameters, `fit/not-converged` when no minimum is
 * reached from this start, `fit/not-determined` when the path ends where the data say nothing about some parameter.
 */
export function levenbergMarquardt(problem: NonlinearProblem): NonlinearFit {
  const { observed, model, weights, restraints = 0, maxIterations = 2000 } = problem;
  const m = observed.length;
  const p = problem.start.length;
  if (m < p || m < 2)
    throw new TordialError('fit/points', `${m} observations cannot determine ${p} parameters; give more points or fewer terms`);
  const root = Float64Array.from({ length: m }, (_, i) => Math.sqrt(weights?.[i] ?? 1));
  const y = Float64Array.from({ length: m }, (_, i) => root[i] * observed[i]);
  const values = (parameters: Float64Array): Float64Array => {
    const at = new Float64Array(m);
    model(parameters, at);
    for (let i = 0; i < m; i++) at[i] *= root[i];
    return at;
  };
  const places = Array.from({ length: m }, (_, i) => i);

  let parameters: Float64Array = Float64Array.from(problem.start);
  let residuals: Float64Array = difference(y, values(parameters));
  let square = sumOfSquares(residuals);
  if (!Number.isFinite(square))
    throw new TordialError('fit/model', 'the model has no finite values at the starting parameters; start elsewhere');
  const total = sumOfSquares(y);
  let damping = DAMPING.start;
  let iterations = 0;

  for (;;) {
    const jacobian = jacobianAt(values, parameters, m);
    if (square <= 1e-28 * total) return finished(jacobian);
    const { offset } = tangent(jacobian, residuals);
    if (offset < OFFSET) break;
    const scale = columnLengths(jacobian);
    // one step at a time, each damped more until the sum falls
    let lowered = false;
    while (!lowered && damping < DAMPING.most && iterations < maxIterations) {
      iterations++;
      const trial = dampedStep(jacobian, scale);
      const left = difference(y, values(trial));
      const sum = sumOfSquares(left);
      lowered = sum < square;
      damping = lowered ? Math.max(damping / DAMPING.down, DAMPING.least) : damping * DAMPING.up;
      if (lowered) [parameters, residuals, square] = [trial, left, sum];
    }
    if (!lowered) {
      // at the rounding of the sum itself the orthogonal steps go further; anywhere else the search has failed
      if (iterations >= maxIterations || offset > 1e-3) throw notConverged(offset, iterations);
      break;
    }
  }
  polish();
  return finished(jacobianAt(values, parameters, m));

  function dampedStep(jacobian: Matrix, scale: Float64Array): Float64Array {
    const unscaled = (scaled: readonly number[]): Float64Array => Float64Array.from(scaled, (value, k) => value / scale[k]);
    const { parameterValues } = libraryStep(
      { x: places, y },
      (scaled) => {
        const at = values(unscaled(scaled));
        return (place) => at[place];
      },
      {
        initialValues: Array.from(parameters, (value, k) => value * scale[k]),
        jacobianFunction: () => (place) => jacobian.getRow(place).map((value, k) => value / scale[k]),
        damping,
        maxIterations: 1,
        errorTolerance: 0,
      },
    );
    return unscaled(parameterValues);
  }

  /** Gauss-Newton steps as long as they bring the residuals closer to orthogonal. */
  function polish(): void {
    let best = Number.POSITIVE_INFINITY;
    for (let n = 0; n < 20; n++) {
      const { offset, step } = tangent(jacobianAt(values, parameters, m), residuals);
      if (offset >= 0.5 * best || !step) {
        if (Math.min(best, offset) > 1e-5) throw notConverged(offset, iterations);
        return;
      }
      best = offset;
      if (best < 1e-11) return;
      const trial = parameters.map((value, k) => value + step[k]);
      const left = difference(y, values(trial));
      if (!(sumOfSquares(left) <= square * (1 + 1e-9))) {
        if (best > OFFSET) throw notConverged(best, iterations);
        return;
      }
      [parameters, residuals, square] = [trial, left, sumOfSquares(left)];
    }
  }

  function finished(jacobian: Matrix): NonlinearFit {
    const scale = columnLengths(jacobian);
    const scaled = scaledColumns(jacobian, scale);
    const { diagonal } = new SingularValueDecomposition(scaled, { computeLeftSingularVectors: false, computeRightSingularVectors: false });
    if (!(Math.min(...diagonal) > DETERMINED * Math.max(...diagonal)))
      throw new TordialError(
        'fit/not-determined',
        `the search ended at ${Array.from(parameters, (value) => value.toPrecision(4)).join(', ')}, where the data do not determine all ${p} parameters; start elsewhere or fit fewer`,
      );
    const data = m - restraints;
    const residualSumOfSquares = sumOfSquares(residuals.subarray(0, data));
    const degreesOfFreedom = (problem.independent ?? data) - p;
    const covariance = degreesOfFreedom > 0 ? covarianceOf(scaled, scale, data, residualSumOfSquares / degreesOfFreedom) : null;
    return {
      parameters,
      covariance,
      standardErrors: covariance?.map((row, k) => Math.sqrt(row[k])) ?? null,
      residualSumOfSquares,
      degreesOfFreedom,
      iterations,
    };
  }
}

/** Five-point central differences of weighted model values: rows of observations, a column a parameter. */
function jacobianAt(values: (parameters: Float64Array) => Float64Array, parameters: Float64Array, m: number): Matrix {
  const jacobian = new Matrix(m, parameters.length);
  const moved = parameters.slice();
  parameters.forEach((value, k) => {
    const h = 6e-4 * (Math.abs(value) || 1e-2);
    const at = (steps: number): Float64Array => {
      moved[k] = value + steps * h;
      return values(moved);
    };
    const [p2, p1, n1, n2] = [at(2), at(1), at(-1), at(-2)];
    moved[k] = value;
    for (let i = 0; i < m; i++) jacobian.set(i, k, (8 * (p1[i] - n1[i]) - (p2[i] - n2[i])) / (12 * h));
  });
  return jacobian;
}

/** The relative offset of the residuals from orthogonality to the tangent plane, and the Gauss-Newton step; no step where columns depend on each other. */
function tangent(jacobian: Matrix, residuals: Float64Array): { offset: number; step: number[] | null } {
  const { rows: m, columns: p } = jacobian;
  const scale = columnLengths(jacobian);
  const { leftSingularVectors: u, rightSingularVectors: v, diagonal } = new SingularValueDecomposition(scaledColumns(jacobian, scale));
  const least = DETERMINED * Math.max(...diagonal);
  // along directions in which the model does not move there is nothing to gain
  const along = diagonal.map((value, k) => (value > least ? sumOfProducts(u.getColumn(k), residuals) : 0));
  const inPlane = sumOfSquares(along);
  const outside = Math.max(sumOfSquares(residuals) - inPlane, 0);
  const offset = Math.sqrt(inPlane / p) / Math.sqrt(outside / Math.max(m - p, 1));
  const step = diagonal.every((value) => value > least)
    ? Array.from(scale, (length, k) => diagonal.reduce((sum, value, j) => sum + (v.get(k, j) * along[j]) / value, 0) / length)
    : null;
  return { offset: Number.isFinite(offset) ? offset : Number.POSITIVE_INFINITY, step };
}

/** s^2 M^-1 G M^-1 with G = J'WJ of the data and M that of data and restraints; s^2 M^-1 without restraints. */
function covarianceOf(scaled: Matrix, scale: Float64Array, data: number, variance: number): number[][] {
  const p = scaled.columns;
  const { diagonal, rightSingularVectors: v } = new SingularValueDecomposition(scaled, { computeLeftSingularVectors: false });
  const inverse = new Matrix(p, p);
  for (let i = 0; i < p; i++)
    for (let j = 0; j < p; j++) {
      let sum = 0;
      for (let k = 0; k < p; k++) sum += (v.get(i, k) * v.get(j, k)) / diagonal[k] ** 2;
      inverse.set(i, j, sum);
    }
  let middle = inverse;
  if (data < scaled.rows) {
    const own = scaled.subMatrix(0, data - 1, 0, p - 1);
    middle = inverse.mmul(own.transpose().mmul(own)).mmul(inverse);
  }
  return middle.to2DArray().map((row, i) => row.map((value, j) => (variance * value) / (scale[i] * scale[j])));
}

function columnLengths(matrix: Matrix): Float64Array {
  return Float64Array.from({ length: matrix.columns }, (_, k) => Math.hypot(...matrix.getColumn(k)) || 1);
}

function scaledColumns(matrix: Matrix, scale: Float64Array): Matrix {
  const scaled = matrix.clone();
  for (let i = 0; i < matrix.rows; i++) for (let k = 0; k < matrix.columns; k++) scaled.set(i, k, matrix.get(i, k) / scale[k]);
  return scaled;
}

function difference(a: Float64Array, b: Float64Array): Float64Array {
  return a.map((value, i) => value - b[i]);
}

function sumOfProducts(a: ArrayLike<number>, b: ArrayLike<number>): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i] * b[i];
  return sum;
}

function sumOfSquares(values: ArrayLike<number>): number {
  return sumOfProducts(values, values);
}

function notConverged(offset: number, iterations: number): TordialError {
  return new TordialError(
    'fit/not-converged',
    `no minimum was reached in ${iterations} steps (relative offset ${offset.toPrecision(2)}); start closer to the solution or fit fewer parameters`,
  );
}
