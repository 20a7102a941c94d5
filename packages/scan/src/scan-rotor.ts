/**
 * One-dimensional scans: the energy of a molecule against the angle of one rotor.
 *
 * A relaxed scan's profile is the lower envelope over all branches: it has no hysteresis, and phi and phi + 360 degrees agree.
 */
import type { Molecule } from '@tordial/geometry';
import { drive, driveAsync } from './drive.js';
import { checkSizes } from './minimise.js';
import type { AsyncPotential, Calculation, Potential } from './potential.js';
import type { Profile } from './profile.js';
import { relaxedScan } from './relaxed-scan.js';
import { rigidScan } from './rigid-scan.js';
import type { Torsion } from './rotors/defining-torsion.js';
import { type ScanOptions, scanTask } from './scan-task.js';

/**
 * A scan as a calculation, for any potential.
 *
 * Throws as `checkTorsion` does, `scan/linear` where an angle within the torsion is above 175 degrees, `scan/grid` for a step that does not divide 360 degrees
 * or a setting out of range, `scan/start` when there is no start or its size differs, `scan/energy` when a start has no finite energy,
 * `scan/unreached` when no start can be turned to one of the angles.
 */
export function* rotorScan(molecule: Molecule, torsion: Torsion, options: ScanOptions): Calculation<Profile> {
  const scan = scanTask(molecule, torsion, options);
  return scan.kind === 'rigid' ? yield* rigidScan(scan) : yield* relaxedScan(scan);
}

/** Scans a rotor with a potential in this thread. Throws as `rotorScan`, and `potential/atoms` when the potential is for another number of atoms. */
export function scanRotor(molecule: Molecule, potential: Potential, torsion: Torsion, options: ScanOptions): Profile {
  for (const start of options.starts) checkSizes(molecule, potential, start);
  return drive(rotorScan(molecule, torsion, options), potential);
}

/** Scans a rotor with a potential that answers later. Rejects as `scanRotor` throws. */
export async function scanRotorAsync(
  molecule: Molecule,
  potential: AsyncPotential,
  torsion: Torsion,
  options: ScanOptions,
): Promise<Profile> {
  for (const start of options.starts) checkSizes(molecule, potential, start);
  return driveAsync(rotorScan(molecule, torsion, options), potential, options.signal);
}
