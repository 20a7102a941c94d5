/**
 * Torsion constants by rule, for axes that MMFFTOR does not list. They depend on the two atoms of the axis only:
 *
 *   V2 = beta pi_jk (U_j U_k)^1/2          where pi overlap holds the axis planar
 *   V3 = (V_j V_k)^1/2 / N_jk              between saturated atoms; N_jk is the number of torsions about the axis
 *   V2 = -(W_j W_k)^1/2                    between two divalent atoms of group 16
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 616 (1996), rules (a) to (h) and the table of U, V, W. V of sulphur is 0.48:
 * the rows of MMFFTOR made by rule and the molecules ERULE_01, 02 and 04 of the validation suite tell it from 0.49.
 */
import { periodicRow } from './periodic-row.js';
import { AROMATIC } from './rule-bond-order.js';
import { typeProperties } from './type-properties.js';

const U: Readonly<Record<number, number>> = { 6: 2, 7: 2, 8: 2, 14: 1.25, 15: 1.25, 16: 1.25 };
const V: Readonly<Record<number, number>> = { 6: 2.12, 7: 1.5, 8: 0.2, 14: 1.22, 15: 2.4, 16: 0.48 };
const W: Readonly<Record<number, number>> = { 8: 2, 16: 8 };
const CARBON = 6;

export interface TorsionConstants {
  readonly v1: number;
  readonly v2: number;
  readonly v3: number;
}

const NONE: TorsionConstants = { v1: 0, v2: 0, v3: 0 };

/**
 * Constants (kcal/mol) for torsions about an axis between atoms of types j and k with this bond order (`ruleBondOrder`). Undefined where the
 * rule has no number for an element.
 */
export function empiricalTorsion(j: number, k: number, order: number): TorsionConstants | undefined {
  const { atomicNumber, crd, val, pilp, mltb, lin } = typeProperties();
  const element_j = atomicNumber[j];
  const element_k = atomicNumber[k];

  const twofold = (beta: number, overlap: number) => {
    if (U[element_j] === undefined || U[element_k] === undefined) return undefined;
    return { v1: 0, v2: beta * overlap * Math.sqrt(U[element_j] * U[element_k]), v3: 0 };
  };
  const threefold = () => {
    if (V[element_j] === undefined || V[element_k] === undefined) return undefined;
    return { v1: 0, v2: 0, v3: Math.sqrt(V[element_j] * V[element_k]) / ((crd[j] - 1) * (crd[k] - 1)) };
  };

  // (a) a linear atom
  if (lin[j] || lin[k]) return NONE;

  // (b) an aromatic bond; the rows of MMFFTOR made by this rule have beta = 6 for nitrogen next to carbon too, where the text has 3
  if (order === AROMATIC) return twofold(6, pilp[j] || pilp[k] ? 0.3 : 0.5);

  // (c) a double bond
  if (order === 2) return twofold(6, mltb[j] === 2 && mltb[k] === 2 ? 1 : 0.4);

  // (d) two tetracoordinate atoms
  if (crd[j] === 4 && crd[k] === 4) return threefold();

  // (e), (f) one tetracoordinate atom: no barrier next to a planar one
  if (crd[j] === 4 || crd[k] === 4) {
    const other = crd[j] === 4 ? k : j;
    if (crd[other] === 3 && (val[other] === 4 || val[other] === 34 || mltb[other] > 0)) return NONE;
    if (crd[other] === 2 && (val[other] === 3 || mltb[other] > 0)) return NONE;
    return threefold();
  }

  // (g) a single bond between atoms with pi electrons
  if (order === 1 && ((mltb[j] > 0 && mltb[k] > 0) || (mltb[j] > 0 && pilp[k]) || (pilp[j] && mltb[k] > 0))) {
    if (pilp[j] && pilp[k]) return NONE;
    if (pilp[j] || pilp[k]) {
      const donor = pilp[j] ? j : k;
      if (mltb[donor] === 1) return twofold(6, 0.5);
      return twofold(6, periodicRow(element_j) === 1 && periodicRow(element_k) === 1 ? 0.3 : 0.15);
    }
    if ((mltb[j] === 1 || mltb[k] === 1) && (element_j !== CARBON || element_k !== CARBON)) return twofold(6, 0.4);
    return twofold(6, 0.15);
  }

  // (h) a single bond between saturated atoms
  const oxygenOrSulphur = W[element_j] !== undefined && W[element_k] !== undefined;
  if (oxygenOrSulphur && crd[j] === 2 && crd[k] === 2) return { v1: 0, v2: -Math.sqrt(W[element_j] * W[element_k]), v3: 0 };
  return threefold();
}
