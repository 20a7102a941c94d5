/** What can be wrong with an embedded structure: each check answers with the reason, or null. */
import { angle as bend, distance, torsion } from '../internal-coordinates.js';
import type { Molecule } from '../molecule.js';
import { contactRadius, type IdealGeometry } from './bounds.js';
import { type SignedVolumes, signedVolume } from './handedness.js';
import { threadedRing } from './threading.js';
import type { Turning } from './turning.js';

/** Angstrom. */
const BOND_OFF = 0.2;
/** Radians beyond the usual spread: sound cages and crowded molecules stay below 0.27, bridges forced into an impossible form begin at 0.4. */
const ANGLE_OFF = 0.35;
/** Least distance as a share of the sum of van der Waals radii. */
const CONTACT_SHARE = 0.62;

/** The first fault of coordinates x (3 values an atom), or null. */
export function structureFault(
  molecule: Molecule,
  ideal: IdealGeometry,
  { flat, crossed }: Turning,
  volumes: SignedVolumes,
  x: Float64Array,
): string | null {
  const { atomCount: n, bonds, atomicNumbers, rings } = molecule;
  const { shapes, lengths, angles, apart } = ideal;
  for (let m = 0; m < bonds.count; m++)
    if (!(Math.abs(distance(x, bonds.a[m], bonds.b[m]) - lengths[m]) < BOND_OFF))
      return `the bond ${bonds.a[m]}-${bonds.b[m]} has a wrong length`;
  for (let m = 0; m < volumes.count; m++) {
    const share = signedVolume(volumes, m, x, 3) / volumes.least[m];
    if (share < 0.35)
      return `the stereocentre of atoms ${Array.from(volumes.atoms.subarray(4 * m, 4 * m + 4)).join(', ')} has the wrong hand or is flat`;
  }
  for (const { a, b, atA, atB, cis } of flat) {
    const cosine = Math.cos(torsion(x, atA, a, b, atB));
    if (cis === null ? Math.abs(cosine) < 0.5 : cis ? cosine < 0.5 : cosine > -0.5)
      return `the flat bond ${a}-${b} is turned by ${Math.round((Math.acos(Math.max(-1, Math.min(1, cosine))) * 180) / Math.PI)} degrees`;
  }
  for (const { a, b, atA, atB } of crossed)
    if (Math.abs(Math.cos(torsion(x, atA[0], a, b, atB[0]))) > 0.7) return `the substituents of the axis ${a}-${b} do not stand across`;
  for (let m = 0; m < angles.count; m++) {
    const [i, j, k] = [angles.i[m], angles.j[m], angles.k[m]];
    if (shapes.steric[j] > 4) continue;
    const off = Math.abs(bend(x, i, j, k) - angles.angle[m]);
    if (off > ANGLE_OFF + angles.tolerance[m]) return `the angle ${i}-${j}-${k} is off by ${Math.round((off * 180) / Math.PI)} degrees`;
  }
  for (let i = 0; i < n; i++)
    for (let j = 0; j < i; j++) {
      if (apart[i * n + j] < 3) continue;
      const least = CONTACT_SHARE * (contactRadius(atomicNumbers[i]) + contactRadius(atomicNumbers[j]));
      if (distance(x, i, j) < (apart[i * n + j] === 3 ? 0.9 * least : least)) return `atoms ${j} and ${i} lie on each other`;
    }
  const threaded = threadedRing(rings, bonds, x);
  return threaded;
}
