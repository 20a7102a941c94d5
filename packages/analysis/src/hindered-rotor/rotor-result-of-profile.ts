/** A profile's rotor solved, as plain data: moments, levels, splittings and thermodynamic functions, what a table or a JSON document shows. */
import { type Note, TordialError } from '@tordial/geometry';
import type { ProfileDocument } from '@tordial/scan';
import { rotamers } from '../rotamers.js';
import { hinderedRotor, type RotorRow, rotorSize } from './hindered-rotor.js';
import { type MomentKind, type ReducedMoments, rotorOfProfile } from './rotor-of-profile.js';
import type { HarmonicWell } from './thermodynamics.js';
import type { Multiplet } from './tunnelling.js';

/** The hindered rotor of a profile. Energies in cm-1, S and Cp in J/mol/K, H - H0 in kcal/mol, moments in amu angstrom^2. */
export interface ProfileRotorResult {
  /** Which of the moments the levels are calculated with. */
  readonly momentKind: MomentKind;
  /** Reduced moments at the point nearest to the lowest well, and at every point. */
  readonly momentsAtWell: ReducedMoments;
  readonly moments: readonly ReducedMoments[];
  /** Internal symmetry number: identical positions on a full turn. */
  readonly symmetryNumber: number;
  /** Lowest level above the bottom of the potential. */
  readonly zeroPoint: number;
  /** Lowest torsional transition in one well; null where the levels show none. */
  readonly fundamental: number | null;
  /** Tunnelling splitting of the lowest state; null where its wells have no equals. */
  readonly splitting: number | null;
  /** Each level above the lowest, ascending from the second. */
  readonly transitions: readonly number[];
  /** Torsional states, each with the levels that belong to it; energies above the bottom, well angles in radians. */
  readonly states: readonly Multiplet[];
  /** Wells as oscillators: what the harmonic values are made of. */
  readonly wells: readonly (HarmonicWell & { readonly angle: number })[];
  /** Highest harmonic of the converged basis. */
  readonly basis: number;
  /** Quantum, classical, harmonic and Pitzer-Gwinn values at each temperature. */
  readonly rows: readonly RotorRow[];
  readonly notes: readonly Note[];
}

/** What `rotorResultOfProfile` may be told. */
export interface RotorResultOptions {
  /** Which of the moments the levels are calculated with; `rigid` when left out. */
  readonly momentKind?: MomentKind;
  /** Largest `rotorSize` that is calculated; no limit when left out. */
  readonly largest?: number;
}

/**
 * The hindered rotor of a profile at the temperatures given (K). Throws `rotor/heavy` for one that is larger than `largest`, and as `rotorOfProfile` and
 * `hinderedRotor` do.
 */
export function rotorResultOfProfile(
  document: ProfileDocument,
  temperatures: readonly number[],
  { momentKind = 'rigid', largest = Number.POSITIVE_INFINITY }: RotorResultOptions = {},
): ProfileRotorResult {
  const rotor = rotorOfProfile(document, momentKind);
  const size = rotorSize(rotor, temperatures);
  if (size > largest)
    throw new TordialError(
      'rotor/heavy',
      `about ${Math.round(size)} levels of one symmetry lie within reach of ${Math.max(...temperatures)} K, which takes a while: ask for the hindered rotor to have them (--hindered-rotor)`,
    );
  const { levels, transitions, multiplets, zeroPoint, fundamental, splitting, wells, basis, rows } = hinderedRotor(rotor, temperatures);
  const { angle } = rotamers(document).wells.reduce((best, well) => (well.energy < best.energy ? well : best));
  const away = (other: number): number => Math.abs(((other - angle + 540) % 360) - 180);
  // what tunnelling splits by less than the arithmetic can tell apart is not split
  const resolved = (value: number): number => (value < ROUNDING * levels[levels.length - 1] ? 0 : value);
  return {
    momentKind,
    momentsAtWell: rotor.moments.reduce((best, moments) => (away(moments.angle) < away(best.angle) ? moments : best)),
    moments: rotor.moments,
    symmetryNumber: rotor.symmetryNumber,
    zeroPoint,
    fundamental,
    splitting: splitting === null ? null : resolved(splitting),
    transitions: [...transitions],
    states: multiplets.map((state) => ({ ...state, splitting: resolved(state.splitting) })),
    wells,
    basis,
    rows,
    notes: rotor.notes,
  };
}

/** Share of the highest level below which a difference of two levels is rounding. */
const ROUNDING = 1e-13;
