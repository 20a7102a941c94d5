/**
 * Thermodynamic functions of an ideal gas from one geometry and its frequencies: rigid rotor, harmonic oscillators.
 *
 *   translation   S/R = ln[(2 pi m k T / h^2)^(3/2) kT / p] + 5/2                       (Sackur-Tetrode)
 *   rotation      Q = sqrt(pi T^3 / (theta_A theta_B theta_C)) / sigma, linear Q = T / (sigma theta)
 *   vibration     each mode a Planck-Einstein oscillator
 *
 * sigma is the external symmetry number of the geometry alone. A hindered rotor that takes the place of a low mode brings its own internal
 * symmetry number, so neither is counted twice.
 *
 * Source: D. A. McQuarrie, Statistical Mechanics, Harper and Row 1976, chapters 5, 6 and 8.
 */
import { type Coordinates, TordialError } from '@tordial/geometry';
import {
  ATOMIC_MASS,
  BOLTZMANN,
  BOLTZMANN_WAVENUMBER,
  GAS_CONSTANT,
  GAS_CONSTANT_KCAL,
  PLANCK,
  ROTATIONAL_WAVENUMBER,
} from './constants.js';
import { inertia } from './hindered-rotor/reduced-moment.js';
import type { RotorThermodynamics } from './hindered-rotor/thermodynamics.js';
import { requireTemperature } from './temperature.js';
import { zeroPointEnergy } from './vibrations.js';

/** One molecule in one well (or at one saddle). */
export interface RigidMolecule {
  /** 3 values an atom, angstrom. */
  readonly coordinates: Coordinates;
  /** amu. */
  readonly masses: ArrayLike<number>;
  /** cm-1, all real; leave a saddle's imaginary frequency out. */
  readonly frequencies: ArrayLike<number>;
  /** External symmetry number (`externalSymmetry`). */
  readonly symmetryNumber: number;
}

/** A vibration whose place a hindered rotor takes. */
export interface ReplacedMode {
  /** Index into the frequencies. */
  readonly mode: number;
  /** The rotor's functions at the same temperature. */
  readonly rotor: RotorThermodynamics;
}

/** S and Cp in J/mol/K, energies in kcal/mol. */
export interface Thermodynamics {
  readonly entropy: number;
  readonly heatCapacity: number;
  /** H(T) - H(0), without zero-point energy. */
  readonly enthalpy: number;
  /** Half of every frequency, and of a replaced mode the rotor's lowest level. */
  readonly zeroPoint: number;
  /** What is added to the electronic energy: zero point + H(T) - H(0), and the same - T S. */
  readonly enthalpyCorrection: number;
  readonly gibbsCorrection: number;
}

/**
 * Thermodynamic functions at T (K) and pressure (Pa; 1 bar when left out). Throws `rrho/frequency` for a frequency that is not positive:
 * at a minimum it is a mistake, at a saddle it has to be left out.
 */
export function rigidRotorHarmonicOscillator(
  { coordinates, masses, frequencies, symmetryNumber }: RigidMolecule,
  temperature: number,
  pressure = 1e5,
  replaced: readonly ReplacedMode[] = [],
): Thermodynamics {
  requireTemperature(temperature);
  if (!(pressure > 0)) throw new TordialError('rrho/pressure', `a pressure of ${pressure} Pa: give one above 0, 100000 for 1 bar`);
  if (!(symmetryNumber >= 1)) throw new TordialError('rrho/symmetry', `an external symmetry number of ${symmetryNumber}: give 1 or more`);
  const { mass, moments } = inertia(coordinates, masses);

  const wave = (2 * Math.PI * mass * ATOMIC_MASS * BOLTZMANN * temperature) / PLANCK ** 2;
  let entropy = 1.5 * Math.log(wave) + Math.log((BOLTZMANN * temperature) / pressure) + 2.5;
  let heat = 2.5;
  let enthalpy = 2.5;

  const dimensions = rotations(masses.length, moments);
  if (dimensions > 0) {
    const kT = BOLTZMANN_WAVENUMBER * temperature;
    // theta_i / T = B_i / kT; a linear molecule has two equal moments that count as one B
    const turning = moments.slice(3 - dimensions);
    const product = turning.reduce((q, moment) => q * ((kT * moment) / ROTATIONAL_WAVENUMBER), 1);
    const Q = (dimensions === 3 ? Math.sqrt(Math.PI * product) : Math.sqrt(product)) / symmetryNumber;
    entropy += Math.log(Q) + dimensions / 2;
    heat += dimensions / 2;
    enthalpy += dimensions / 2;
  }

  let zeroPoint = zeroPointEnergy(frequencies);
  const rotorOf = new Map(replaced.map(({ mode, rotor }) => [mode, rotor]));
  for (let n = 0; n < frequencies.length; n++) {
    const rotor = rotorOf.get(n);
    if (rotor) {
      entropy += rotor.entropy / GAS_CONSTANT;
      heat += rotor.heatCapacity / GAS_CONSTANT;
      enthalpy += rotor.enthalpy / (GAS_CONSTANT_KCAL * temperature);
      zeroPoint += rotor.energy - rotor.enthalpy - zeroPointEnergy([frequencies[n]]);
      continue;
    }
    if (!(frequencies[n] > 0))
      throw new TordialError(
        'rrho/frequency',
        `frequency ${n} is ${frequencies[n]} cm-1: relax the geometry to a minimum, or leave a saddle's imaginary frequency out`,
      );
    const u = frequencies[n] / (BOLTZMANN_WAVENUMBER * temperature);
    const occupation = 1 / Math.expm1(u);
    entropy += u * occupation - Math.log1p(-Math.exp(-u));
    heat += u * u * occupation * (occupation + 1);
    enthalpy += u * occupation;
  }
  for (const { mode } of replaced)
    if (!(mode >= 0 && mode < frequencies.length))
      throw new TordialError('rrho/mode', `there is no mode ${mode} among ${frequencies.length}`);

  const enthalpyKcal = enthalpy * GAS_CONSTANT_KCAL * temperature;
  return {
    entropy: entropy * GAS_CONSTANT,
    heatCapacity: heat * GAS_CONSTANT,
    enthalpy: enthalpyKcal,
    zeroPoint,
    enthalpyCorrection: zeroPoint + enthalpyKcal,
    gibbsCorrection: zeroPoint + enthalpyKcal - entropy * GAS_CONSTANT_KCAL * temperature,
  };
}

function rotations(atoms: number, moments: Float64Array): 0 | 2 | 3 {
  if (atoms === 1) return 0;
  return moments[0] > 1e-6 * moments[2] ? 3 : 2;
}
