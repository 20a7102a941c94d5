/**
 * Coalescence of two NMR signals that exchange.
 *
 *   k_c = pi dnu / sqrt(2)
 *
 * Holds for two equally populated, uncoupled sites; for unequal populations or coupled protons it is a different formula and these functions
 * refuse. H. S. Gutowsky and C. H. Holm, J. Chem. Phys. 25, 1228 (1956).
 */
import { TordialError } from '@tordial/geometry';
import { barrierOfRate, temperatureOfRate } from './eyring.js';

/** Two sites of an exchange: what the simple formula must know before it may be used. */
export interface ExchangingSites {
  /** Populations of the two sites; must be equal within 5 % of their mean. */
  readonly populations: readonly [number, number];
  /** Spin coupling between the two sites, Hz; must be 0. */
  readonly coupling: number;
}

/** Distance of two signals in Hz from a shift difference in ppm and the spectrometer frequency of the nucleus in MHz. */
export function frequencyDifference(shiftDifference: number, spectrometerFrequency: number): number {
  return positive(Math.abs(shiftDifference), 'shift difference', 'ppm') * positive(spectrometerFrequency, 'spectrometer frequency', 'MHz');
}

/** Rate constant (1/s) at coalescence of two signals `difference` Hz apart. Throws `coalescence/sites` where the formula does not hold. */
export function coalescenceRate(difference: number, sites: ExchangingSites): number {
  const [a, b] = sites.populations;
  if (!(a > 0 && b > 0 && Math.abs(a - b) <= 0.05 * ((a + b) / 2)))
    throw new TordialError(
      'coalescence/sites',
      `sites populated ${a.toPrecision(3)} : ${b.toPrecision(3)}: the coalescence formula holds for equal populations only; fit the line shape instead`,
    );
  if (sites.coupling !== 0)
    throw new TordialError(
      'coalescence/sites',
      `sites coupled by ${sites.coupling} Hz: the coalescence formula holds for uncoupled sites only; fit the line shape instead`,
    );
  return (Math.PI * positive(difference, 'frequency difference', 'Hz')) / Math.SQRT2;
}

/** Temperature (K) at which two signals `difference` Hz apart coalesce over a barrier in kcal/mol (taken as independent of temperature). */
export function coalescenceTemperature(barrier: number, difference: number, sites: ExchangingSites): number {
  return temperatureOfRate(coalescenceRate(difference, sites), barrier);
}

/** The inverse: barrier (kcal/mol) from the coalescence temperature (K) of two signals `difference` Hz apart. */
export function barrierFromCoalescence(temperature: number, difference: number, sites: ExchangingSites): number {
  return barrierOfRate(coalescenceRate(difference, sites), temperature);
}

function positive(value: number, what: string, unit: string): number {
  if (!(value > 0) || !Number.isFinite(value))
    throw new TordialError('coalescence/value', `a ${what} of ${value} ${unit}: give a positive number`);
  return value;
}
