/** Thermodynamic functions of the wells of a profile as ideal gases, each by itself, from their proved minima. */
import type { ProfileDocument } from '@tordial/scan';
import { massesOfDocument, moleculeOfDocument } from './document-molecule.js';
import { rotamers } from './rotamers.js';
import { rigidRotorHarmonicOscillator, type Thermodynamics } from './rrho.js';
import { externalSymmetry } from './symmetry-number.js';

/** One well as an ideal gas at 1 bar. */
export interface WellThermodynamics {
  /** External symmetry number of its geometry; the wells of the turn are listed one by one, so internal symmetry is never in it. */
  readonly symmetryNumber: number;
  /** Whether its mirror image is another structure. */
  readonly chiral: boolean;
  readonly rows: readonly (Thermodynamics & { readonly temperature: number })[];
}

/**
 * Of each well, in the order of `rotamers(document)`: zero point, H - H0, S and Cp by rigid rotor and harmonic oscillators at the temperatures given (K); null
 * for a well that was not proved to be a minimum. Throws as `rotamers` and `rigidRotorHarmonicOscillator` do.
 */
export function wellThermodynamics(document: ProfileDocument, temperatures: readonly number[]): (WellThermodynamics | null)[] {
  const masses = massesOfDocument(document.molecule);
  const kinds = moleculeOfDocument(document.molecule).symmetryClasses;
  return rotamers(document).wells.map(({ stationaryPoints }) => {
    const found = (document.proved ?? []).filter(({ of, verdict }) => verdict === 'minimum' && stationaryPoints.includes(of));
    if (found.length === 0) return null;
    const { coordinates, frequencies } = found.reduce((low, point) => (point.energy < low.energy ? point : low));
    const x = Float64Array.from(coordinates);
    // equal atoms have one place in the constitution, which a rotation keeps
    const { symmetryNumber, chiral } = externalSymmetry(x, kinds);
    const rows = temperatures.map((temperature) => ({
      temperature,
      ...rigidRotorHarmonicOscillator({ coordinates: x, masses, frequencies, symmetryNumber }, temperature),
    }));
    return { symmetryNumber, chiral, rows };
  });
}
