/**
 * Error of coordinates in four dimensions against distance bounds and signed volumes. The fourth dimension lets atoms pass each other
 * and centres invert; its weight is raised until it is flat.
 *
 *   E = sum (d^2/u^2 - 1)^2  for d > u,  (2 l^2/(l^2 + d^2) - 1)^2  for d < l,  + volumes + w sum x4^2
 *
 * Sources: T. F. Havel, Prog. Biophys. Mol. Biol. 56, 43 (1991); J. M. Blaney, J. S. Dixon, Rev. Comput. Chem. 5, 299 (1994).
 */
import { addVolumeError, type SignedVolumes } from './handedness.js';
import type { ErrorFunction } from './lbfgs.js';
import type { DistanceBounds } from './triangle-smoothing.js';

/** What a signed volume short of its least one and a squared angstrom of the fourth dimension cost. */
export interface ErrorWeights {
  readonly volume: number;
  readonly fourth: number;
}

/** The error as a function of x (4 values an atom). */
export function distanceError({ size, lower, upper }: DistanceBounds, volumes: SignedVolumes, weights: ErrorWeights): ErrorFunction {
  // squares, half the matrix, row by row
  const count = (size * (size - 1)) / 2;
  const least = new Float64Array(count);
  const most = new Float64Array(count);
  for (let i = 1, n = 0; i < size; i++)
    for (let j = 0; j < i; j++, n++) {
      least[n] = lower[i * size + j] ** 2;
      most[n] = upper[i * size + j] ** 2;
    }

  return (x, gradient) => {
    gradient.fill(0);
    let sum = 0;
    for (let i = 1, n = 0; i < size; i++) {
      const p = 4 * i;
      const x0 = x[p];
      const x1 = x[p + 1];
      const x2 = x[p + 2];
      const x3 = x[p + 3];
      let g0 = 0;
      let g1 = 0;
      let g2 = 0;
      let g3 = 0;
      for (let q = 0; q < p; q += 4, n++) {
        const d0 = x0 - x[q];
        const d1 = x1 - x[q + 1];
        const d2 = x2 - x[q + 2];
        const d3 = x3 - x[q + 3];
        const square = d0 * d0 + d1 * d1 + d2 * d2 + d3 * d3;
        let slope: number;
        if (square > most[n]) {
          const excess = square / most[n] - 1;
          sum += excess * excess;
          slope = (4 * excess) / most[n];
        } else if (square < least[n]) {
          const inverse = 1 / (least[n] + square);
          const excess = 2 * least[n] * inverse - 1;
          sum += excess * excess;
          slope = -8 * excess * least[n] * inverse * inverse;
        } else continue;
        g0 += slope * d0;
        g1 += slope * d1;
        g2 += slope * d2;
        g3 += slope * d3;
        gradient[q] -= slope * d0;
        gradient[q + 1] -= slope * d1;
        gradient[q + 2] -= slope * d2;
        gradient[q + 3] -= slope * d3;
      }
      gradient[p] += g0;
      gradient[p + 1] += g1;
      gradient[p + 2] += g2;
      gradient[p + 3] += g3;
    }
    for (let p = 3; p < 4 * size; p += 4) {
      sum += weights.fourth * x[p] * x[p];
      gradient[p] += 2 * weights.fourth * x[p];
    }
    return sum + addVolumeError(volumes, x, 4, weights.volume, gradient);
  };
}
