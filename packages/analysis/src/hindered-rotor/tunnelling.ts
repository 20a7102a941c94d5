/**
 * Which levels belong together: the copies of one torsional state in equivalent wells, split by tunnelling between them.
 */
import { occupancy, type TorsionalLevels } from './levels.js';
import { mainExtrema, type PeriodicSeries, type SeriesExtremum, seriesValue, withoutNoise } from './periodic-series.js';

/** One torsional state in a set of equivalent wells: as many levels as wells. */
export interface Multiplet {
  /** Angles (radians, [-pi, pi)) of the equivalent wells. */
  readonly wells: readonly number[];
  /** Torsional quantum number in these wells, 0 for the lowest. */
  readonly quantumNumber: number;
  /** Indices into the levels, ascending. */
  readonly levels: readonly number[];
  /** Mean of its levels, cm-1. */
  readonly energy: number;
  /** Highest minus lowest of its levels, cm-1; below about 1e-10 it is rounding. */
  readonly splitting: number;
}

/** Symmetry of a potential and a rotational constant: the largest n with period 2 pi / n, and whether phi and -phi agree. */
export interface TorsionalSymmetry {
  readonly periodicity: number;
  readonly even: boolean;
}

/** Symmetry that the potential and the rotational constant share; a constant potential has periodicity 0, for any. */
export function torsionalSymmetry(potential: PeriodicSeries, constant: PeriodicSeries): TorsionalSymmetry {
  let periodicity = 0;
  let even = true;
  for (const { cosine, sine } of [withoutNoise(potential), withoutNoise(constant)])
    for (let k = 1; k < cosine.length; k++) {
      if (cosine[k] !== 0 || sine[k] !== 0) periodicity = greatestCommonDivisor(k, periodicity);
      if (sine[k] !== 0) even = false;
    }
  return { periodicity, even };
}

/** Equivalent wells of the potential, sets of angles (radians), the lowest set first. */
export function equivalentWells(potential: PeriodicSeries, constant: PeriodicSeries): number[][] {
  const { periodicity, even } = torsionalSymmetry(potential, constant);
  if (periodicity === 0) return [];
  const sets: number[][] = [];
  const wells = mainExtrema(withoutNoise(potential)).filter((extremum) => extremum.kind === 'minimum');
  for (const { angle } of wells) {
    const images = (other: number): boolean => {
      const period = (2 * Math.PI) / periodicity;
      const apart = (by: number): boolean => Math.abs(by - period * Math.round(by / period)) < 1e-5;
      return apart(angle - other) || (even && apart(angle + other));
    };
    const set = sets.find((members) => images(members[0]));
    if (set) set.push(angle);
    else sets.push([angle]);
  }
  return sets.sort((a, b) => seriesValue(potential, a[0]) - seriesValue(potential, b[0]));
}

/**
 * Sorts levels into multiplets. A level belongs to the set of equivalent wells whose basins (from barrier to barrier) hold at least 70 % of it;
 * s successive levels of a set of s wells are one torsional state. Levels spread over several sets, levels above the highest barrier where there is
 * more than one set, and a set's last incomplete group are left out.
 */
export function multiplets(levels: TorsionalLevels, potential: PeriodicSeries, constant: PeriodicSeries): Multiplet[] {
  const sets = equivalentWells(potential, constant);
  if (sets.length === 0) return [];
  const tops = mainExtrema(withoutNoise(potential)).filter((extremum) => extremum.kind === 'maximum');
  const highest = Math.max(...tops.map((top) => top.value));
  const above = levels.energies.findIndex((energy) => energy > highest);
  const bound = above < 0 ? levels.energies.length : above;
  return sets
    .flatMap((wells) => {
      const own =
        sets.length === 1
          ? Array.from(levels.energies.keys())
          : [...occupancyOfBasins(levels, tops, wells, bound)].flatMap((share, n) => (share >= 0.7 ? [n] : []));
      return Array.from({ length: Math.floor(own.length / wells.length) }, (_, v): Multiplet => {
        const members = own.slice(v * wells.length, (v + 1) * wells.length);
        const energies = members.map((n) => levels.energies[n]);
        return {
          wells,
          quantumNumber: v,
          levels: members,
          energy: energies.reduce((sum, energy) => sum + energy, 0) / energies.length,
          splitting: energies[energies.length - 1] - energies[0],
        };
      });
    })
    .sort((a, b) => a.energy - b.energy);
}

/** Of each of the first `count` levels the share in the basins of these wells. */
function occupancyOfBasins(
  levels: TorsionalLevels,
  tops: readonly SeriesExtremum[],
  wells: readonly number[],
  count: number,
): Float64Array {
  const angles = tops.map((top) => top.angle);
  const share = new Float64Array(count);
  for (const well of wells) {
    const to = angles.find((top) => top > well) ?? angles[0] + 2 * Math.PI;
    const from = angles.findLast((top) => top < well) ?? angles[angles.length - 1] - 2 * Math.PI;
    occupancy(levels, from, to, count).forEach((part, n) => {
      share[n] += part;
    });
  }
  return share;
}

function greatestCommonDivisor(a: number, b: number): number {
  return b === 0 ? a : greatestCommonDivisor(b, a % b);
}
