/** The mirror image of a geometry as the same molecule: as it is where nothing is handed, relabelled where symmetry undoes the change (meso compounds). */
import { automorphisms, type Coordinates, type Molecule } from '@tordial/geometry';
import { mirrored } from './branches.js';
import { type DrivenRotor, intoRotorFrame } from './driven-rotor.js';

/** Permutations looked at. */
const MOST = 4096;

/**
 * What turns a geometry (in the rotor's frame) into its mirror image with the same configuration and the opposite torsion angle, or null where
 * there is none: then E(phi) and E(-phi) have nothing to do with each other.
 */
export function symmetryImage(molecule: Molecule, rotor: DrivenRotor): ((x: Coordinates) => Coordinates) | null {
  const { tetrahedral, axes } = molecule.stereo;
  if (![...tetrahedral, ...axes].some(({ sign }) => sign !== 0)) return mirrored;
  const [i, a, b, j] = rotor.torsion;
  const keepsTorsion = (image: Int32Array): boolean =>
    (image[i] === i && image[a] === a && image[b] === b && image[j] === j) ||
    (image[i] === j && image[a] === b && image[b] === a && image[j] === i);
  const { automorphisms: list } = automorphisms(molecule, { limit: MOST });
  const found = list.find(({ image, invertsStereo }) => invertsStereo && keepsTorsion(image));
  return found ? (x) => relabelledMirror(rotor, x, found.image) : null;
}

function relabelledMirror(rotor: DrivenRotor, x: Coordinates, image: Int32Array): Coordinates {
  const turned = new Float64Array(x.length);
  for (let atom = 0; atom < image.length; atom++) {
    const to = 3 * image[atom];
    turned[to] = x[3 * atom];
    turned[to + 1] = -x[3 * atom + 1];
    turned[to + 2] = x[3 * atom + 2];
  }
  intoRotorFrame(rotor, turned);
  return turned;
}
