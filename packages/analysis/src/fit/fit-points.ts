/** The points that a torsion series is fitted to, and what each counts. */
import { TordialError } from '@tordial/geometry';
import { GAS_CONSTANT_KCAL } from '../constants.js';
import { requireTemperature } from '../temperature.js';

export interface FitPoint {
  /** Driven angle, degrees. */
  readonly angle: number;
  /** Energy to be reproduced, kcal/mol, any zero. */
  readonly reference: number;
  /** Energy without the fitted terms at the geometry of the point, kcal/mol, any zero. */
  readonly base: number;
  /** For each series the angles (radians) of the torsions that have it, at the geometry of the point. */
  readonly torsions: readonly (readonly number[])[];
  /** What the point counts beside the others, where given; 1. */
  readonly weight?: number;
}

/** Points of one profile, which share a zero of energy. */
export interface FitSet {
  readonly name: string;
  readonly points: readonly FitPoint[];
}

export type FitWeights =
  | { readonly kind: 'uniform' }
  | { readonly kind: 'boltzmann'; readonly temperature: number }
  | { readonly kind: 'given' };

/** Energies and torsion angles within which a point and that at the opposite angle tell the same, kcal/mol and cosine. */
const SAME_ENERGY = 1e-3;
const SAME_COSINE = 1e-3;

export interface CountedPoint extends FitPoint {
  readonly set: number;
  /** Points that are mirror images of each other share a number: they tell the same once. */
  readonly twins: number;
  /** Weights sum to the number of independent points. */
  readonly weight: number;
}

/**
 * All points with their weights. A point and its mirror image at the opposite angle are one piece of information when phases are fixed and
 * count once together.
 *
 * Throws `fit/points` for none, `fit/value` for values that are no numbers, `fit/weights` for weights that are none.
 */
export function countedPoints(sets: readonly FitSet[], weights: FitWeights, phases: 'fixed' | 'free'): CountedPoint[] {
  const counted: (FitPoint & { set: number; twins: number; share: number })[] = [];
  let twins = 0;
  sets.forEach(({ name, points }, set) => {
    if (points.length === 0) throw new TordialError('fit/points', `${name || `set ${set + 1}`} has no points to fit to`);
    for (const point of points)
      for (const value of [point.angle, point.reference, point.base, ...point.torsions.flat()])
        if (!Number.isFinite(value))
          throw new TordialError(
            'fit/value',
            `${name || `set ${set + 1}`}: the point at ${point.angle} degrees holds ${value}; all values must be finite numbers`,
          );
    const first = counted.length;
    for (const point of points) {
      const twin = phases === 'fixed' ? counted.slice(first).find((other) => areMirrorImages(point, other)) : undefined;
      counted.push({ ...point, set, twins: twin ? twin.twins : twins++, share: 1 });
    }
  });
  const lowest = sets.map(({ points }) => Math.min(...points.map(({ reference }) => reference)));
  if (weights.kind === 'boltzmann') requireTemperature(weights.temperature);
  const raw = counted.map(({ reference, set, weight }) => {
    if (weights.kind === 'uniform') return 1;
    if (weights.kind === 'boltzmann') return Math.exp((lowest[set] - reference) / (GAS_CONSTANT_KCAL * weights.temperature));
    if (weight === undefined || !(weight >= 0 && Number.isFinite(weight)))
      throw new TordialError(
        'fit/weights',
        `given weights are asked for and a point has the weight ${weight}; give each point a weight of 0 or more`,
      );
    return weight;
  });
  const copies = new Map<number, number>();
  for (const point of counted) copies.set(point.twins, (copies.get(point.twins) ?? 0) + 1);
  const shared = raw.map((weight, i) => weight / (copies.get(counted[i].twins) ?? 1));
  const total = shared.reduce((sum, weight) => sum + weight, 0);
  if (!(total > 0)) throw new TordialError('fit/weights', 'all weights are 0; at least some points must count');
  return counted.map(({ share: _, ...point }, i) => ({ ...point, weight: (shared[i] * twins) / total }));
}

function areMirrorImages(p: FitPoint, q: FitPoint): boolean {
  const opposite = Math.abs(((((p.angle + q.angle) % 360) + 540) % 360) - 180) < 1e-6;
  if (!opposite || Math.abs(p.reference - q.reference) > SAME_ENERGY || Math.abs(p.base - q.base) > SAME_ENERGY) return false;
  if (p.weight !== q.weight) return false;
  const cosines = (point: FitPoint): number[][] => point.torsions.map((angles) => angles.map(Math.cos).sort((a, b) => a - b));
  const other = cosines(q);
  return cosines(p).every((row, g) => row.every((value, t) => Math.abs(value - other[g][t]) < SAME_COSINE));
}
