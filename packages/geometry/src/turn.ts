/** Turning one side of a bond against the other. */
import { TordialError } from './errors.js';
import { bondBetween, type Coordinates, type Molecule, neighboursOf } from './molecule.js';

/**
 * The atoms on either side of the bond a-b, each side with its own axis atom, ascending; null when the bond is part of a ring.
 * Atoms of other fragments belong to neither side. Throws `molecule/bond` when a and b are not bonded.
 */
export function sidesOfBond(molecule: Pick<Molecule, 'neighbours'>, a: number, b: number): { a: Int32Array; b: Int32Array } | null {
  if (bondBetween(molecule, a, b) < 0) throw new TordialError('molecule/bond', `atoms ${a} and ${b} are not bonded`, { atom: a });
  const sideOfA = reach(molecule, a, b);
  if (sideOfA === null) return null;
  const sideOfB = reach(molecule, b, a);
  return sideOfB === null ? null : { a: sideOfA, b: sideOfB };
}

/** Atoms reached from `from` without the bond to `past`; null when `past` is reached all the same. */
function reach(molecule: Pick<Molecule, 'neighbours'>, from: number, past: number): Int32Array | null {
  const seen = new Set([from]);
  for (const i of seen)
    for (const j of neighboursOf(molecule, i)) {
      if (j === past) {
        if (i === from) continue;
        return null;
      }
      seen.add(j);
    }
  return Int32Array.from(seen).sort();
}

/**
 * Turns `atoms` (the side of b) in place about the axis from a to b by `angle` radians, so that every torsion angle i-a-b-j with j among
 * them grows by `angle`. The axis atoms stay exactly where they are, whether listed or not. Throws `geometry/axis` when a and b coincide.
 *
 * Source: O. Rodrigues's rotation formula (1840).
 */
export function turnAbout(x: Coordinates, a: number, b: number, atoms: ArrayLike<number>, angle: number): void {
  const ox = x[3 * b],
    oy = x[3 * b + 1],
    oz = x[3 * b + 2];
  let ux = ox - x[3 * a],
    uy = oy - x[3 * a + 1],
    uz = oz - x[3 * a + 2];
  const length = Math.hypot(ux, uy, uz);
  if (!(length > 0)) throw new TordialError('geometry/axis', `atoms ${a} and ${b} lie on one spot and define no axis`, { atom: a });
  ux /= length;
  uy /= length;
  uz /= length;
  const cosine = Math.cos(angle);
  const sine = Math.sin(angle);
  for (let n = 0; n < atoms.length; n++) {
    if (atoms[n] === a || atoms[n] === b) continue;
    const at = 3 * atoms[n];
    const rx = x[at] - ox,
      ry = x[at + 1] - oy,
      rz = x[at + 2] - oz;
    const along = (1 - cosine) * (ux * rx + uy * ry + uz * rz);
    x[at] = ox + cosine * rx + sine * (uy * rz - uz * ry) + along * ux;
    x[at + 1] = oy + cosine * ry + sine * (uz * rx - ux * rz) + along * uy;
    x[at + 2] = oz + cosine * rz + sine * (ux * ry - uy * rx) + along * uz;
  }
}
