/**
 * Usual bond lengths from radii that depend on bond order and shape, shortened for polar bonds of the heavier elements as
 * V. Schomaker and D. P. Stevenson proposed (J. Am. Chem. Soc. 63, 37 (1941)) and for conjugated single bonds.
 *
 * The radii are set so that they give the means of F. H. Allen et al., J. Chem. Soc. Perkin Trans. 2, S1 (1987) for the common bonds
 * (from memory) to about 0.02 angstrom; elements not listed take P. Pyykko and M. Atsumi's additive radii (Chem. Eur. J. 15, 186 (2009)) of order 1.
 */
import type { Molecule } from '../molecule.js';
import type { Shapes } from './shapes.js';

/** Element -> radii (angstrom) in a single bond by shape (linear, planar, tetrahedral), in a double, in a triple bond. */
const RADII: Readonly<Record<number, readonly [number, number, number, number, number]>> = {
  1: [0.32, 0.32, 0.32, 0.32, 0.32],
  5: [0.8, 0.82, 0.85, 0.78, 0.73],
  6: [0.69, 0.735, 0.765, 0.665, 0.6],
  7: [0.66, 0.685, 0.7, 0.605, 0.555],
  8: [0.62, 0.65, 0.66, 0.555, 0.53],
  9: [0.6, 0.6, 0.6, 0.59, 0.53],
  14: [1.11, 1.11, 1.11, 1.07, 1.02],
  15: [1.09, 1.09, 1.09, 1.02, 0.94],
  16: [1.04, 1.04, 1.04, 0.94, 0.95],
  17: [1.01, 1.01, 1.01, 0.95, 0.93],
  33: [1.21, 1.21, 1.21, 1.14, 1.06],
  34: [1.17, 1.17, 1.17, 1.07, 1.07],
  35: [1.17, 1.17, 1.17, 1.09, 1.1],
  53: [1.37, 1.37, 1.37, 1.29, 1.25],
};

/** Pauling electronegativities where the polar shortening counts. */
const ELECTRONEGATIVITY: Readonly<Record<number, number>> = { 5: 2.04, 7: 3.04, 8: 3.44, 9: 3.98, 14: 1.9, 15: 2.19, 16: 2.58, 17: 3.16 };

/** Bonds that no sum of radii gives: lower atomic number, higher, order -> angstrom. */
const SPECIAL: Readonly<Record<string, number>> = {
  '7-7-1': 1.42,
  '7-8-1': 1.41,
  '8-8-1': 1.47,
  '7-7-2': 1.25,
  '7-8-2': 1.21,
  '8-15-2': 1.48,
  '8-16-2': 1.44,
  '7-16-2': 1.53,
  '8-17-2': 1.42,
  '1-7-1': 1.015,
  '1-8-1': 0.97,
  '1-14-1': 1.48,
  '1-15-1': 1.42,
  '1-16-1': 1.34,
  '1-9-1': 0.92,
  '1-1-1': 0.74,
};

const NITRO = 1.225;
const NITROGEN_OXIDE = 1.3;

/** Length (angstrom) of every bond. */
export function bondLengths(molecule: Molecule, shapes: Shapes): Float64Array {
  const { bonds } = molecule;
  return Float64Array.from({ length: bonds.count }, (_, n) => {
    const order = bonds.order[n];
    if (shapes.aromaticBond[n] && order < 3 && conjugatedPair(molecule, shapes, n)) return (length(n, 1) + length(n, 2)) / 2;
    if (order < 3 && sharesCharge(molecule, n)) return joinsNitrogen(n) ? NITRO : (length(n, 1) + length(n, 2)) / 2;
    if (order === 1 && joinsNitrogen(n) && isOxide(n)) return NITROGEN_OXIDE;
    return length(n, order);
  });

  function length(n: number, order: number): number {
    const [i, j] =
      molecule.atomicNumbers[bonds.a[n]] <= molecule.atomicNumbers[bonds.b[n]] ? [bonds.a[n], bonds.b[n]] : [bonds.b[n], bonds.a[n]];
    const p = molecule.atomicNumbers[i];
    const q = molecule.atomicNumbers[j];
    const special = SPECIAL[`${p}-${q}-${order}`];
    if (special) return special;
    let sum = radius(i, order) + radius(j, order);
    if (q >= 14 && order === 1 && p > 6) sum -= 0.09 * Math.abs((ELECTRONEGATIVITY[p] ?? 2.2) - (ELECTRONEGATIVITY[q] ?? 2.2));
    // a lone pair next to a double bond draws nearer
    if (order === 1 && p === 6 && shapes.steric[i] === 3 && shapes.unsaturated[i])
      if (q === 7 && shapes.steric[j] === 3) sum -= 0.05;
      else if (q === 8 || q === 16) sum -= 0.04;
    return sum;
  }

  function joinsNitrogen(n: number): boolean {
    return molecule.atomicNumbers[bonds.a[n]] === 7 || molecule.atomicNumbers[bonds.b[n]] === 7;
  }

  function isOxide(n: number): boolean {
    return [bonds.a[n], bonds.b[n]].some((i) => molecule.atomicNumbers[i] === 8 && molecule.formalCharges[i] === -1);
  }

  function radius(i: number, order: number): number {
    const radii = RADII[molecule.atomicNumbers[i]];
    if (!radii) return 1.35;
    return order === 1 ? radii[Math.min(Math.max(shapes.steric[i], 2), 4) - 2] : radii[order + 1];
  }
}

/** Both atoms bring one pi electron (not a lone pair): the bond is between single and double. */
function conjugatedPair({ bonds }: Molecule, { unsaturated }: Shapes, n: number): boolean {
  return unsaturated[bonds.a[n]] === 1 && unsaturated[bonds.b[n]] === 1;
}

/** A terminal O or S of a carboxylate, nitro group, phosphate ... whose charge is shared with a doubly bonded one. */
function sharesCharge({ atomicNumbers, formalCharges, bonds, neighbours }: Molecule, n: number): boolean {
  const terminal = (i: number) =>
    neighbours.start[i + 1] - neighbours.start[i] === 1 && (atomicNumbers[i] === 8 || atomicNumbers[i] === 16);
  const end = terminal(bonds.a[n]) ? bonds.a[n] : terminal(bonds.b[n]) ? bonds.b[n] : -1;
  if (end < 0) return false;
  const centre = end === bonds.a[n] ? bonds.b[n] : bonds.a[n];
  if (atomicNumbers[centre] > 7) return false;
  let charged = false;
  let doubled = false;
  for (let m = neighbours.start[centre]; m < neighbours.start[centre + 1]; m++) {
    const i = neighbours.atom[m];
    if (!terminal(i) || atomicNumbers[i] !== atomicNumbers[end]) continue;
    if (formalCharges[i] === -1 && bonds.order[neighbours.bond[m]] === 1) charged = true;
    if (bonds.order[neighbours.bond[m]] === 2) doubled = true;
  }
  return charged && doubled;
}
