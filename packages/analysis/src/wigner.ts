import { TordialError } from '@tordial/geometry';
import { BOLTZMANN_WAVENUMBER } from './constants.js';
import { requireTemperature } from './temperature.js';

/**
 * Wigner's transmission coefficient for tunnelling through a parabolic barrier, leading correction:
 *
 *   kappa = 1 + (1/24) (h nu / k T)^2
 *
 * `imaginaryFrequency`: magnitude of the saddle's imaginary frequency, cm-1. The expansion holds while h nu / k T is small; above about 2
 * (kappa near 1.2) it is an estimate, and `wignerHolds` says so.
 *
 * E. Wigner, Z. Phys. Chem. B 19, 203 (1932).
 */
export function wignerTransmission(imaginaryFrequency: number, temperature: number): number {
  return 1 + reducedFrequency(imaginaryFrequency, temperature) ** 2 / 24;
}

/** Whether Wigner's expansion may be trusted: h nu / k T at most 2. */
export function wignerHolds(imaginaryFrequency: number, temperature: number): boolean {
  return reducedFrequency(imaginaryFrequency, temperature) <= 2;
}

function reducedFrequency(frequency: number, temperature: number): number {
  requireTemperature(temperature);
  if (!(frequency >= 0))
    throw new TordialError('analysis/frequency', `give the magnitude of the imaginary frequency, not ${frequency} cm-1`);
  return frequency / (BOLTZMANN_WAVENUMBER * temperature);
}
