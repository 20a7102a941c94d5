import { TordialError } from '@tordial/geometry';
import { BOLTZMANN_WAVENUMBER } from '../constants.js';
import { requireTemperature } from '../temperature.js';
import { bottomOf, torsionalLevels } from './levels.js';
import { mainExtrema, type PeriodicSeries, seriesValue, withoutNoise } from './periodic-series.js';
import {
  classicalThermodynamics,
  type HarmonicWell,
  harmonicThermodynamics,
  pitzerGwinnThermodynamics,
  quantumThermodynamics,
  type RotorThermodynamics,
} from './thermodynamics.js';
import { type Multiplet, multiplets, torsionalSymmetry } from './tunnelling.js';

/** A hindered rotor: the potential and the rotational constant along the turn, cm-1, and how many positions of the turn are identical. */
export interface HinderedRotor {
  readonly potential: PeriodicSeries;
  readonly constant: PeriodicSeries;
  /** Internal symmetry number: identical positions on a full turn, 3 for a methyl, 1 where none are. */
  readonly symmetryNumber: number;
}

/** Thermodynamic functions by four ways at one temperature; the two that need wells are null for a free rotor. */
export interface RotorRow {
  readonly temperature: number;
  readonly quantum: RotorThermodynamics;
  readonly classical: RotorThermodynamics;
  readonly harmonic: RotorThermodynamics | null;
  readonly pitzerGwinn: RotorThermodynamics | null;
}

/** What one hindered rotor does. */
export interface RotorResult {
  /** cm-1 above the bottom of the potential. */
  readonly levels: Float64Array;
  /** Lowest level, cm-1 above the bottom: the rotor's zero-point energy. */
  readonly zeroPoint: number;
  /** Each level above the lowest, cm-1. */
  readonly transitions: Float64Array;
  /** Torsional states with their tunnelling splittings; energies cm-1 above the bottom. */
  readonly multiplets: readonly Multiplet[];
  /** From the lowest state to the next in the same wells, mean of the levels of each, cm-1; null where the levels show none. */
  readonly fundamental: number | null;
  /** Splitting of the lowest state, cm-1; null where its wells have no equals. */
  readonly splitting: number | null;
  /** Every well of the turn as an oscillator, cm-1; ripples of the potential (`mainExtrema`) are no wells. */
  readonly wells: readonly (HarmonicWell & { readonly angle: number })[];
  readonly periodicity: number;
  /** Highest harmonic of the converged basis. */
  readonly basis: number;
  readonly rows: readonly RotorRow[];
}

/** Energies that count in a partition function, in kT: what lies beyond adds less than 1e-7. */
const REACH = 18;

/**
 * How large a rotor is: about as many levels of one symmetry, sqrt(18 kT / B) of them or twice that where phi and -phi differ, shared by the identical
 * positions, lie within reach at the highest temperature (K). The work of `hinderedRotor` grows with its cube: a tenth of a second at 100.
 */
export function rotorSize({ potential, constant }: HinderedRotor, temperatures: readonly number[]): number {
  const { periodicity, even } = torsionalSymmetry(potential, constant);
  const levels = Math.sqrt((REACH * BOLTZMANN_WAVENUMBER * Math.max(...temperatures)) / constant.cosine[0]);
  return ((even ? 1 : 2) * levels) / Math.max(1, periodicity);
}

/**
 * Levels, splittings and thermodynamic functions of a hindered rotor at the temperatures given (K), side by side with the harmonic, the
 * classical and the Pitzer-Gwinn values. The quantum of a well is sqrt(2 B V''). Throws as `torsionalLevels` does, and `rotor/symmetry` when
 * the symmetry number does not fit the potential's periodicity.
 */
export function hinderedRotor({ potential, constant, symmetryNumber }: HinderedRotor, temperatures: readonly number[]): RotorResult {
  temperatures.forEach(requireTemperature);
  const V = withoutNoise(potential);
  const B = withoutNoise(constant);
  const { periodicity } = torsionalSymmetry(V, B);
  if (!(symmetryNumber >= 1) || !Number.isInteger(symmetryNumber))
    throw new TordialError('rotor/symmetry', `an internal symmetry number of ${symmetryNumber}: give a whole number of 1 or more`);
  const bottom = bottomOf(V);
  const wells = (V.cosine.length === 1 ? [] : mainExtrema(V))
    .filter((extremum) => extremum.kind === 'minimum')
    .map(({ angle, value }) => ({
      angle,
      energy: value - bottom,
      quantum: Math.sqrt(2 * seriesValue(B, angle) * seriesValue(V, angle, 2)),
    }));

  // what lies beyond 18 kT adds less than 1e-7, and an error of 1e-4 cm-1 up there even less, while the lowest levels come out far better; at low temperatures the lowest torsional states are wanted all the same
  const hottest = Math.max(...temperatures, 1);
  const softest = Math.max(0, ...wells.filter((well) => well.energy < 1e-6).map((well) => well.quantum));
  const upTo = Math.max(softest / 2 + REACH * BOLTZMANN_WAVENUMBER * hottest, 3 * softest);
  const solved = torsionalLevels(V, B, { upTo, tolerance: 1e-4 });
  const levels = solved.energies.map((energy) => energy - bottom);
  const states = multiplets(solved, V, B).map((state) => ({ ...state, energy: state.energy - bottom }));
  const lowest = states.find((state) => state.quantumNumber === 0);
  const next = lowest && states.find((state) => state.quantumNumber === 1 && state.wells === lowest.wells);
  return {
    levels,
    zeroPoint: levels[0],
    transitions: levels.slice(1).map((energy) => energy - levels[0]),
    multiplets: states,
    fundamental: lowest && next ? next.energy - lowest.energy : null,
    splitting: lowest && lowest.wells.length > 1 ? lowest.splitting : null,
    wells,
    periodicity,
    basis: solved.basis,
    rows: temperatures.map((temperature) => ({
      temperature,
      quantum: quantumThermodynamics(levels, symmetryNumber, temperature, upTo),
      classical: classicalThermodynamics(V, bottom, B, symmetryNumber, temperature),
      harmonic: wells.length > 0 ? harmonicThermodynamics(wells, symmetryNumber, temperature) : null,
      pitzerGwinn: wells.length > 0 ? pitzerGwinnThermodynamics(V, bottom, B, wells, symmetryNumber, temperature) : null,
    })),
  };
}
