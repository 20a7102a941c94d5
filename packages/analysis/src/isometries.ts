/**
 * Relabellings that lay one structure on another: the geometric side of symmetry.
 *
 * An atom of one structure may go where an atom of the same kind stands in the other when all distances agree. Distances know no
 * handedness, so each relabelling is superposed as it is and mirrored: proper, improper, or either where the structure is planar.
 * Source: backtracking over the distance matrix (J. R. Ullmann, J. ACM 23, 31 (1976)), superposition as in `superpose`.
 */
import { type Coordinates, leastRmsd, TordialError } from '@tordial/geometry';

/** One relabelling: atom i of the first structure goes where atom `image[i]` of the second is. */
export interface Isometry {
  readonly image: Int32Array;
  /** A rotation and a translation do it. */
  readonly proper: boolean;
  /** A reflection does it. */
  readonly improper: boolean;
}

export interface IsometryOptions {
  /** Largest difference of a distance and largest root mean square distance after superposition, angstrom; 0.1 when left out. */
  readonly tolerance?: number;
  /** Stop after so many; 10,000 when left out. */
  readonly limit?: number;
}

/**
 * All isometries from structure `from` to structure `to` (3 values an atom, angstrom) that keep `kinds` (one number an atom: its atomic
 * number, or its symmetry class where the bonds count as well). Throws `analysis/isometry` on arrays of different length.
 */
export function isometries(from: Coordinates, to: Coordinates, kinds: ArrayLike<number>, options: IsometryOptions = {}): Isometry[] {
  const { tolerance = 0.1, limit = 10_000 } = options;
  const count = kinds.length;
  if (from.length !== 3 * count || to.length !== 3 * count)
    throw new TordialError('analysis/isometry', `structures of ${from.length / 3} and ${to.length / 3} atoms for ${count} kinds of atom`);
  const distancesFrom = distanceMatrix(from, count);
  const distancesTo = from === to ? distancesFrom : distanceMatrix(to, count);
  const order = rarestFirst(kinds);
  const image = new Int32Array(count).fill(-1);
  const taken = new Uint8Array(count);
  const mirrored = to.map((value, n) => (n % 3 === 0 ? -value : value));
  const found: Isometry[] = [];
  place(0);
  return found;

  function place(level: number): void {
    if (found.length >= limit) return;
    if (level === count) {
      const proper = leastRmsd(to, from, { image }) <= tolerance;
      const improper = leastRmsd(mirrored, from, { image }) <= tolerance;
      if (proper || improper) found.push({ image: image.slice(), proper, improper });
      return;
    }
    const atom = order[level];
    for (let target = 0; target < count; target++) {
      if (taken[target] || kinds[target] !== kinds[atom] || !fits(atom, target, level)) continue;
      image[atom] = target;
      taken[target] = 1;
      place(level + 1);
      taken[target] = 0;
      image[atom] = -1;
    }
  }
  function fits(atom: number, target: number, level: number): boolean {
    for (let n = 0; n < level; n++) {
      const placed = order[n];
      if (Math.abs(distancesFrom[atom * count + placed] - distancesTo[target * count + image[placed]]) > tolerance) return false;
    }
    return true;
  }
}

function distanceMatrix(x: Coordinates, count: number): Float64Array {
  const matrix = new Float64Array(count * count);
  for (let i = 0; i < count; i++)
    for (let j = 0; j < i; j++) {
      const d = Math.hypot(x[3 * i] - x[3 * j], x[3 * i + 1] - x[3 * j + 1], x[3 * i + 2] - x[3 * j + 2]);
      matrix[i * count + j] = d;
      matrix[j * count + i] = d;
    }
  return matrix;
}

/** Atoms of rare kinds first: they have the fewest places to go. */
function rarestFirst(kinds: ArrayLike<number>): Int32Array {
  const frequency = new Map<number, number>();
  for (let i = 0; i < kinds.length; i++) frequency.set(kinds[i], (frequency.get(kinds[i]) ?? 0) + 1);
  const often = (i: number): number => frequency.get(kinds[i]) ?? 0;
  return Int32Array.from({ length: kinds.length }, (_, i) => i).sort((i, j) => often(i) - often(j) || kinds[i] - kinds[j] || i - j);
}
