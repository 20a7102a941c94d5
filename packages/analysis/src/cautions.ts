/** What a reader must know before using a number: shown with every half-life, class and population that depends on it. */
import { angle, type Coordinates, distance, type Molecule, type Note, neighboursOf } from '@tordial/geometry';
import type { BarrierError } from './uncertainty.js';

/** Shown with every half-life and every class. */
export const ESTIMATE_CAUTION: Note = {
  code: 'caution/estimate',
  message:
    'Force-field barriers are estimates for an isolated molecule at rest: no solvent, no catalysis by acid or base, no other route such as bond breaking. Decisions about safety, stability, shelf life or release need experiment and the responsible specialist.',
};

/** Shown with every stability class. */
export const CLASS_CAUTION: Note = {
  code: 'caution/class',
  message:
    'The classes of LaPlante et al. (2011) sort barriers by height alone. A barrier within its error of 20 or 30 kcal/mol may belong to either class; measure it.',
};

/** The assumed error of the barrier in words. */
export function barrierErrorCaution({ error, reason }: BarrierError): Note {
  return {
    code: 'caution/barrier-error',
    message: `Ranges assume that a barrier is off by up to ${error} kcal/mol (${reason}); the true error is not known.`,
  };
}

/** Shown with populations and rates that were taken from electronic energies. */
export const ELECTRONIC_CAUTION: Note = {
  code: 'caution/electronic',
  message:
    'Energies are electronic: differences of zero-point energy and of entropy between wells and saddles are not in the populations and rates.',
};

/** Of a rigid scan. */
export const RIGID_CAUTION: Note = {
  code: 'caution/rigid',
  message: 'The scan is rigid: nothing gave way, so barriers are too high and rates too low, often by far. Scan with relaxation for rates.',
};

/** Of an input of several molecules. */
export const FRAGMENTS_CAUTION: Note = {
  code: 'caution/fragments',
  message:
    'The input holds several separate fragments: their mutual energy changes along the profile, and a rate of rotation loses its meaning.',
};

/** Of the bond between nitrogen and aryl in an anilide whose torsion terms are wildcards. */
export const ANILIDE_CAUTION: Note = {
  code: 'caution/anilide',
  message:
    'MMFF94 turns the N-aryl bond of an anilide by a wildcard term that overstates its barrier several-fold: take no rate from it; refit the torsion or use a better potential.',
};

/** Where two branches cross. */
export function crossingCaution(angles: readonly number[]): Note {
  return {
    code: 'caution/crossing',
    message: `At ${angles.map((value) => `${value.toFixed(1)} degrees`).join(', ')} the envelope passes from one branch to another: no saddle is known there and no rate is given over it. Refine the saddle from both sides.`,
  };
}

/** Of a double bond that was turned because its atoms were named. */
export const DOUBLE_BOND_CAUTION: Note = {
  code: 'caution/double-bond',
  message:
    'Turning a double bond breaks its pi bond, which a force field does not describe: barriers are far too low, and so are half-lives; take none from here.',
};

/** Where a smooth maximum of the profile was not proved to be a saddle between its wells. */
export function refutedCaution(angles: readonly number[]): Note {
  return {
    code: 'caution/no-saddle',
    message: `The barrier at ${angles.map((value) => `${value.toFixed(1)} degrees`).join(', ')} was not proved to be a saddle between the wells beside it: its height is only the profile's, and no rate is given over it.`,
  };
}

/** Of barriers that nobody has tried to prove. */
export const UNPROVED_CAUTION: Note = {
  code: 'caution/unproved',
  message:
    'Barriers are maxima of the profile that were not proved to be saddles: another motion may lead over them, and rates over them are as they stand.',
};

/** Where a nitrogen beside the axis turns inside out between two branches. */
export function inversionCaution(atoms: readonly number[]): Note {
  return {
    code: 'caution/nitrogen-inversion',
    message: `Nitrogen ${atoms.join(', ')} turns inside out on the way round: part of the change is inversion at nitrogen, not rotation about the bond, and has a barrier of its own.`,
  };
}

const HYDROGEN_BOND_CAUTION: Note = {
  code: 'caution/hydrogen-bond',
  message:
    'The molecule closes an internal hydrogen bond on the way round. Gas-phase MMFF94 electrostatics overbind it, so wells that have it are too deep; repeat the scan with the distance-dependent dielectric (--dielectric distance:1), and trust neither in a protic solvent.',
};

const SCREENED_HYDROGEN_BOND_CAUTION: Note = {
  code: 'caution/hydrogen-bond',
  message:
    'The molecule closes an internal hydrogen bond on the way round. The dielectric of this scan weakens it; how deep such wells are in a solvent remains uncertain, most of all in a protic one.',
};

/** Longest H...A distance (angstrom) and smallest D-H...A angle (radians) of a hydrogen bond, after G. A. Jeffrey, An Introduction to Hydrogen Bonding (1997). */
const LONGEST = 2.3;
const SMALLEST = (110 * Math.PI) / 180;

/**
 * The caution about internal hydrogen bonds when any of the geometries (3 values an atom, angstrom) has one; null otherwise. `dielectric` is what the
 * scan's settings say of it: a distance-dependent or larger one weakens the bond, and the caution says that instead.
 */
export function hydrogenBondCaution(
  molecule: Pick<Molecule, 'atomCount' | 'atomicNumbers' | 'neighbours'>,
  geometries: readonly Coordinates[],
  dielectric?: unknown,
): Note | null {
  const { atomicNumbers } = molecule;
  const pairs: [number, number, number][] = [];
  for (let h = 0; h < molecule.atomCount; h++) {
    if (atomicNumbers[h] !== 1) continue;
    const donor = neighboursOf(molecule, h)[0];
    if (donor === undefined || ![7, 8].includes(atomicNumbers[donor])) continue;
    // fewer than four bonds apart the geometry brings them together, not a hydrogen bond
    const near = withinBonds(molecule, h, 3);
    for (let a = 0; a < molecule.atomCount; a++)
      if ([7, 8, 9, 16].includes(atomicNumbers[a]) && a !== donor && !near.has(a)) pairs.push([donor, h, a]);
  }
  const closed = geometries.some((x) => pairs.some(([d, h, a]) => distance(x, h, a) < LONGEST && angle(x, d, h, a) > SMALLEST));
  if (!closed) return null;
  return screens(dielectric) ? SCREENED_HYDROGEN_BOND_CAUTION : HYDROGEN_BOND_CAUTION;
}

function screens(dielectric: unknown): boolean {
  if (typeof dielectric !== 'object' || dielectric === null) return false;
  const { model, constant } = dielectric as { model?: unknown; constant?: unknown };
  return model === 'distance' || (typeof constant === 'number' && constant > 1);
}

function withinBonds(molecule: Pick<Molecule, 'neighbours'>, from: number, bonds: number): Set<number> {
  const seen = new Set([from]);
  let edge = [from];
  for (let n = 0; n < bonds; n++) {
    edge = edge.flatMap((i) => [...neighboursOf(molecule, i)]).filter((j) => !seen.has(j));
    for (const j of edge) seen.add(j);
  }
  return seen;
}
