/**
 * One well of a hindered rotor by itself: the classical integral over its basin, with the quantum correction of Pitzer and Gwinn.
 *
 *   Q = u/2 / sinh(u/2)  int_basin sqrt(kT / 4 pi B) exp(-V/kT) dphi,   u = h nu / kT
 *
 * nu is the harmonic frequency of the mode that the rotor stands for, V counts from the bottom of the well. Added over the basins of a turn these are the
 * Pitzer-Gwinn partition function with a correction for each well. K. S. Pitzer and W. D. Gwinn, J. Chem. Phys. 10, 428 (1942).
 */
import { TordialError } from '@tordial/geometry';
import { BOLTZMANN_WAVENUMBER, GAS_CONSTANT, WAVENUMBER_PER_KCAL } from '../constants.js';
import { requireTemperature } from '../temperature.js';
import type { RotorThermodynamics } from './thermodynamics.js';

/** The basin of one well. */
export interface RotorBasin {
  /** V above the bottom of the well, cm-1, at an angle in radians. */
  readonly potential: (phi: number) => number;
  /** Rotational constant B, cm-1. */
  readonly constant: (phi: number) => number;
  /** From the barrier before the well to that after it, radians; `to` above `from`, at most a full turn. */
  readonly from: number;
  readonly to: number;
  /** Frequency of the mode that the rotor stands for, cm-1. */
  readonly frequency: number;
}

/** Intervals of Simpson's rule over a basin: the integrand is smooth between the barriers. */
const INTERVALS = 512;

/**
 * Thermodynamic functions of the basin at T (K), counted as those of a whole rotor: energy from the bottom of the well, H - H0 from half of the
 * frequency. Throws `rotor/basin` for bounds that do not ascend or a frequency that is not positive.
 */
export function basinThermodynamics({ potential, constant, from, to, frequency }: RotorBasin, temperature: number): RotorThermodynamics {
  requireTemperature(temperature);
  if (!(to > from) || !(frequency > 0))
    throw new TordialError('rotor/basin', `a basin from ${from} to ${to} with a mode of ${frequency} cm-1: both must be positive`);
  const kT = BOLTZMANN_WAVENUMBER * temperature;
  const width = (to - from) / INTERVALS;
  let q = 0;
  let first = 0;
  let second = 0;
  for (let n = 0; n <= INTERVALS; n++) {
    const phi = from + n * width;
    const v = potential(phi) / kT;
    const share = (n === 0 || n === INTERVALS ? 1 : n % 2 === 1 ? 4 : 2) * (width / 3);
    const weight = share * Math.sqrt(kT / (4 * Math.PI * constant(phi))) * Math.exp(-v);
    q += weight;
    first += weight * v;
    second += weight * v * v;
  }
  const half = frequency / (2 * kT);
  const mean = first / q;
  // the momentum adds 1/2; the correction replaces the classical oscillator's 1 by half coth(half), and its heat capacity likewise
  const energy = mean + 0.5 + half / Math.tanh(half) - 1;
  const heatCapacity = second / q - mean * mean + 0.5 + (half > 350 ? 0 : (half / Math.sinh(half)) ** 2) - 1;
  const logQ = Math.log(q) + Math.log(2 * half) - half - Math.log1p(-Math.exp(-2 * half));
  return {
    partitionFunction: Math.exp(logQ),
    entropy: GAS_CONSTANT * (logQ + energy),
    heatCapacity: GAS_CONSTANT * heatCapacity,
    energy: (energy * kT) / WAVENUMBER_PER_KCAL,
    enthalpy: (energy * kT - frequency / 2) / WAVENUMBER_PER_KCAL,
  };
}
