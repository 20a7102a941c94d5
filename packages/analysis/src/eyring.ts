/**
 * Rate over a barrier by transition-state theory.
 *
 *   k = kappa (k_B T / h) exp(-dG / RT)
 *
 * H. Eyring, J. Chem. Phys. 3, 107 (1935); M. G. Evans and M. Polanyi, Trans. Faraday Soc. 31, 875 (1935). With an electronic
 * barrier in place of dG the partition functions of well and saddle are taken as equal.
 */
import { TordialError } from '@tordial/geometry';
import { ATTEMPTS_PER_KELVIN, GAS_CONSTANT_KCAL } from './constants.js';
import { requireTemperature } from './temperature.js';

/** Rate constant (1/s) over a barrier of `barrier` kcal/mol at T kelvin; `kappa` is the transmission coefficient. */
export function eyringRate(barrier: number, temperature: number, kappa = 1): number {
  requireTemperature(temperature);
  if (!Number.isFinite(barrier)) throw new TordialError('analysis/barrier', `a barrier of ${barrier} kcal/mol has no rate`);
  if (!(kappa > 0)) throw new TordialError('analysis/kappa', `a transmission coefficient of ${kappa}: give a positive number, 1 for none`);
  return kappa * ATTEMPTS_PER_KELVIN * temperature * Math.exp(-barrier / (GAS_CONSTANT_KCAL * temperature));
}

/** Rates (1/s) both ways over one barrier between two wells; all three energies in kcal/mol on one scale. */
export function eyringRates(
  from: number,
  barrier: number,
  to: number,
  temperature: number,
  kappa = 1,
): { readonly forward: number; readonly backward: number } {
  return { forward: eyringRate(barrier - from, temperature, kappa), backward: eyringRate(barrier - to, temperature, kappa) };
}

/** The barrier (kcal/mol) that gives the rate constant `rate` (1/s) at T: the Eyring equation solved for dG. Throws `analysis/rate`. */
export function barrierOfRate(rate: number, temperature: number, kappa = 1): number {
  requireTemperature(temperature);
  if (!(rate > 0) || !Number.isFinite(rate))
    throw new TordialError('analysis/rate', `a rate of ${rate} 1/s has no barrier: give a positive one`);
  return GAS_CONSTANT_KCAL * temperature * Math.log((kappa * ATTEMPTS_PER_KELVIN * temperature) / rate);
}

/**
 * The temperature (K) at which a barrier (kcal/mol, taken as independent of temperature) gives the rate constant `rate` (1/s).
 *
 * Solved for u = 1/T in ln(k) = ln(kappa k_B/h) - ln(u) - dG u / R by Newton steps, whose left side is convex and falling in ln u.
 * Throws `analysis/barrier` for a barrier that is not positive, `analysis/rate` for a rate that is not.
 */
export function temperatureOfRate(rate: number, barrier: number, kappa = 1): number {
  if (!(barrier > 0) || !Number.isFinite(barrier))
    throw new TordialError('analysis/barrier', `a barrier of ${barrier} kcal/mol: only a positive one slows the rate on cooling`);
  if (!(rate > 0) || !Number.isFinite(rate)) throw new TordialError('analysis/rate', `a rate of ${rate} 1/s: give a positive one`);
  // y = ln T: f(y) = y - (dG/R) exp(-y) - ln(rate h / kappa k_B) rises steadily and is concave, so Newton from the left end converges
  const target = Math.log(rate / (kappa * ATTEMPTS_PER_KELVIN));
  const height = barrier / GAS_CONSTANT_KCAL;
  let y = Math.log(height / 1000);
  while (y - height * Math.exp(-y) > target) y -= 1;
  for (let step = 0; step < 200; step++) {
    const change = (target - y + height * Math.exp(-y)) / (1 + height * Math.exp(-y));
    y += change;
    if (Math.abs(change) < 1e-14) break;
  }
  return Math.exp(y);
}
