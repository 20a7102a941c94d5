/**
 * Torsional strain of a given geometry: what each rotor's angle costs above the lowest well of that rotor's own profile.
 */
import { type Coordinates, degrees, type Note, TordialError, torsion } from '@tordial/geometry';
import { energyAt, type ProfileDocument } from '@tordial/scan';
import { soundCurve } from './profile-checks.js';

/** Strain of one rotor. */
export interface RotorStrain {
  readonly torsion: readonly [number, number, number, number];
  readonly kind: string;
  /** Degrees, measured in the geometry. */
  readonly angle: number;
  /** Above the lowest well of the profile, kcal/mol. */
  readonly energy: number;
}

/** Strain of a geometry. */
export interface TorsionalStrain {
  readonly rotors: readonly RotorStrain[];
  /** Sum over the rotors, kcal/mol. */
  readonly total: number;
  readonly notes: readonly Note[];
}

const ROTORS_COUPLE: Note = {
  code: 'strain/coupling',
  message:
    'rotors couple: the sum of single-rotor strains can lie above or below the strain of the whole geometry, and counts neither bond lengths nor angles',
};

/**
 * Torsional strain of `x` (3 values an atom, angstrom, the atoms in the documents' order) from one profile for each rotor. Throws `strain/profiles`
 * without a profile, `strain/atoms` for a geometry of another number of atoms or profiles of different molecules, and as `soundCurve` does.
 */
export function torsionalStrain(x: Coordinates, documents: readonly ProfileDocument[]): TorsionalStrain {
  if (documents.length === 0) throw new TordialError('strain/profiles', 'no profile: strain is measured against the profile of each rotor');
  const { molecule } = documents[0];
  const rotors = documents.map((document): RotorStrain => {
    if (document.molecule.smiles !== molecule.smiles || document.molecule.elements.join() !== molecule.elements.join())
      throw new TordialError('strain/atoms', `profiles of different molecules: ${molecule.smiles} and ${document.molecule.smiles}`);
    if (x.length !== 3 * document.molecule.elements.length)
      throw new TordialError('strain/atoms', `a geometry of ${x.length / 3} atoms for a profile of ${document.molecule.elements.length}`);
    const curve = soundCurve(document);
    const lowest = Math.min(...curve.extrema.map((extremum) => extremum.energy), ...curve.points.map((point) => point.energy));
    const [i, j, k, l] = document.rotor.torsion;
    const angle = degrees(torsion(x, i, j, k, l));
    return { torsion: document.rotor.torsion, kind: document.rotor.kind, angle, energy: energyAt(curve, angle) - lowest };
  });
  return {
    rotors,
    total: rotors.reduce((sum, rotor) => sum + rotor.energy, 0),
    notes: rotors.length > 1 ? [ROTORS_COUPLE] : [],
  };
}
