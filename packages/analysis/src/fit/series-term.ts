/**
 * Terms of a torsion series, E = sum_n 0.5 V_n (1 + cos(n phi - gamma_n)), n = 1 ... 6.
 */
import { TordialError } from '@tordial/geometry';

export interface SeriesTerm {
  /** Periodicity, 1 to 6. */
  readonly n: number;
  /** Amplitude V, kcal/mol; may be negative. */
  readonly v: number;
  /** gamma, degrees. */
  readonly phase: number;
}

export const HIGHEST_ORDER = 6;

/** The phase that force fields give a term of this periodicity: 0 for odd, 180 degrees for even ones. */
export function usualPhase(n: number): 0 | 180 {
  return n % 2 === 1 ? 0 : 180;
}

/** Terms of the usual phases from V1, V2, V3 ... */
export function usualTerms(v: ArrayLike<number>): SeriesTerm[] {
  return Array.from(v, (value, index) => ({ n: index + 1, v: value, phase: usualPhase(index + 1) }));
}

/** Energy of a series at phi (radians), in the unit of its amplitudes. */
export function seriesEnergy(terms: readonly SeriesTerm[], phi: number): number {
  return terms.reduce((sum, { n, v, phase }) => sum + (v / 2) * (1 + Math.cos(n * phi - (phase * Math.PI) / 180)), 0);
}

/** The same term with an amplitude of at least 0 and a phase in [0, 360); `constant` is what its energy lost by that. */
export function withPositiveAmplitude({ n, v, phase }: SeriesTerm): SeriesTerm & { readonly constant: number } {
  const turned = v < 0 ? phase + 180 : phase;
  return { n, v: Math.abs(v), phase: (((turned % 360) + 360) % 360) + 0, constant: Math.min(v, 0) + 0 };
}

/** Throws `fit/order` unless the order is a whole number from 0 to 6. */
export function requireOrder(order: number): void {
  if (!Number.isInteger(order) || order < 0 || order > HIGHEST_ORDER)
    throw new TordialError(
      'fit/order',
      `a torsion series has up to ${HIGHEST_ORDER} terms; the order ${order} is none of 1 to ${HIGHEST_ORDER}`,
    );
}
