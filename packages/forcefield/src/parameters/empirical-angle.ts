/**
 * Angle bending constants by rule, for angles that MMFFANG does not list or lists without a force constant.
 *
 *   k = 1.75 Z_i C_j Z_k (r_ij + r_jk)^-1 theta0^-2 exp(-2 D),   D = (r_ij - r_jk)^2 / (r_ij + r_jk)^2
 *
 * theta0 in radians, reference lengths r in angstrom, k in md angstrom/rad^2; scaled by 0.05 in a three-membered and 0.85 in a
 * four-membered ring. Z and C go by element.
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 616 (1996), section on angle bending and its table of Z and C.
 */
import { typeProperties } from './type-properties.js';

/** Z of the outer atoms and C of the centre by atomic number; an element without one (H as a centre) does not occur there. */
const Z: Readonly<Record<number, number>> = {
  1: 1.395,
  6: 2.494,
  7: 2.711,
  8: 3.045,
  9: 2.847,
  14: 2.35,
  15: 2.35,
  16: 2.98,
  17: 2.909,
  35: 3.017,
  53: 3.086,
};
const C: Readonly<Record<number, number>> = { 6: 1.016, 7: 1.113, 8: 1.337, 14: 0.811, 15: 1.068, 16: 1.249, 17: 1.078 };

const RADIANS = Math.PI / 180;

/** Reference angle (degrees) at a centre of this type, in a ring of this size (3, 4 or 0). */
export function empiricalAngle(centre: number, ringSize: 0 | 3 | 4): number {
  if (ringSize === 3) return 60;
  if (ringSize === 4) return 90;
  const { atomicNumber, crd, val, mltb, lin } = typeProperties();
  switch (crd[centre]) {
    case 4:
      return 109.45;
    case 3:
      if (val[centre] === 3 && mltb[centre] === 0) return atomicNumber[centre] === 7 ? 107 : 92;
      return 120;
    case 2:
      if (lin[centre]) return 180;
      if (atomicNumber[centre] === 8) return 105;
      return atomicNumber[centre] > 10 ? 95 : 120;
    default:
      return 120;
  }
}

/**
 * Force constant (md angstrom/rad^2) of an angle between elements i-j-k with these reference lengths (angstrom) and angle (degrees);
 * undefined for elements the rule does not know.
 */
export function empiricalAngleForce(
  element_i: number,
  element_j: number,
  element_k: number,
  length_ij: number,
  length_jk: number,
  angle: number,
  ringSize: 0 | 3 | 4,
): number | undefined {
  if (Z[element_i] === undefined || C[element_j] === undefined || Z[element_k] === undefined) return undefined;
  const sum = length_ij + length_jk;
  const D = ((length_ij - length_jk) / sum) ** 2;
  const theta = angle * RADIANS;
  const scale = ringSize === 3 ? 0.05 : ringSize === 4 ? 0.85 : 1;
  return (scale * 1.75 * Z[element_i] * C[element_j] * Z[element_k] * Math.exp(-2 * D)) / (sum * theta * theta);
}
