import { barrierOfRate, temperatureOfRate } from './eyring.js';
import { racemisationHalfLife } from './half-life.js';

/** Oki's limit: the half-life of racemisation, ln 2 / (2k), that makes two rotamers separable, s. */
export const OKI_HALF_LIFE = 1000;

/**
 * Whether rotamers that turn into each other at `rate` (1/s, one direction, at the temperature asked about) count as separate compounds:
 * a half-life of racemisation of at least 1000 s.
 *
 * M. Oki, Top. Stereochem. 14, 1 (1983).
 */
export function meetsOki(rate: number): boolean {
  return racemisationHalfLife(rate) >= OKI_HALF_LIFE;
}

/** Lowest barrier (kcal/mol) that meets Oki's criterion at T kelvin. */
export function okiBarrier(temperature: number): number {
  return barrierOfRate(Math.LN2 / (2 * OKI_HALF_LIFE), temperature);
}

/** Highest temperature (K) at which a barrier (kcal/mol, taken as independent of temperature) meets Oki's criterion. */
export function okiTemperature(barrier: number): number {
  return temperatureOfRate(Math.LN2 / (2 * OKI_HALF_LIFE), barrier);
}
