/** The torsion terms that a force field has on one bond, for people who ask where a barrier comes from. */
import type { Mmff94Parameters } from './parameters/assign-parameters.js';
import { EMPIRICAL, WILDCARD } from './parameters/source.js';

export interface TorsionTerm {
  readonly atoms: readonly [number, number, number, number];
  /** Numeric atom types of the four atoms. */
  readonly types: readonly [number, number, number, number];
  /** Torsion class as MMFFTOR has it: 0 ordinary, 1 and 2 with single bonds between unsaturated atoms, 4 and 5 in small saturated rings. */
  readonly class: number;
  /** V1, V2, V3, kcal/mol. */
  readonly v: readonly [number, number, number];
  /** Made for the four types, for the two of the axis with any outer atoms, or by the empirical rule. */
  readonly source: 'specific' | 'wildcard' | 'empirical rule';
}

/** The terms on the bond between atoms b and c, in either direction, their atoms written from the side of b; empty where there are none. */
export function torsionTermsOn({ torsion, atomTypes }: Mmff94Parameters, b: number, c: number): TorsionTerm[] {
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
      v: [torsion.v1[n], torsion.v2[n], torsion.v3[n]],
      source: torsion.source[n] === EMPIRICAL ? 'empirical rule' : torsion.source[n] === WILDCARD ? 'wildcard' : 'specific',
    });
  }
  return terms;
}
