/**
 * Thermodynamic functions of one internal rotation over temperature: from its quantum levels, from the classical integral, from harmonic wells, and
 * by the Pitzer-Gwinn approximation. Energies in cm-1 go in; S and Cp come out in J/mol/K, H - H0 in kcal/mol.
 */
import { TordialError } from '@tordial/geometry';
import { BOLTZMANN_WAVENUMBER, GAS_CONSTANT, WAVENUMBER_PER_KCAL } from '../constants.js';
import { requireTemperature } from '../temperature.js';
import { type PeriodicSeries, seriesValue } from './periodic-series.js';

/** Thermodynamic functions at one temperature. */
export interface RotorThermodynamics {
  /** Partition function counted from the bottom of the potential, symmetry number included; no unit. */
  readonly partitionFunction: number;
  /** J/mol/K. */
  readonly entropy: number;
  /** Cp = Cv of an internal motion, J/mol/K. */
  readonly heatCapacity: number;
  /** Energy above the bottom of the potential, kcal/mol. */
  readonly energy: number;
  /** H - H0, energy above the lowest level, kcal/mol; for the classical values, above the bottom. */
  readonly enthalpy: number;
}

/** A harmonic well: its bottom above that of the potential and its quantum, cm-1. */
export interface HarmonicWell {
  readonly energy: number;
  readonly quantum: number;
}

/** ln Q with the moments that its derivatives in temperature need: U/kT, C/k. */
interface Sums {
  readonly logQ: number;
  readonly reducedEnergy: number;
  readonly reducedHeatCapacity: number;
}

/**
 * From quantum levels: Q = (1/sigma) sum exp(-E/kT). `levels` in cm-1 above the bottom of the potential, all that lie below `completeTo` (the last
 * one when left out); `symmetryNumber` counts the identical positions on one turn. Throws `rotor/levels` when those left out still count at T.
 */
export function quantumThermodynamics(
  levels: ArrayLike<number>,
  symmetryNumber: number,
  temperature: number,
  completeTo = levels[levels.length - 1],
): RotorThermodynamics {
  requireTemperature(temperature);
  const kT = BOLTZMANN_WAVENUMBER * temperature;
  if (levels.length === 0 || completeTo - levels[0] < 14 * kT)
    throw new TordialError('rotor/levels', `levels up to ${14 * kT} cm-1 above the lowest are needed at ${temperature} K: ask for more`);
  const sums = boltzmannSums(levels, (energy) => ({ log: -energy / kT, energy: energy / kT }));
  return functionsOf(withSymmetry(sums, symmetryNumber), levels[0], temperature);
}

/**
 * Classical: Q = (1/sigma) integral sqrt(kT / (4 pi B)) exp(-V/kT) dphi, the phase-space integral of the turn with B = hbar^2 / 2I. Trapezoidal
 * rule, which converges exponentially for a periodic integrand.
 */
export function classicalThermodynamics(
  potential: PeriodicSeries,
  bottom: number,
  constant: PeriodicSeries,
  symmetryNumber: number,
  temperature: number,
): RotorThermodynamics {
  return functionsOf(withSymmetry(classicalSums(potential, bottom, constant, temperature), symmetryNumber), 0, temperature);
}

/** Harmonic oscillators in every well of the turn: Q = (1/sigma) sum_w exp(-V_w/kT) / (2 sinh(quantum / 2kT)). */
export function harmonicThermodynamics(wells: readonly HarmonicWell[], symmetryNumber: number, temperature: number): RotorThermodynamics {
  const lowest = Math.min(...wells.map((well) => well.energy + well.quantum / 2));
  return functionsOf(withSymmetry(harmonicSums(wells, temperature, true), symmetryNumber), lowest, temperature);
}

/**
 * The Pitzer-Gwinn approximation: the classical functions, corrected by the ratio of quantum to classical harmonic oscillators in the wells,
 * Q = Q_classical Q_harmonic,quantum / Q_harmonic,classical.
 *
 * K. S. Pitzer and W. D. Gwinn, J. Chem. Phys. 10, 428 (1942).
 */
