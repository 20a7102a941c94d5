/**
 * The wells round one turn and the barriers between them, reduced to what can be observed.
 *
 * Well i stands between barrier i - 1 and barrier i; after the last the turn closes. Rates are Eyring's; the populations obey
 *
 *   dP_i/dt = sum_j (k_ji P_j - k_ij P_i),   p_i k_ij = p_j k_ji
 *
 * (master equation with detailed balance; N. G. van Kampen, Stochastic Processes in Physics and Chemistry, chapter V). Made symmetric
 * with sqrt(p) it has the eigenvalues 0 and the relaxation rates. A slow rate of 1e-10 beside fast ones of 1e12 drowns in the rounding of
 * a common eigenvalue routine; here the matrix is never formed: it is G G^T with columns of graded size, whose singular values one-sided
 * Jacobi rotations give to full relative accuracy (J. Demmel and K. Veselic, SIAM J. Matrix Anal. Appl. 13, 1204 (1992)).
 */
import { TordialError } from '@tordial/geometry';
import { ATTEMPTS_PER_KELVIN, GAS_CONSTANT_KCAL } from './constants.js';
import { eyringRates } from './eyring.js';
import { boltzmannPopulations } from './populations.js';
import { requireTemperature } from './temperature.js';

/** Wells and barriers round one turn, energies in kcal/mol on one scale (all electronic, or all free energies). */
export interface WellNetwork {
  readonly wells: readonly number[];
  /** `barriers[i]` stands between well i and well i + 1, the last one between the last well and the first; null: no saddle is known. */
  readonly barriers: readonly (number | null)[];
  /** Transmission coefficient of each barrier, times the number of equal saddles that it stands for; 1 when left out. */
  readonly transmission?: readonly number[];
}

/** One way the populations relax: they approach equilibrium as exp(-rate t) along `shape`. */
export interface RelaxationMode {
  /** 1/s. For two wells, or two hands, it is the sum of the rates of both directions. */
  readonly rate: number;
  /** Value on each well, constant over wells that equilibrate fast; sum over p_i shape_i is 0, over p_i shape_i^2 is 1. */
  readonly shape: Float64Array;
}

/** One way from a set of wells to another round the turn. */
export interface Route {
  /** Wells passed, the first in `from`, the last in `to`. */
  readonly wells: readonly number[];
  /** Barriers passed, by index. */
  readonly barriers: readonly number[];
  /** Energy of its highest barrier, kcal/mol; null where a barrier of the route is unknown. */
  readonly highest: number | null;
}

/** Rates (1/s) over each barrier, from well i to i + 1 (`forward`) and back; null over an unknown barrier. */
export function barrierRates(network: WellNetwork, temperature: number): ({ forward: number; backward: number } | null)[] {
  check(network);
  const { wells, barriers, transmission } = network;
  return barriers.map((barrier, i) =>
    barrier === null ? null : eyringRates(wells[i], barrier, wells[(i + 1) % wells.length], temperature, transmission?.[i]),
  );
}

/**
 * The relaxation modes of the turn, slowest first: one fewer than wells. Throws `network/unknown-barrier` when a barrier is null: a rate
 * over a crossing of branches is not justified.
 */
export function relaxationModes(network: WellNetwork, temperature: number): RelaxationMode[] {
  check(network);
  requireTemperature(temperature);
  const { wells, barriers, transmission } = network;
  const n = wells.length;
  const p = boltzmannPopulations(wells, temperature);
  const RT = GAS_CONSTANT_KCAL * temperature;
  const lowest = Math.min(...wells);
  const ofLowest = p[wells.indexOf(lowest)];
  // flux at equilibrium over barrier e, p_i k_ij, from the barrier alone so that both directions agree to the last digit
  const flux = barriers.map((barrier, e) => {
    if (barrier === null)
      throw new TordialError(
        'network/unknown-barrier',
        `no saddle is known between wells ${e} and ${(e + 1) % n}: refine it before asking for rates`,
      );
    return (transmission?.[e] ?? 1) * ATTEMPTS_PER_KELVIN * temperature * ofLowest * Math.exp((lowest - barrier) / RT);
  });
  if (n === 1) return [];

  // Round the cycle the edge vectors add up to zero, so the slowest edge is minus the sum of all others, which are independent.
  const edges = flux.map((_, e) => e).sort((a, b) => flux[b] - flux[a] || a - b);
  const slowest = flux[edges[n - 1]];
  const tree = edges.slice(0, n - 1);
  const L = choleskyOfRaisedDiagonal(
    tree.map((e) => flux[e]),
    slowest,
  );
  const G = tree.map((_, column) => {
    const g = new Float64Array(n);
    for (let row = column; row < tree.length; row++) {
      const e = tree[row];
      const j = (e + 1) % n;
      g[e] += L[row][column] / Math.sqrt(p[e]);
      g[j] -= L[row][column] / Math.sqrt(p[j]);
    }
    return g;
  });
  orthogonalise(G);
  return G.map((g) => {
    const rate = dot(g, g);
    return { rate, shape: g.map((value, i) => value / Math.sqrt(rate * p[i])) };
  }).sort((a, b) => a.rate - b.rate);
}

