/**
 * Fits in which the geometries follow the terms: relax in the fitted field, fit again at the new geometries, until the relaxed profile is the one that the fit
 * promised. By the envelope theorem the slope of a relaxed energy with a term's amplitude is that at the fixed geometry, so each
 * round is a Gauss-Newton step on the relaxed profile; a step that leads away is halved.
 */
import type { FitSet } from './fit-points.js';
import type { FittedTerm, SeriesFit } from './fit-series.js';
import { type SeriesTerm, seriesEnergy } from './series-term.js';

export interface SelfConsistentFit {
  readonly fit: SeriesFit;
  /** The terms in use: those of the last fit, or on the way to them where steps were halved. */
  readonly series: readonly (readonly FittedTerm[])[];
  /** Points relaxed in the field with these terms. */
  readonly sets: readonly FitSet[];
  readonly iterations: number;
  /** Largest change of a point's energy in the last round, kcal/mol. */
  readonly change: number;
  readonly converged: boolean;
}

export interface SelfConsistentOptions {
  /** kcal/mol at which rounds agree; 1e-3. */
  readonly tolerance?: number;
  /** Rounds at most; 30. */
  readonly maxIterations?: number;
}

/** `relax` gives the points relaxed in the field with a series' terms, `fit` fits points; both as the caller has them. */
export function selfConsistentFit(
  start: readonly (readonly SeriesTerm[])[],
  relax: (series: readonly (readonly SeriesTerm[])[]) => readonly FitSet[],
  fit: (sets: readonly FitSet[]) => SeriesFit,
  { tolerance = 1e-3, maxIterations = 30 }: SelfConsistentOptions = {},
): SelfConsistentFit {
  let sets = relax(start);
  let fitted = fit(sets);
  let series: readonly (readonly FittedTerm[])[] = fitted.series;
  let change = Number.POSITIVE_INFINITY;
  let share = 1;
  let used = start;
  for (let iterations = 1; ; iterations++) {
    const promised = energies(sets, series);
    sets = relax(series);
    const next = fit(sets);
    const moved = largestDifference(promised, energies(sets, series));
    const left = largestDifference(energies(sets, series), energies(sets, next.series));
    const worst = Math.max(moved, left);
    if (worst > change) share /= 2;
    change = worst;
    if (change <= tolerance || iterations >= maxIterations)
      return { fit: next, series: change <= tolerance ? next.series : series, sets, iterations, change, converged: change <= tolerance };
    used = series;
    fitted = next;
    series = mixed(used, fitted.series, share);
  }
}

/** Terms between two of the same periodicities: those of `to` with amplitudes moved by a share of the way. */
function mixed(from: readonly (readonly SeriesTerm[])[], to: readonly (readonly FittedTerm[])[], share: number): FittedTerm[][] {
  return to.map((terms, g) =>
    terms.map((term, k) => {
      const old = from[g][k];
      return share === 1 || old === undefined || old.phase !== term.phase ? term : { ...term, v: old.v + share * (term.v - old.v) };
    }),
  );
}

/** Energies of all points with the series, each set above its mean. */
function energies(sets: readonly FitSet[], series: readonly (readonly SeriesTerm[])[]): number[] {
  return sets.flatMap(({ points }) => {
    const values = points.map(
      ({ base, torsions }) =>
        base + torsions.reduce((sum, angles, g) => sum + angles.reduce((s, phi) => s + seriesEnergy(series[g], phi), 0), 0),
    );
    const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
    return values.map((value) => value - mean);
  });
}

function largestDifference(p: readonly number[], q: readonly number[]): number {
  return p.reduce((most, value, i) => Math.max(most, Math.abs(value - q[i])), 0);
}
