/**
 * New starting structures from known ones: a few bonds turned by random angles.
 *
 * Source: G. Chang, W. C. Guida, W. C. Still, J. Am. Chem. Soc. 111, 4379 (1989), the internal-coordinate Monte Carlo search: one to a few
 * torsion angles at a time, turns of 60 to 180 degrees either way.
 */
import { type Coordinates, type Molecule, type Random, threadedRing, turnAbout } from '@tordial/geometry';
import type { Rotor } from './rotors/index.js';

/** Bonds turned at once at most. */
const BONDS = 3;
/** Moves tried before giving up. */
const TRIALS = 12;
/** Atoms of both sides may come as close as this, angstrom: the relaxation parts them. */
const CLOSEST = 1.2;

/** The rotors whose turning changes more than the places of equal atoms. */
export function movableRotors(rotors: readonly Rotor[]): Rotor[] {
  return rotors.filter(({ kind }) => kind !== 'terminal methyl' && kind !== 'symmetric top');
}

/** A copy of x with one to three rotors turned, no two atoms on each other and no ring passed through, or null when no such turn was found. There must be a rotor. */
export function torsionMove(molecule: Molecule, rotors: readonly Rotor[], x: Coordinates, random: Random): Coordinates | null {
  for (let trial = 0; trial < TRIALS; trial++) {
    const moved = x.slice();
    const bonds = 1 + Math.floor(random.uniform() * Math.min(BONDS, rotors.length));
    for (let n = 0; n < bonds; n++) {
      const { axis, sides } = rotors[Math.floor(random.uniform() * rotors.length)];
      const angle = (Math.PI / 3) * (1 + 2 * random.uniform());
      turnAbout(moved, axis[0], axis[1], sides[1], random.uniform() < 0.5 ? -angle : angle);
    }
    if (apart(molecule, moved) && threadedRing(molecule.rings, molecule.bonds, moved) === null) return moved;
  }
  return null;
}

/** No two atoms that are not bonded lie closer than CLOSEST. */
function apart({ atomCount, neighbours }: Molecule, x: Coordinates): boolean {
  const bonded = new Uint8Array(atomCount);
  for (let i = 0; i < atomCount; i++) {
    for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++) bonded[neighbours.atom[n]] = 1;
    for (let j = 0; j < i; j++) {
      const square = (x[3 * i] - x[3 * j]) ** 2 + (x[3 * i + 1] - x[3 * j + 1]) ** 2 + (x[3 * i + 2] - x[3 * j + 2]) ** 2;
      if (square < CLOSEST * CLOSEST && bonded[j] === 0) return false;
    }
    for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++) bonded[neighbours.atom[n]] = 0;
  }
  return true;
}
