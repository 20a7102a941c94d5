/** Point group of a geometry in Schoenflies notation. */
import { type Coordinates, superpose } from '@tordial/geometry';
import { inertia } from './hindered-rotor/reduced-moment.js';
import { isometries } from './isometries.js';

/** Cosine of the angle within which two directions count as parallel. */
const PARALLEL = 0.99;

/** Highest order of a rotation axis that is told from a general turn. */
const HIGHEST_AXIS = 24;

interface Operation {
  /** Order of the rotation: 1 for the identity, or of the rotation that remains when an improper operation is followed by an inversion. */
  readonly order: number;
  /** Unit vector along the axis; zero for the identity and the inversion. */
  readonly axis: readonly [number, number, number];
}

/**
 * Point group of a geometry (3 values an atom, angstrom), 'C2v' or 'D3h' say, from the operations that lay it on itself within
 * `tolerance` (angstrom, 0.1 when left out); 'Kh' for a single atom. Equal atoms are those of equal atomic number.
 *
 * Source: the decision tree over the operations in F. A. Cotton, Chemical Applications of Group Theory, 3rd ed., Wiley 1990, section 3.14.
 */
export function pointGroup(x: Coordinates, atomicNumbers: ArrayLike<number>, tolerance = 0.1): string {
  const count = atomicNumbers.length;
  if (count === 1) return 'Kh';
  const found = isometries(x, x, atomicNumbers, { tolerance });
  const { moments } = inertia(x, new Float64Array(count).fill(1));
  if (!(moments[0] > 1e-6 * moments[2])) return found.some(({ image }) => image.some((target, i) => target !== i)) ? 'Dinfh' : 'Cinfv';

  const mirrored = x.map((value, n) => (n % 3 === 0 ? -value : value));
  const rotations: Operation[] = [];
  const improper: Operation[] = [];
  for (const isometry of found) {
    if (isometry.proper) rotations.push(operation(superpose(x, x, { image: isometry.image }).rotation));
    // R M with M the mirror used; the inversion that follows makes it the rotation -R M
    if (isometry.improper)
      improper.push(
        operation(superpose(mirrored, x, { image: isometry.image }).rotation.map((value, n) => (n % 3 === 0 ? value : -value))),
      );
  }
  const size = rotations.length;
  const inversion = improper.some(({ order }) => order === 1);
  const highest = Math.max(...rotations.map(({ order }) => order));

  // the rotations of a tetrahedron, an octahedron, an icosahedron
  if (size === 12 && highest === 3) return improper.length === 0 ? 'T' : inversion ? 'Th' : 'Td';
  if (size === 24 && highest === 4) return inversion ? 'Oh' : 'O';
  if (size === 60) return inversion ? 'Ih' : 'I';

  if (highest === 1) return improper.length === 0 ? 'C1' : inversion ? 'Ci' : 'Cs';
  const dihedral = size === 2 * highest;
  const family = dihedral ? 'D' : 'C';
  if (improper.length === 0) return `${family}${highest}`;
  // a reflection followed by an inversion is a twofold rotation about the plane's normal
  const planes = improper.filter(({ order }) => order === 2).map(({ axis }) => axis);
  const principals = rotations.filter(({ order }) => order === highest).map(({ axis }) => axis);
  const across = planes.some((normal) => principals.some((axis) => parallel(normal, axis)));
  if (dihedral) {
    // D2 has three axes of highest order and, with planes, is D2h when there is an inversion
    const horizontal = highest === 2 ? inversion : across;
    return `D${highest}${horizontal ? 'h' : 'd'}`;
  }
  if (across) return `C${highest}h`;
  return planes.length > 0 ? `C${highest}v` : `S${2 * highest}`;
}

function parallel(p: readonly number[], q: readonly number[]): boolean {
  return Math.abs(p[0] * q[0] + p[1] * q[1] + p[2] * q[2]) > PARALLEL;
}

/** Order and axis of a rotation matrix (row-major). */
function operation(r: Float64Array): Operation {
  const angle = Math.acos(Math.min(1, Math.max(-1, (r[0] + r[4] + r[8] - 1) / 2)));
  const order = orderOf(angle);
  if (order === 1) return { order, axis: [0, 0, 0] };
  // the symmetric part is (1 - cos) u u^T + cos 1, whose largest column points along the axis; it serves up to a half turn
  const cosine = Math.cos(angle);
  const columns = [0, 1, 2].map((k) => [0, 1, 2].map((m) => (r[3 * k + m] + r[3 * m + k]) / 2 - (k === m ? cosine : 0)));
  const [u, v, w] = columns.toSorted((p, q) => Math.hypot(...q) - Math.hypot(...p))[0];
  const length = Math.hypot(u, v, w);
  return { order, axis: [u / length, v / length, w / length] };
}

/** The lowest n for which n times the angle is a whole number of turns, within what the tolerance on distances leaves open. */
function orderOf(angle: number): number {
  for (let n = 1; n <= HIGHEST_AXIS; n++) {
    const turns = (n * angle) / (2 * Math.PI);
    if (Math.abs(turns - Math.round(turns)) < 0.02 * n) return n;
  }
  return HIGHEST_AXIS + 1;
}
