/** Free energies and tunnelling of the wells and saddles round one turn, from their frequencies. */
import { type Coordinates, TordialError } from '@tordial/geometry';
import { basinThermodynamics, type RotorBasin } from './hindered-rotor/basin.js';
import { rigidRotorHarmonicOscillator } from './rrho.js';
import { wignerTransmission } from './wigner.js';

/** A well or saddle that has been refined, with its vibrations. */
export interface RefinedPoint {
  /** Electronic energy, kcal/mol, all on one scale. */
  readonly energy: number;
  /** 3 values an atom, angstrom. */
  readonly coordinates: Coordinates;
  /** cm-1, imaginary ones negative: none for a well, exactly one for a saddle. */
  readonly frequencies: ArrayLike<number>;
  /** Of a well: the mode (index among the frequencies) whose place its basin of the hindered rotor takes; an oscillator when left out. */
  readonly torsion?: { readonly mode: number; readonly basin: RotorBasin };
}

/**
 * Free energies (kcal/mol, rigid rotor and harmonic oscillators at 1 bar) and Wigner transmission coefficients of the wells and barriers round a
 * turn, as functions of temperature: what `analyseProfile` takes as `freeEnergies` and `transmission`. A barrier without a saddle is null.
 *
 * Every well of the turn is in the list, copies with equal atoms exchanged among them, so the symmetry is counted by listing and the external symmetry
 * number is left at 1 throughout: rotations of the whole molecule keep the torsion angle, and their number is the same all the way round.
 *
 * A hindered rotor comes in well by well: the whole rotor in the place of one well's mode would count its other wells twice. At a saddle its mode is the
 * imaginary one, and there is nothing to replace.
 *
 * Throws `free-energy/index` for a well with an imaginary frequency or a saddle without exactly one.
 */
export function freeEnergiesOf(
  wells: readonly RefinedPoint[],
  barriers: readonly (RefinedPoint | null)[],
  masses: ArrayLike<number>,
): {
  readonly freeEnergies: (temperature: number) => { wells: number[]; barriers: (number | null)[] };
  readonly transmission: (temperature: number) => number[];
} {
  for (const [i, well] of wells.entries()) requireIndex(`well ${i}`, well, 0);
  for (const [i, saddle] of barriers.entries()) if (saddle) requireIndex(`barrier ${i}`, saddle, 1);
  const gibbs = ({ energy, coordinates, frequencies, torsion }: RefinedPoint, temperature: number): number => {
    const real = Array.from(frequencies).filter((frequency) => frequency > 0);
    const replaced = torsion ? [{ mode: torsion.mode, rotor: basinThermodynamics(torsion.basin, temperature) }] : [];
    const gas = { coordinates, masses, frequencies: real, symmetryNumber: 1 };
    return energy + rigidRotorHarmonicOscillator(gas, temperature, 1e5, replaced).gibbsCorrection;
  };
  return {
    freeEnergies: (temperature) => ({
      wells: wells.map((well) => gibbs(well, temperature)),
      barriers: barriers.map((saddle) => saddle && gibbs(saddle, temperature)),
    }),
    transmission: (temperature) =>
      barriers.map((saddle) => (saddle ? wignerTransmission(-Math.min(...Array.from(saddle.frequencies)), temperature) : 1)),
  };
}

function requireIndex(name: string, { frequencies }: RefinedPoint, index: number): void {
  const imaginary = Array.from(frequencies).filter((frequency) => frequency <= 0).length;
  if (imaginary !== index)
    throw new TordialError(
      'free-energy/index',
      `${name} has ${imaginary} imaginary frequencies instead of ${index}: refine it before asking for free energies`,
    );
}
