/** The torsion terms that a force field has on one bond, for people who ask where a barrier comes from. */
import type { Mmff94 } from './mmff94.js';
import { EMPIRICAL, SERIES, WILDCARD } from './parameters/source.js';
import { HIGHEST_PERIODICITY, type TorsionSeriesTable } from './terms/torsion-series.js';

export interface TorsionTerm {
  readonly atoms: readonly [number, number, number, number];
  /** Numeric atom types of the four atoms. */
  readonly types: readonly [number, number, number, number];
  /** Torsion class as MMFFTOR has it: 0 ordinary, 1 and 2 with single bonds between unsaturated atoms, 4 and 5 in small saturated rings. */
  readonly class: number;
  /** V1, V2, V3, kcal/mol; of a series as many as it has, at most V6. */
  readonly v: readonly number[];
  /** Phases of the terms, degrees, where they are not MMFF94's 0, 180, 0, 180 ... */
  readonly phases?: readonly number[];
  /** Made for the four types, for the two of the axis with any outer atoms, by the empirical rule, or a series of the caller. */
  readonly source: 'specific' | 'wildcard' | 'empirical rule' | 'series';
}

/** The terms on the bond between atoms b and c, in either direction, their atoms written from the side of b; empty where there are none. */
export function torsionTermsOn({ torsion, torsionSeries, atomTypes }: Mmff94['parameters'], b: number, c: number): TorsionTerm[] {
  const terms: TorsionTerm[] = [];
  for (let n = 0; n < torsion.v1.length; n++) {
    const [i, j, k, l] = [torsion.i[n] / 3, torsion.j[n] / 3, torsion.k[n] / 3, torsion.l[n] / 3];
    const forward = j === b && k === c;
    if (!forward && !(j === c && k === b)) continue;
    const atoms: [number, number, number, number] = forward ? [i, j, k, l] : [l, k, j, i];
    terms.push({
      atoms,
      types: [atomTypes[atoms[0]], atomTypes[atoms[1]], atomTypes[atoms[2]], atomTypes[atoms[3]]],
      class: torsion.class[n],
      ...(torsion.source[n] === SERIES
        ? { ...seriesOf(torsionSeries, [i, j, k, l]), source: 'series' }
        : { v: [torsion.v1[n], torsion.v2[n], torsion.v3[n]], source: ownSource(torsion.source[n]) }),
    });
  }
  return terms;
}

function ownSource(source: number): TorsionTerm['source'] {
  return source === EMPIRICAL ? 'empirical rule' : source === WILDCARD ? 'wildcard' : 'specific';
}

/** Amplitudes of a torsion's series with MMFF94's phases where it has these, else amplitudes above 0 with their phases. */
function seriesOf(table: TorsionSeriesTable, [i, j, k, l]: readonly number[]): Pick<TorsionTerm, 'v' | 'phases'> {
  const row = table.i.findIndex((atom, n) => {
    const forward = atom === i && table.j[n] === j && table.k[n] === k && table.l[n] === l;
    return forward || (atom === l && table.j[n] === k && table.k[n] === j && table.l[n] === i);
  });
  const cosine = Array.from(table.cosine.subarray(row * HIGHEST_PERIODICITY, (row + 1) * HIGHEST_PERIODICITY));
  const sine = Array.from(table.sine.subarray(row * HIGHEST_PERIODICITY, (row + 1) * HIGHEST_PERIODICITY));
  const highest = cosine.findLastIndex((value, n) => Math.hypot(value, sine[n]) > 1e-12) + 1;
  const usual = sine.every((value) => Math.abs(value) < 1e-12);
  const v = Array.from({ length: Math.max(3, highest) }, (_, n) =>
    usual ? 2 * cosine[n] * (n % 2 === 0 ? 1 : -1) + 0 : 2 * Math.hypot(cosine[n], sine[n]),
  );
  return usual ? { v } : { v, phases: v.map((_, n) => (Math.atan2(sine[n], cosine[n]) * 180) / Math.PI) };
}
