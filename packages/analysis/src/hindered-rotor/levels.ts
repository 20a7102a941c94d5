/**
 * Levels of one hindered internal rotation.
 *
 *   [ -d/dphi B(phi) d/dphi + V(phi) ] psi = E psi,   psi(phi + 2 pi) = psi(phi),   B = hbar^2 / 2I
 *
 * in the basis 1, cos m phi, sin m phi, whose size follows from convergence. With V and B as Fourier series every matrix element is a sum of at most two coefficients. Functions
 * that no element joins (odd and even, or residues of m in an n-fold potential) fall into blocks of their own, which also keeps
 * degenerate levels exactly so. A cosine potential makes it Mathieu's equation.
 *
 * Source: J. D. Lewis, T. B. Malloy, T. H. Chao, J. Laane, J. Mol. Struct. 12, 427 (1972); D. G. Lister, J. N. Macdonald, N. L. Owen,
 * Internal Rotation and Inversion, Academic Press 1978.
 */
import { TordialError } from '@tordial/geometry';
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { extremaOfSeries, type PeriodicSeries, withoutNoise } from './periodic-series.js';

/** Levels of a rotor and their functions. */
export interface TorsionalLevels {
  /** Ascending, cm-1, on the scale of the potential. */
  readonly energies: Float64Array;
  /** Of each level: coefficients of 1/sqrt(2 pi), cos(phi)/sqrt(pi) .. cos(M phi)/sqrt(pi), sin(phi)/sqrt(pi) .. sin(M phi)/sqrt(pi). */
  readonly functions: readonly Float64Array[];
  /** M, the highest harmonic of the basis that convergence asked for. */
  readonly basis: number;
}

export interface LevelOptions {
  /** Levels up to this energy are wanted converged, cm-1 above the potential's lowest point; 2000 when left out. */
  readonly upTo?: number;
  /** Largest shift that functions beyond the basis may bring to a wanted level, cm-1; 1e-9 when left out. */
  readonly tolerance?: number;
  /** Largest M tried; 1500 when left out. */
  readonly largestBasis?: number;
}

/**
 * Levels of the potential (cm-1) with the rotational constant B (cm-1), each a Fourier series in the torsion angle. The basis grows until
 * functions beyond it would move no wanted level. Throws `rotor/constant` where B is not positive everywhere, `rotor/basis` when the largest basis is not enough.
 */
export function torsionalLevels(potential: PeriodicSeries, constant: PeriodicSeries, options: LevelOptions = {}): TorsionalLevels {
  const { upTo = 2000, tolerance = 1e-9, largestBasis = 1500 } = options;
  const V = withoutNoise(potential);
  const B = withoutNoise(constant);
  const smallest = lowestValue(B);
  if (!(smallest > 0))
    throw new TordialError('rotor/constant', `the rotational constant falls to ${smallest} cm-1: it must be positive all the way round`);
  const bottom = lowestValue(V);
  const limit = bottom + upTo;
  // a wave of energy E above the bottom has at most sqrt(E/B) nodes a turn; what tunnels into the walls decays within a few more
  const reach = V.cosine.length + B.cosine.length;
  let basis = Math.min(largestBasis, Math.ceil(1.1 * Math.sqrt(upTo / smallest)) + reach + 10);
  for (;;) {
    const levels = solve(V, B, basis);
    if (converged(levels, V, B, limit, tolerance)) return upToLimit(levels, limit);
    if (basis === largestBasis)
      throw new TordialError(
        'rotor/basis',
        `levels up to ${upTo} cm-1 are not converged with ${largestBasis} harmonics: ask for fewer levels`,
      );
    basis = Math.min(largestBasis, Math.ceil(1.25 * basis));
  }
}

function lowestValue(series: PeriodicSeries): number {
  if (series.cosine.length === 1) return series.cosine[0];
  return Math.min(...extremaOfSeries(series).map((extremum) => extremum.value));
}

/**
 * Whether functions beyond the basis would move no wanted level by more than the tolerance: in second order they lower it by
 * sum_m |<m|H|psi>|^2 / (E_m - E), m beyond the basis, where only the last few coefficients of psi reach, and E_m is at least
 * that of a free rotor.
 */
function converged(
  { energies, functions, basis }: TorsionalLevels,
  V: PeriodicSeries,
  B: PeriodicSeries,
  limit: number,
  tolerance: number,
): boolean {
  const reach = Math.max(V.cosine.length, B.cosine.length) - 1;
  const beyond = lowestValue(B) * (basis + 1) ** 2 + lowestValue(V);
  if (!(beyond > limit)) return false;
  const from = Math.max(1, basis - reach + 1);
  for (let level = 0; level < energies.length && energies[level] <= limit; level++) {
    const c = functions[level];
    let shift = 0;
    for (let m = basis + 1; m <= basis + reach; m++) {
      let cosine = 0;
      let sine = 0;
      for (let n = from; n <= basis; n++) {
        cosine += c[n] * (cosCos(V, m, n) + m * n * sinSin(B, m, n)) + c[basis + n] * (cosSin(V, m, n) - m * n * cosSin(B, n, m));
        sine += c[basis + n] * (sinSin(V, m, n) + m * n * cosCos(B, m, n)) + c[n] * (cosSin(V, n, m) - m * n * cosSin(B, m, n));
      }
      shift += cosine * cosine + sine * sine;
    }
    if (shift > tolerance * (beyond - energies[level])) return false;
  }
  return true;
}