/**
 * Every way from the wells `from` to the wells `to` round the turn, in either direction, that passes neither set in between.
 * Two mirror-image routes are two.
 */
export function routesBetween(network: WellNetwork, from: readonly number[], to: readonly number[]): Route[] {
  check(network);
  const n = network.wells.length;
  const routes: Route[] = [];
  for (const start of from)
    for (const direction of [1, -1]) {
      const wells = [start];
      const barriers: number[] = [];
      let at = start;
      for (let step = 0; step < n; step++) {
        barriers.push(direction > 0 ? at : (at + n - 1) % n);
        at = (at + direction + n) % n;
        wells.push(at);
        if (to.includes(at) || from.includes(at)) break;
      }
      if (to.includes(at)) routes.push({ wells, barriers, highest: highestOf(network, barriers) });
    }
  return routes;
}

function highestOf(network: WellNetwork, barriers: readonly number[]): number | null {
  let highest = Number.NEGATIVE_INFINITY;
  for (const e of barriers) {
    const barrier = network.barriers[e];
    if (barrier === null) return null;
    highest = Math.max(highest, barrier);
  }
  return highest;
}

/** Lower triangle L with L L^T = diag(d) + a times the matrix of ones; d descending, a at most the last of d. */
function choleskyOfRaisedDiagonal(d: readonly number[], a: number): Float64Array[] {
  const size = d.length;
  const L = Array.from({ length: size }, () => new Float64Array(size));
  // what is left of `a` after the columns before: 1/a grows by 1/d with each, so nothing is subtracted
  let inverse = 1 / a;
  for (let column = 0; column < size; column++) {
    const left = 1 / inverse;
    const pivot = Math.sqrt(d[column] + left);
    L[column][column] = pivot;
    for (let row = column + 1; row < size; row++) L[row][column] = left / pivot;
    inverse += 1 / d[column];
  }
  return L;
}

/** One-sided Jacobi: rotates the columns in pairs until all are orthogonal. */
function orthogonalise(columns: Float64Array[]): void {
  for (let sweep = 0; sweep < 60; sweep++) {
    let rotated = false;
    for (let p = 0; p < columns.length; p++)
      for (let q = p + 1; q < columns.length; q++) {
        const a = columns[p];
        const b = columns[q];
        const alpha = dot(a, a);
        const beta = dot(b, b);
        const gamma = dot(a, b);
        if (Math.abs(gamma) <= 1e-15 * Math.sqrt(alpha) * Math.sqrt(beta)) continue;
        rotated = true;
        const zeta = (beta - alpha) / (2 * gamma);
        const t = (zeta >= 0 ? 1 : -1) / (Math.abs(zeta) + Math.hypot(1, zeta));
        const c = 1 / Math.hypot(1, t);
        const s = c * t;
        for (let i = 0; i < a.length; i++) {
          const x = a[i];
          a[i] = c * x - s * b[i];
          b[i] = s * x + c * b[i];
        }
      }
    if (!rotated) return;
  }
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i] * b[i];
  return sum;
}

function check({ wells, barriers, transmission }: WellNetwork): void {
  if (wells.length === 0 || barriers.length !== wells.length || (transmission && transmission.length !== wells.length))
    throw new TordialError(
      'network/shape',
      `${wells.length} wells and ${barriers.length} barriers: a turn has as many barriers as wells, at least one`,
    );
  wells.forEach((energy, i) => {
    if (!Number.isFinite(energy)) throw new TordialError('network/energy', `well ${i} has the energy ${energy}`);
    const barrier = barriers[i];
    const next = wells[(i + 1) % wells.length];
    if (barrier !== null && !(barrier >= Math.max(energy, next)))
      throw new TordialError('network/energy', `barrier ${i} at ${barrier} kcal/mol lies below a well beside it (${energy} and ${next})`);
  });
}
