/**
 * Vicinal proton-proton coupling of an sp3 H-C-C-H fragment:
 *
 *   3J = P1 cos^2 phi + P2 cos phi + P3 + sum_i dchi_i [ P4 + P5 cos^2( xi_i phi + P6 |dchi_i| ) ]
 *   dchi_i = dchi_alpha - P7 sum dchi_beta
 *
 * phi is the H-C-C-H torsion angle, the sum runs over the four substituents of the two carbons, dchi is an electronegativity (Huggins) less that
 * of hydrogen, xi_i = +1 where the substituent stands clockwise of the coupled proton on its own carbon, seen with that carbon in front, -1
 * where it stands counterclockwise.
 *
 * The general parameter set (13.70, -0.73, 0, 0.56, -2.47, 16.9 degrees, 0.14) was fitted to ethanes with two to four substituents, mostly in
 * six-membered rings, with a root mean square deviation of 0.48 Hz; a CH3 beside a CH2 comes out about 1 Hz too small.
 *
 * C. A. G. Haasnoot, F. A. A. M. de Leeuw, C. Altona, Tetrahedron 36, 2783 (1980); electronegativities: M. L. Huggins, J. Am. Chem. Soc. 75,
 * 4123 (1953).
 */
import { elementSymbol, TordialError } from '@tordial/geometry';
import { DEGREE } from '../constants.js';

const [P1, P2, P3, P4, P5, P6, P7] = [13.7, -0.73, 0, 0.56, -2.47, 16.9 * DEGREE, 0.14];

/** Huggins electronegativities by atomic number. */
const HUGGINS = new Map([
  [1, 2.2],
  [6, 2.6],
  [7, 3.05],
  [8, 3.5],
  [9, 3.9],
  [14, 1.9],
  [15, 2.15],
  [16, 2.6],
  [17, 3.15],
  [32, 2.0],
  [33, 2.1],
  [34, 2.55],
  [35, 2.95],
  [50, 1.9],
  [52, 2.3],
  [53, 2.65],
]);

/** One substituent of the fragment: its electronegativity above hydrogen's, beta correction included, and its orientation xi. */
export interface CouplingSubstituent {
  readonly electronegativity: number;
  readonly orientation: 1 | -1;
}

/** Coupling constant in Hz of protons at the torsion angle phi (radians) with these substituents; hydrogens add nothing and may be left out. */
export function haasnootCoupling(phi: number, substituents: readonly CouplingSubstituent[]): number {
  const cosine = Math.cos(phi);
  let coupling = P1 * cosine * cosine + P2 * cosine + P3;
  for (const { electronegativity, orientation } of substituents)
    coupling += electronegativity * (P4 + P5 * Math.cos(orientation * phi + P6 * Math.abs(electronegativity)) ** 2);
  return coupling;
}

/** Huggins electronegativity of an element less that of hydrogen. Throws `couplings/electronegativity` for one that the table has not. */
export function relativeElectronegativity(atomicNumber: number): number {
  const value = HUGGINS.get(atomicNumber);
  if (value === undefined)
    throw new TordialError(
      'couplings/electronegativity',
      `no Huggins electronegativity for ${elementSymbol(atomicNumber)}: no coupling is given`,
    );
  return value - 2.2;
}

/** Electronegativity of a group above hydrogen's: the atom bonded to the fragment, less P7 times those of the atoms it carries (each once). */
export function groupElectronegativity(alpha: number, beta: readonly number[]): number {
  return relativeElectronegativity(alpha) - P7 * beta.reduce((sum, atomicNumber) => sum + relativeElectronegativity(atomicNumber), 0);
}
