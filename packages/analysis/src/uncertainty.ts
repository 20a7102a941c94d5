/**
 * How far a half-life may be off.
 *
 * The barrier stands in an exponent: an error of 1.36 kcal/mol at 25 C is a factor of 10 in the rate. An assumed error of the barrier is
 * therefore carried through to every rate and half-life as a range.
 */
import { TordialError } from '@tordial/geometry';
import type { DocumentTorsionTerm } from '@tordial/scan';
import { GAS_CONSTANT_KCAL } from './constants.js';
import { requireTemperature } from './temperature.js';

/** Assumed error (kcal/mol) of a barrier from an MMFF94-class force field with torsion terms made for the atoms on the axis. */
export const BARRIER_ERROR = 2;

/** Assumed error (kcal/mol) where terms on the axis are wildcards: constants for the bond's two atoms alone, blind to what they carry. */
export const WILDCARD_BARRIER_ERROR = 3;

/** Assumed error (kcal/mol) where terms on the axis come from the empirical rule: no molecule like this one was in the parametrisation. */
export const EMPIRICAL_BARRIER_ERROR = 4;

/** An assumed error of a barrier and the reason for its size. */
export interface BarrierError {
  /** kcal/mol, to either side. */
  readonly error: number;
  readonly reason: string;
}

/**
 * The assumed error of the barrier of a rotor whose axis carries the torsion terms `parameters` (`document.rotor.parameters`).
 * The widest source decides. `error` overrides it, kcal/mol.
 *
 * The three sizes are assumptions of this project, in the order of the deviations that MMFF94 shows against published barriers.
 */
export function assumedBarrierError(parameters: readonly DocumentTorsionTerm[], error?: number): BarrierError {
  if (error !== undefined) {
    if (!(error >= 0) || !Number.isFinite(error))
      throw new TordialError('analysis/barrier-error', `an error of the barrier of ${error} kcal/mol: give 0 or more`);
    return { error, reason: 'given' };
  }
  const sources = new Set(parameters.map((term) => term.source));
  if (sources.has('empirical rule'))
    return { error: EMPIRICAL_BARRIER_ERROR, reason: 'torsion terms on the axis come from the empirical rule' };
  if (sources.has('wildcard')) return { error: WILDCARD_BARRIER_ERROR, reason: 'torsion terms on the axis are wildcards' };
  return { error: BARRIER_ERROR, reason: parameters.length > 0 ? 'torsion terms made for the axis' : 'no torsion terms stated' };
}

/** A value with the range that the error of the barrier makes of it, low to high. */
export interface Range {
  readonly value: number;
  readonly low: number;
  readonly high: number;
}

/** The range of a rate constant (1/s) whose barrier may be off by `error` kcal/mol at T. */
export function rateRange(rate: number, temperature: number, error: number): Range {
  requireTemperature(temperature);
  const factor = Math.exp(error / (GAS_CONSTANT_KCAL * temperature));
  return { value: rate, low: rate / factor, high: rate * factor };
}

/** The range of a time that is inversely proportional to a rate: the fast end of the rate gives the short time. */
export function timeRange(rate: Range, time: (rate: number) => number): Range {
  return { value: time(rate.value), low: time(rate.high), high: time(rate.low) };
}
