/**
 * Torsion series: a Fourier series in the dihedral angle with up to six terms and any phases, in place of the force field's own three.
 *
 *   E(ijkl) = sum_n 0.5 V_n (1 + cos(n phi - gamma_n)),  n = 1 ... 6
 *
 * V and E in kcal/mol, phi and gamma in radian. With gamma = 0, 180, 0 degrees its first three terms are those of MMFF94.
 */
import { torsion as dihedral, torsionGradient } from '@tordial/geometry';

/** The highest periodicity. */
export const HIGHEST_PERIODICITY = 6;

/** One row a torsion i-j-k-l (atom indices); `cosine` and `sine` hold 0.5 V_n cos gamma_n and 0.5 V_n sin gamma_n, six a row. */
export interface TorsionSeriesTable {
  readonly i: Int32Array;
  readonly j: Int32Array;
  readonly k: Int32Array;
  readonly l: Int32Array;
  /** 0.5 sum V_n, kcal/mol. */
  readonly constant: Float64Array;
  readonly cosine: Float64Array;
  readonly sine: Float64Array;
}

const slopes = new Float64Array(12);

/** Adds the gradient (kcal/mol/angstrom) of every series to `gradient` and returns the energy (kcal/mol). */
export function addTorsionSeries(table: TorsionSeriesTable, x: Float64Array, gradient: Float64Array): number {
  const { constant, cosine, sine } = table;
  let energy = 0;
  for (let row = 0; row < constant.length; row++) {
    const atoms = [table.i[row], table.j[row], table.k[row], table.l[row]] as const;
    const phi = dihedral(x, ...atoms);
    const c = Math.cos(phi), s = Math.sin(phi);
    energy += constant[row];
    let slope = 0;
    // cos n phi and sin n phi from those of n - 1
    for (let n = 1, cn = c, sn = s; n <= HIGHEST_PERIODICITY; n++) {
      const a = cosine[row * HIGHEST_PERIODICITY + n - 1], b = sine[row * HIGHEST_PERIODICITY + n - 1];
      energy += a * cn + b * sn;
      slope += n * (b * cn - a * sn);
      const next = cn * c - sn * s;
      sn = sn * c + cn * s;
      cn = next;
    }
    torsionGradient(x, ...atoms, slopes);
    for (let p = 0; p < 4; p++) for (let d = 0; d < 3; d++) gradient[3 * atoms[p] + d] += slope * slopes[3 * p + d];
  }
  return energy;
}
