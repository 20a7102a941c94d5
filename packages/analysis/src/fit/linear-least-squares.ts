/**
 * Linear least squares with a free offset for each set of points and a restraint on the coefficients:
 *
 *   minimise sum_i w_i (y_i - o_set(i) - x_i . b)^2 + penalty(b - b0)
 *
 * Directions of b that the points do not determine stay where the restraint's target b0 is (singular value decomposition, minimum norm).
 * Ridge: penalty lambda |b - b0|^2 (A. E. Hoerl and R. W. Kennard, Technometrics 12, 55 (1970)). Lasso: lambda sum |b - b0| over groups of
 * coefficients (R. Tibshirani, J. R. Statist. Soc. B 58, 267 (1996); M. Yuan and Y. Lin, ibid. 68, 49 (2006)), solved by accelerated proximal
 * gradient steps (A. Beck and M. Teboulle, SIAM J. Imaging Sci. 2, 183 (2009)).
 */
import { Matrix, SingularValueDecomposition } from 'ml-matrix';

export interface LinearProblem {
  /** Rows of points, a column a coefficient. */
  readonly design: readonly (readonly number[])[];
  readonly observed: readonly number[];
  /** Weights of the squared residuals. */
  readonly weights: readonly number[];
  /** Set of each point, 0 ... ; each set has an offset of its own. */
  readonly sets: readonly number[];
  /** Where undetermined and restrained coefficients go. */
  readonly target: readonly number[];
  readonly restraint: { readonly kind: 'none' | 'ridge' | 'lasso'; readonly strength: number };
  /** Coefficients that the lasso shrinks together; each stands in one group. */
  readonly groups: readonly (readonly number[])[];
  /** Root-mean-square effect on y of a unit step below which a direction counts as not determined. */
  readonly leastEffect: number;
}

export interface LinearSolution {
  readonly coefficients: number[];
  /** One a set. */
  readonly offsets: number[];
  /** Whether the points determine each coefficient by itself. */
  readonly determined: boolean[];
  /** Number of coefficients' directions that the points determine. */
  readonly rank: number;
  /** Covariance of the coefficients for residuals of variance 1. */
  readonly unitCovariance: number[][];
}

/** Solves the problem. `design` may have no column: the offsets are then the weighted means. */
export function solveLinear(problem: LinearProblem): LinearSolution {
  const { design, observed, weights, sets, target, restraint, groups, leastEffect } = problem;
  const columns = target.length;
  const setCount = Math.max(...sets) + 1;
  const centre = (values: readonly number[]): { means: number[]; centred: number[] } => {
    const sums = new Array<number>(setCount).fill(0);
    const total = new Array<number>(setCount).fill(0);
    values.forEach((value, i) => {
      sums[sets[i]] += weights[i] * value;
      total[sets[i]] += weights[i];
    });
    const means = sums.map((sum, set) => (total[set] > 0 ? sum / total[set] : 0));
    return { means, centred: values.map((value, i) => value - means[sets[i]]) };
  };
  const y = centre(observed);
  const x = Array.from({ length: columns }, (_, k) => centre(design.map((row) => row[k])));
  const offsetsFor = (b: readonly number[]): number[] =>
    y.means.map((mean, set) => mean - b.reduce((sum, value, k) => sum + value * x[k].means[set], 0));
  if (columns === 0) return { coefficients: [], offsets: y.means, determined: [], rank: 0, unitCovariance: [] };

  const root = weights.map(Math.sqrt);
  const a = new Matrix(observed.length, columns);
  for (let i = 0; i < observed.length; i++) for (let k = 0; k < columns; k++) a.set(i, k, root[i] * x[k].centred[i]);
  // what the target leaves over
  const left = y.centred.map((value, i) => root[i] * (value - target.reduce((sum, b, k) => sum + b * x[k].centred[i], 0)));
  const svd = new SingularValueDecomposition(a, { autoTranspose: true });
  const { leftSingularVectors: u, rightSingularVectors: v, diagonal } = svd;
  const total = weights.reduce((sum, weight) => sum + weight, 0);
  const least = leastEffect * Math.sqrt(total);
  const kept = diagonal.map((value) => value > least);
  const rank = kept.filter(Boolean).length;
  // a coefficient with a part in a direction that is not kept, or outside all directions, is not determined by itself
  const determined = Array.from({ length: columns }, (_, k) => {
    let within = 0;
    diagonal.forEach((_value, j) => {
      if (kept[j]) within += v.get(k, j) ** 2;
    });
    return within > 1 - 1e-4;
  });
  const along = diagonal.map((_value, j) => left.reduce((sum, value, i) => sum + u.get(i, j) * value, 0));
  const ridge = restraint.kind === 'ridge' ? restraint.strength : 0;
  const step = new Array<number>(columns).fill(0);
  const unitCovariance = Array.from({ length: columns }, () => new Array<number>(columns).fill(0));
  diagonal.forEach((value, j) => {
    if (!kept[j]) return;
    const shrunk = value / (value * value + ridge);
    for (let k = 0; k < columns; k++) {
      step[k] += v.get(k, j) * shrunk * along[j];
      for (let l = 0; l < columns; l++) unitCovariance[k][l] += v.get(k, j) * v.get(l, j) * shrunk * shrunk;
    }
  });
  const change = restraint.kind === 'lasso' ? lasso(a, left, groups, restraint.strength) : step;
  const coefficients = change.map((value, k) => value + target[k]);
  return { coefficients, offsets: offsetsFor(coefficients), determined, rank, unitCovariance };
}

/** Minimises |left - a b|^2 + strength sum_groups |b_group|. */
function lasso(a: Matrix, left: readonly number[], groups: readonly (readonly number[])[], strength: number): number[] {
  const gram = a.transpose().mmul(a);
  const pull = a
    .transpose()
    .mmul(Matrix.columnVector([...left]))
    .to1DArray();
  const columns = a.columns;
  // the trace bounds the largest eigenvalue, whose inverse is a safe step
  const rate = 1 / Math.max(gram.trace(), 1e-300);
  let b = new Array<number>(columns).fill(0);
  let ahead = [...b];
  let momentum = 1;
  for (let n = 0; n < 200_000; n++) {
    const moved = ahead.map((value, k) => value - rate * (gram.getRow(k).reduce((sum, g, l) => sum + g * ahead[l], 0) - pull[k]));
    for (const group of groups) {
      const length = Math.hypot(...group.map((k) => moved[k]));
      const factor = length > 0 ? Math.max(0, 1 - (rate * strength) / 2 / length) : 0;
      for (const k of group) moved[k] *= factor;
    }
    const change = Math.max(...moved.map((value, k) => Math.abs(value - b[k])));
    // momentum is dropped when it leads uphill
    const uphill = moved.reduce((sum, value, k) => sum + (ahead[k] - value) * (value - b[k]), 0) > 0;
    const next = uphill ? 1 : (1 + Math.sqrt(1 + 4 * momentum * momentum)) / 2;
    ahead = moved.map((value, k) => value + ((uphill ? 0 : momentum - 1) / next) * (value - b[k]));
    b = moved;
    momentum = next;
    if (n > 0 && change < 1e-13) break;
  }
  return b;
}
