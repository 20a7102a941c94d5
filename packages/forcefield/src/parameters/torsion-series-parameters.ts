/** Torsion series of the caller in place of a force field's own torsion terms. */
import { TordialError } from '@tordial/geometry';
import { HIGHEST_PERIODICITY, type TorsionSeriesTable } from '../terms/torsion-series.js';
import { SERIES } from './source.js';
import type { TorsionParameters } from './torsion-parameters.js';

/** One term 0.5 V (1 + cos(n phi - phase)). */
export interface TorsionSeriesTerm {
  /** Periodicity, 1 to 6. */
  readonly n: number;
  /** Amplitude, kcal/mol; may be negative. */
  readonly v: number;
  /** Degrees. */
  readonly phase: number;
}

/** A series and the torsions that have it, as the `series` of a `tordial/fit/1` document are. */
export interface TorsionSeries {
  /** Atom indices i-j-k-l, each a torsion that the force field has a term for, in either direction. */
  readonly torsions: readonly (readonly [number, number, number, number])[];
  /** No term switches the torsions' own terms off. */
  readonly terms: readonly TorsionSeriesTerm[];
}

export interface TorsionsWithSeries {
  /** The force field's own terms, those of the torsions with a series set to 0. */
  readonly torsion: TorsionParameters;
  readonly torsionSeries: TorsionSeriesTable;
}

/**
 * Takes the terms of the named torsions out of a table and puts the series beside it.
 *
 * Throws `mmff94/torsion-series` for atoms that are no torsion of the force field, a torsion that is named twice, and a term that is none.
 */
export function withTorsionSeries(own: TorsionParameters, overrides: readonly TorsionSeries[]): TorsionsWithSeries {
  const count = overrides.reduce((sum, { torsions }) => sum + torsions.length, 0);
  const torsion = { ...own, v1: own.v1.slice(), v2: own.v2.slice(), v3: own.v3.slice(), source: own.source.slice() };
  const table = {
    i: new Int32Array(count),
    j: new Int32Array(count),
    k: new Int32Array(count),
    l: new Int32Array(count),
    constant: new Float64Array(count),
    cosine: new Float64Array(count * HIGHEST_PERIODICITY),
    sine: new Float64Array(count * HIGHEST_PERIODICITY),
  };
  let row = 0;
  for (const { torsions, terms } of overrides) {
    for (const { n, v, phase } of terms) checkTerm(n, v, phase);
    for (const atoms of torsions) {
      const at = rowOf(own, atoms);
      if (at < 0)
        throw wrong(
          `atoms ${atoms.join(', ')} are no torsion that MMFF94 has a term for; give four bonded atoms of this molecule`,
          atoms[1],
        );
      if (torsion.source[at] === SERIES) throw wrong(`the torsion ${atoms.join('-')} is named by two series`, atoms[1]);
      torsion.v1[at] = torsion.v2[at] = torsion.v3[at] = 0;
      torsion.source[at] = SERIES;
      [table.i[row], table.j[row], table.k[row], table.l[row]] = atoms;
      for (const { n, v, phase } of terms) {
        const place = row * HIGHEST_PERIODICITY + n - 1;
        table.constant[row] += v / 2;
        table.cosine[place] += (v / 2) * Math.cos((phase * Math.PI) / 180);
        table.sine[place] += (v / 2) * Math.sin((phase * Math.PI) / 180);
      }
      row++;
    }
  }
  return { torsion, torsionSeries: table };
}

/** Row of a torsion in the force field's table, whichever way its atoms are named; -1 when there is none. */
function rowOf({ i, j, k, l }: TorsionParameters, [a, b, c, d]: readonly [number, number, number, number]): number {
  const at = (row: number, p: number, q: number, r: number, s: number): boolean =>
    i[row] === 3 * p && j[row] === 3 * q && k[row] === 3 * r && l[row] === 3 * s;
  for (let row = 0; row < i.length; row++) if (at(row, a, b, c, d) || at(row, d, c, b, a)) return row;
  return -1;
}

function checkTerm(n: number, v: number, phase: number): void {
  if (!Number.isInteger(n) || n < 1 || n > HIGHEST_PERIODICITY)
    throw wrong(`a term has the periodicity ${n}; it must be a whole number from 1 to ${HIGHEST_PERIODICITY}`);
  if (!Number.isFinite(v) || !Number.isFinite(phase))
    throw wrong(`the ${n}-fold term has the amplitude ${v} and the phase ${phase}; both must be finite numbers`);
}

function wrong(what: string, atom?: number): TordialError {
  return new TordialError('mmff94/torsion-series', `the torsion series do not fit: ${what}`, atom === undefined ? {} : { atom });
}
