/**
 * Times of first-order interconversion.
 *
 * k is the rate constant of one direction, from one rotamer or hand to the other. In a racemisation the excess falls twice as fast as
 * one hand turns over, d(ee)/dt = -2k ee, so the two half-lives differ by 2 and are never to be confused
 * (E. L. Eliel and S. H. Wilen, Stereochemistry of Organic Compounds, Wiley 1994, chapter 7).
 */
import { TordialError } from '@tordial/geometry';

/** Temperatures (K) at which shelf lives are asked for: 25, 37, 40, 60 and 80 C. */
export const SHELF_TEMPERATURES = [298.15, 310.15, 313.15, 333.15, 353.15] as const;

/** Half-life of exchange, ln 2 / k, in seconds, of k in 1/s: half of the molecules have left the well they were in. */
export function exchangeHalfLife(rate: number): number {
  return Math.LN2 / positive(rate);
}

/** Half-life of racemisation, ln 2 / (2k), in seconds: the enantiomeric excess has fallen to half. */
export function racemisationHalfLife(rate: number): number {
  return Math.LN2 / (2 * positive(rate));
}

/**
 * Time in seconds for the enantiomeric excess to fall from 1 to `remaining` (default 0.99: from 100 to 99 %), -ln(remaining) / (2k).
 * Throws `analysis/excess` unless 0 < remaining < 1.
 */
export function timeToExcess(rate: number, remaining = 0.99): number {
  if (!(remaining > 0 && remaining < 1))
    throw new TordialError('analysis/excess', `a remaining excess of ${remaining}: give a fraction between 0 and 1, 0.99 for 99 %`);
  return -Math.log(remaining) / (2 * positive(rate));
}

/** Rate constant (1/s) of parallel routes: they add, so two mirror-image routes double the rate of one. */
export function parallelRate(rates: readonly number[]): number {
  if (rates.length === 0) throw new TordialError('analysis/rate', 'no route: give the rate of at least one');
  return rates.reduce((sum, rate) => sum + positive(rate), 0);
}

function positive(rate: number): number {
  if (!(rate > 0)) throw new TordialError('analysis/rate', `a rate constant of ${rate} 1/s has no half-life: give a positive one`);
  return rate;
}
