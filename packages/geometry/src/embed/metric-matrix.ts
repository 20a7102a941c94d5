/**
 * From distances to coordinates: the metric matrix of scalar products about the centroid, its leading eigenvectors by
 * orthogonal iteration, each scaled by the square root of its eigenvalue.
 *
 * Sources: G. M. Crippen, T. F. Havel, Acta Crystallogr. A 34, 282 (1978); J. M. Blaney, J. S. Dixon, Rev. Comput. Chem. 5, 299 (1994).
 */
import type { Random } from '../random.js';
import type { DistanceBounds } from './triangle-smoothing.js';

const DIMENSIONS = 4;
const ITERATIONS = 24;

/** Coordinates in four dimensions (4 values an atom, angstrom) for distances drawn evenly between their bounds. */
export function embedDistances({ size: n, lower, upper }: DistanceBounds, random: Random): Float64Array {
  const metric = new Float64Array(n * n);
  const toCentroid = new Float64Array(n);
  let total = 0;
  for (let i = 0; i < n; i++)
    for (let j = 0; j < i; j++) {
      const distance = lower[i * n + j] + random.uniform() * (upper[i * n + j] - lower[i * n + j]);
      const square = distance * distance;
      metric[i * n + j] = metric[j * n + i] = square;
      toCentroid[i] += square;
      toCentroid[j] += square;
      total += square;
    }
  for (let i = 0; i < n; i++) toCentroid[i] = toCentroid[i] / n - total / (n * n);
  for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) metric[i * n + j] = (toCentroid[i] + toCentroid[j] - metric[i * n + j]) / 2;

  const dimensions = Math.min(DIMENSIONS, n);
  let basis: Float64Array[] = Array.from({ length: dimensions }, () => Float64Array.from({ length: n }, () => random.normal()));
  orthonormalise(basis);
  const eigenvalues = new Float64Array(dimensions);
  for (let iteration = 0; iteration < ITERATIONS; iteration++) {
    const images = basis.map((vector) => multiply(metric, vector, n));
    basis.forEach((vector, d) => {
      eigenvalues[d] = dot(vector, images[d]);
    });
    orthonormalise(images);
    basis = images;
  }

  const x = new Float64Array(DIMENSIONS * n);
  for (let d = 0; d < dimensions; d++) {
    // an eigenvalue that is not positive carries no distance: a little noise keeps that dimension open
    const scale = eigenvalues[d] > 1e-6 ? Math.sqrt(eigenvalues[d]) : 0;
    for (let i = 0; i < n; i++) x[DIMENSIONS * i + d] = scale > 0 ? scale * basis[d][i] : 0.1 * random.normal();
  }
  return x;
}

/** Coordinates in four dimensions, evenly in a box whose edge (angstrom) grows with the molecule; for when drawn distances lead nowhere. */
export function randomCoordinates(size: number, random: Random): Float64Array {
  const edge = 5 * Math.cbrt(size);
  return Float64Array.from({ length: DIMENSIONS * size }, () => edge * (random.uniform() - 0.5));
}

function multiply(matrix: Float64Array, vector: Float64Array, n: number): Float64Array {
  const product = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    let sum = 0;
    const row = i * n;
    for (let j = 0; j < n; j++) sum += matrix[row + j] * vector[j];
    product[i] = sum;
  }
  return product;
}

function dot(p: Float64Array, q: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < p.length; i++) sum += p[i] * q[i];
  return sum;
}

function orthonormalise(vectors: Float64Array[]): void {
  vectors.forEach((vector, d) => {
    for (let e = 0; e < d; e++) {
      const along = dot(vector, vectors[e]);
      for (let i = 0; i < vector.length; i++) vector[i] -= along * vectors[e][i];
    }
    const norm = Math.sqrt(dot(vector, vector));
    for (let i = 0; i < vector.length; i++) vector[i] = norm > 1e-12 ? vector[i] / norm : 0;
  });
}