export function pitzerGwinnThermodynamics(
  potential: PeriodicSeries,
  bottom: number,
  constant: PeriodicSeries,
  wells: readonly HarmonicWell[],
  symmetryNumber: number,
  temperature: number,
): RotorThermodynamics {
  const classical = withSymmetry(classicalSums(potential, bottom, constant, temperature), symmetryNumber);
  const quantum = harmonicSums(wells, temperature, true);
  const oscillator = harmonicSums(wells, temperature, false);
  const lowest = Math.min(...wells.map((well) => well.energy + well.quantum / 2));
  return functionsOf(
    {
      logQ: classical.logQ + quantum.logQ - oscillator.logQ,
      reducedEnergy: classical.reducedEnergy + quantum.reducedEnergy - oscillator.reducedEnergy,
      reducedHeatCapacity: classical.reducedHeatCapacity + quantum.reducedHeatCapacity - oscillator.reducedHeatCapacity,
    },
    lowest,
    temperature,
  );
}

function classicalSums(potential: PeriodicSeries, bottom: number, constant: PeriodicSeries, temperature: number): Sums {
  requireTemperature(temperature);
  const kT = BOLTZMANN_WAVENUMBER * temperature;
  const steps = Math.max(1024, 32 * potential.cosine.length);
  const angles = Float64Array.from({ length: steps }, (_, j) => (2 * Math.PI * j) / steps);
  const sums = boltzmannSums(angles, (phi) => {
    const energy = (seriesValue(potential, phi) - bottom) / kT;
    return { log: -energy + Math.log((2 * Math.PI) / steps) + 0.5 * Math.log(kT / (4 * Math.PI * seriesValue(constant, phi))), energy };
  });
  // the momentum adds kT/2 and k/2
  return { logQ: sums.logQ, reducedEnergy: sums.reducedEnergy + 0.5, reducedHeatCapacity: sums.reducedHeatCapacity + 0.5 };
}

function harmonicSums(wells: readonly HarmonicWell[], temperature: number, quantum: boolean): Sums {
  requireTemperature(temperature);
  if (wells.length === 0) throw new TordialError('rotor/wells', 'no wells: a free rotor has no harmonic values');
  const kT = BOLTZMANN_WAVENUMBER * temperature;
  return boltzmannSums(wells, (well) => {
    const u = well.quantum / kT;
    const v = well.energy / kT;
    if (!quantum) return { log: -v - Math.log(u), energy: v + 1, heatCapacity: 1 };
    const half = u / 2;
    // ln(2 sinh(u/2)) without overflow
    return {
      log: -v - half - Math.log1p(-Math.exp(-u)),
      energy: v + half / Math.tanh(half),
      heatCapacity: half > 350 ? 0 : (half / Math.sinh(half)) ** 2,
    };
  });
}

/** Sum of states, each with ln of its own Q, its own U/kT and its own C/k. */
function boltzmannSums<T>(
  states: ArrayLike<T>,
  of: (state: T) => { readonly log: number; readonly energy: number; readonly heatCapacity?: number },
): Sums {
  const parts = Array.from(states, of);
  const top = parts.reduce((largest, part) => Math.max(largest, part.log), Number.NEGATIVE_INFINITY);
  let q = 0;
  let energy = 0;
  let own = 0;
  for (const part of parts) {
    const share = Math.exp(part.log - top);
    q += share;
    energy += share * part.energy;
    own += share * (part.heatCapacity ?? 0);
  }
  const mean = energy / q;
  let variance = 0;
  for (const part of parts) variance += Math.exp(part.log - top) * (part.energy - mean) ** 2;
  return { logQ: top + Math.log(q), reducedEnergy: mean, reducedHeatCapacity: (variance + own) / q };
}

function withSymmetry(sums: Sums, symmetryNumber: number): Sums {
  if (!(symmetryNumber >= 1)) throw new TordialError('rotor/symmetry', `an internal symmetry number of ${symmetryNumber}: give 1 or more`);
  return { ...sums, logQ: sums.logQ - Math.log(symmetryNumber) };
}

function functionsOf(sums: Sums, lowestLevel: number, temperature: number): RotorThermodynamics {
  const kT = BOLTZMANN_WAVENUMBER * temperature;
  return {
    partitionFunction: Math.exp(sums.logQ),
    entropy: GAS_CONSTANT * (sums.logQ + sums.reducedEnergy),
    heatCapacity: GAS_CONSTANT * sums.reducedHeatCapacity,
    energy: (sums.reducedEnergy * kT) / WAVENUMBER_PER_KCAL,
    enthalpy: (sums.reducedEnergy * kT - lowestLevel) / WAVENUMBER_PER_KCAL,
  };
}