function upToLimit({ energies, functions, basis }: TorsionalLevels, limit: number): TorsionalLevels {
  let count = energies.findIndex((energy) => energy > limit);
  if (count < 0) count = energies.length;
  // at least the first two levels, however high: a transition needs them
  count = Math.max(count, Math.min(2, energies.length));
  return { energies: energies.slice(0, count), functions: functions.slice(0, count), basis };
}

function solve(V: PeriodicSeries, B: PeriodicSeries, basis: number): TorsionalLevels {
  const size = 2 * basis + 1;
  const H = hamiltonian(V, B, basis);
  const states: { energy: number; vector: Float64Array }[] = [];
  for (const block of blocks(H, size)) {
    const matrix = new Matrix(block.length, block.length);
    for (let p = 0; p < block.length; p++) for (let q = 0; q < block.length; q++) matrix.set(p, q, H[block[p] * size + block[q]]);
    const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(matrix, { assumeSymmetric: true });
    realEigenvalues.forEach((energy, column) => {
      const vector = new Float64Array(size);
      for (let p = 0; p < block.length; p++) vector[block[p]] = eigenvectorMatrix.get(p, column);
      states.push({ energy, vector });
    });
  }
  states.sort((a, b) => a.energy - b.energy);
  return { energies: Float64Array.from(states, (s) => s.energy), functions: states.map((s) => s.vector), basis };
}

/** Row-major matrix in the order 1, cos 1 .. cos M, sin 1 .. sin M. */
function hamiltonian(V: PeriodicSeries, B: PeriodicSeries, basis: number): Float64Array {
  const size = 2 * basis + 1;
  const H = new Float64Array(size * size);
  const set = (i: number, j: number, value: number): void => {
    H[i * size + j] = value;
    H[j * size + i] = value;
  };
  set(0, 0, V.cosine[0]);
  for (let m = 1; m <= basis; m++) {
    // the constant function has no momentum: only the potential joins it to others
    set(0, m, (V.cosine[m] ?? 0) / Math.SQRT2);
    set(0, basis + m, (V.sine[m] ?? 0) / Math.SQRT2);
    for (let n = 1; n <= m; n++) {
      set(m, n, cosCos(V, m, n) + m * n * sinSin(B, m, n));
      set(basis + m, basis + n, sinSin(V, m, n) + m * n * cosCos(B, m, n));
    }
    for (let n = 1; n <= basis; n++) set(m, basis + n, cosSin(V, m, n) - m * n * cosSin(B, n, m));
  }
  return H;
}

/** (1/pi) integral of f cos m cos n: half of the coefficients of the difference and of the sum, the mean counting twice. */
function cosCos(f: PeriodicSeries, m: number, n: number): number {
  return (evenCoefficient(f, m - n) + evenCoefficient(f, m + n)) / 2;
}

function sinSin(f: PeriodicSeries, m: number, n: number): number {
  return (evenCoefficient(f, m - n) - evenCoefficient(f, m + n)) / 2;
}

/** (1/pi) integral of f cos m sin n. */
function cosSin(f: PeriodicSeries, m: number, n: number): number {
  return (oddCoefficient(f, n + m) + oddCoefficient(f, n - m)) / 2;
}

function evenCoefficient(f: PeriodicSeries, k: number): number {
  return k === 0 ? 2 * f.cosine[0] : (f.cosine[Math.abs(k)] ?? 0);
}

function oddCoefficient(f: PeriodicSeries, k: number): number {
  return k < 0 ? -(f.sine[-k] ?? 0) : (f.sine[k] ?? 0);
}

/** Index sets that no matrix element joins. */
function blocks(H: Float64Array, size: number): Int32Array[] {
  const block = new Int32Array(size).fill(-1);
  const found: Int32Array[] = [];
  for (let start = 0; start < size; start++) {
    if (block[start] >= 0) continue;
    const members = [start];
    block[start] = found.length;
    for (const i of members)
      for (let j = 0; j < size; j++)
        if (block[j] < 0 && H[i * size + j] !== 0) {
          block[j] = found.length;
          members.push(j);
        }
    found.push(Int32Array.from(members).sort());
  }
  return found;
}

/**
 * Probability of finding each level between two angles (radians, from < to), for the first `count` levels: |psi|^2 integrated by the midpoint
 * rule on a grid of eight points a harmonic.
 */
export function occupancy({ functions, basis }: TorsionalLevels, from: number, to: number, count = functions.length): Float64Array {
  const steps = Math.max(64, Math.ceil(((to - from) / (2 * Math.PI)) * 8 * basis));
  const width = (to - from) / steps;
  const share = new Float64Array(count);
  const cosines = new Float64Array(basis + 1);
  const sines = new Float64Array(basis + 1);
  for (let step = 0; step < steps; step++) {
    const phi = from + (step + 0.5) * width;
    for (let m = 1; m <= basis; m++) {
      cosines[m] = Math.cos(m * phi);
      sines[m] = Math.sin(m * phi);
    }
    for (let n = 0; n < count; n++) {
      const c = functions[n];
      let psi = c[0] / Math.SQRT2;
      for (let m = 1; m <= basis; m++) psi += c[m] * cosines[m] + c[basis + m] * sines[m];
      share[n] += (psi * psi * width) / Math.PI;
    }
  }
  return share;
}

/** Lowest point of a potential (same unit), the zero that thermodynamic functions are counted from. */
export function bottomOf(potential: PeriodicSeries): number {
  return lowestValue(withoutNoise(potential));
}
