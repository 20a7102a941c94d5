/**
 * Boltzmann populations of wells, discrete or as basins of a continuous profile.
 *
 *   p_i = g_i exp(-E_i / RT) / sum_j g_j exp(-E_j / RT)
 *   p_basin = integral over the basin of w(phi) exp(-V(phi) / RT) dphi / the same over the full turn
 *
 * With electronic energies the first form counts wells alone; with free energies (RRHO) it counts their vibrations and overall
 * rotation as well. The second is the classical configuration integral; w = sqrt(I(phi)) comes from the momentum integral where the
 * reduced moment changes along the turn (Pitzer and Gwinn, J. Chem. Phys. 10, 428 (1942)).
 */
import { TordialError } from '@tordial/geometry';
import { GAS_CONSTANT_KCAL } from './constants.js';
import { requireTemperature } from './temperature.js';

/**
 * Populations (sum 1) of states at `energies` (kcal/mol, electronic or free, any zero).
 *
 * `degeneracies` (default 1 each) counts how often a state stands on the full turn. A profile that lists every well of the turn has
 * counted them already: leave it out there. Throws `analysis/populations` on columns of different length or non-finite energies.
 */
export function boltzmannPopulations(energies: ArrayLike<number>, temperature: number, degeneracies?: ArrayLike<number>): Float64Array {
  requireTemperature(temperature);
  const count = energies.length;
  if (degeneracies && degeneracies.length !== count)
    throw new TordialError('analysis/populations', `${count} energies but ${degeneracies.length} degeneracies: give one for each`);
  let lowest = Number.POSITIVE_INFINITY;
  for (let i = 0; i < count; i++) {
    if (!Number.isFinite(energies[i])) throw new TordialError('analysis/populations', `energy ${i} is ${energies[i]}, not a number`);
    lowest = Math.min(lowest, energies[i]);
  }
  const populations = new Float64Array(count);
  let sum = 0;
  for (let i = 0; i < count; i++) {
    const g = degeneracies ? degeneracies[i] : 1;
    if (!(g >= 0)) throw new TordialError('analysis/populations', `degeneracy ${i} is ${g}: give a number of states, 1 or more`);
    populations[i] = g * Math.exp((lowest - energies[i]) / (GAS_CONSTANT_KCAL * temperature));
    sum += populations[i];
  }
  for (let i = 0; i < count; i++) populations[i] /= sum;
  return populations;
}

/**
 * Populations (sum 1) of the basins of a periodic curve, by integrating it classically.
 *
 * `energy(phi)` in kcal/mol, phi in radians, period 2 pi. `boundaries`: at least one angle (the barriers), ascending; basin i reaches from
 * boundary i to boundary i + 1, the last one across the turn's end to the first. `weight(phi)` is sqrt(I(phi)) or left out.
 * Composite Gauss-Legendre rule of 5 points (Abramowitz and Stegun, table 25.4) on `panels` equal panels a basin.
 */
export function basinPopulations(
  energy: (phi: number) => number,
  boundaries: ArrayLike<number>,
  temperature: number,
  weight: (phi: number) => number = () => 1,
  panels = 64,
): Float64Array {
  requireTemperature(temperature);
  const count = boundaries.length;
  if (count === 0) throw new TordialError('analysis/populations', 'no boundaries between the basins: give the angles of the barriers');
  const RT = GAS_CONSTANT_KCAL * temperature;
  const logs = new Float64Array(count * panels * 5);
  const factors = new Float64Array(logs.length);
  let at = 0;
  let largest = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < count; i++) {
    const from = boundaries[i];
    const to = i + 1 < count ? boundaries[i + 1] : boundaries[0] + 2 * Math.PI;
    if (!(to > from)) throw new TordialError('analysis/populations', 'boundaries must ascend within one turn');
    const half = (to - from) / (2 * panels);
    for (let panel = 0; panel < panels; panel++) {
      const middle = from + (2 * panel + 1) * half;
      for (let g = 0; g < 5; g++, at++) {
        const phi = middle + half * GAUSS_NODES[g];
        logs[at] = -energy(phi) / RT;
        factors[at] = half * GAUSS_WEIGHTS[g] * weight(phi);
        largest = Math.max(largest, logs[at]);
      }
    }
  }
  const populations = new Float64Array(count);
  let sum = 0;
  for (let n = 0; n < at; n++) {
    const share = factors[n] * Math.exp(logs[n] - largest);
    populations[Math.floor(n / (panels * 5))] += share;
    sum += share;
  }
  for (let i = 0; i < count; i++) populations[i] /= sum;
  return populations;
}

const GAUSS_NODES = [-0.906179845938664, -0.5384693101056831, 0, 0.5384693101056831, 0.906179845938664];
const GAUSS_WEIGHTS = [0.23692688505618908, 0.47862867049936647, 0.5688888888888889, 0.47862867049936647, 0.23692688505618908];
