/**
 * The order of a series by cross-validation: each fold of points is predicted by the series fitted to the others.
 *
 * Sources: M. Stone, J. R. Statist. Soc. B 36, 111 (1974); S. Geisser, J. Am. Statist. Assoc. 70, 320 (1975).
 */
import { TordialError } from '@tordial/geometry';
import { type CountedPoint, countedPoints, type FitSet } from './fit-points.js';
import { type FitSeriesOptions, fitCounted } from './fit-series.js';
import { seriesEnergy } from './series-term.js';

export interface OrderError {
  readonly order: number;
  /** Weighted root-mean-square error of predicted points, kcal/mol; null where a fold leaves too few points. */
  readonly error: number | null;
}

export interface OrderChoice {
  readonly order: number;
  readonly errors: readonly OrderError[];
  readonly folds: number;
}

/** A higher order must lower the error by at least this share to be taken. */
const WORTH = 0.05;

/**
 * The lowest order in `from` ... `to` whose error is within five percent of the least. `folds` is the number of folds or 'leave-one-out'; mirror
 * images stay together, and fold f takes every folds-th independent point of the sets in turn.
 *
 * Throws `fit/order` for a range that is none, `fit/folds`, and `fit/points` when no order can be judged.
 */
export function chooseOrder(
  sets: readonly FitSet[],
  range: { readonly from: number; readonly to: number },
  options: Omit<FitSeriesOptions, 'order'>,
  folds: number | 'leave-one-out' = 'leave-one-out',
): OrderChoice {
  if (!(range.from <= range.to))
    throw new TordialError('fit/order', `the orders ${range.from} to ${range.to} are no range; write the lower one first`);
  const points = countedPoints(sets, options.weights, options.phases);
  const independent = new Set(points.map(({ twins }) => twins)).size;
  const count = folds === 'leave-one-out' ? independent : folds;
  if (!Number.isInteger(count) || count < 2 || count > independent)
    throw new TordialError('fit/folds', `${independent} independent points cannot be split into ${folds} folds; take 2 to ${independent}`);
  const errors: OrderError[] = [];
  for (let order = range.from; order <= range.to; order++)
    errors.push({ order, error: errorOf(points, sets.length, { ...options, order }, count) });
  const judged = errors.filter((entry): entry is { order: number; error: number } => entry.error !== null);
  if (judged.length === 0)
    throw new TordialError(
      'fit/points',
      `${independent} independent points are too few to judge an order of ${range.from} by leaving points out; give more points, or name the order`,
    );
  const least = Math.min(...judged.map(({ error }) => error));
  const best = judged.find(({ error }) => error <= least * (1 + WORTH) + 1e-9) ?? judged[0];
  return { order: best.order, errors, folds: count };
}

function errorOf(points: readonly CountedPoint[], setCount: number, options: FitSeriesOptions, folds: number): number | null {
  let sum = 0;
  let weights = 0;
  for (let fold = 0; fold < folds; fold++) {
    const left = points.filter(({ twins }) => twins % folds === fold);
    const rest = points.filter(({ twins }) => twins % folds !== fold);
    // a set that a fold leaves out whole has no zero of energy to be judged by
    if (new Set(rest.map(({ set }) => set)).size < setCount) return null;
    try {
      const { series, offsets } = fitCounted(rest, setCount, options);
      for (const point of left) {
        const predicted =
          point.base +
          offsets[point.set] +
          point.torsions.reduce((s, angles, g) => s + angles.reduce((t, phi) => t + seriesEnergy(series[g], phi), 0), 0);
        // offsets of a fit take the constant part of the series up
        const constant = point.torsions.reduce((s, angles, g) => s + angles.length * series[g].reduce((t, { v }) => t + v / 2, 0), 0);
        sum += point.weight * (predicted - constant - point.reference) ** 2;
        weights += point.weight;
      }
    } catch (error) {
      if (error instanceof TordialError && error.code === 'fit/points') return null;
      throw error;
    }
  }
  return Math.sqrt(sum / weights);
}
