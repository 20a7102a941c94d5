/** Standard positions for hydrogens that a three-dimensional input leaves out. */
import { covalentRadius } from './elements.js';
import { type Coordinates, type Molecule, neighboursOf } from './molecule.js';

type Vector = readonly [number, number, number];

const TETRAHEDRAL = Math.acos(-1 / 3);
const TRIGONAL = (2 * Math.PI) / 3;

/**
 * Writes positions of the atoms from `firstAdded` on (hydrogens with one neighbour each) into `coordinates` (angstrom, 3 per atom; the atoms
 * before are given). Bond lengths are sums of covalent radii; directions those of a tetrahedral, trigonal or linear atom, away from
 * the bonds that are there and staggered to what lies behind a single neighbour.
 */
export function placeHydrogens(molecule: Molecule, coordinates: Coordinates, firstAdded: number): void {
  for (let i = 0; i < firstAdded; i++) {
    const around = [...neighboursOf(molecule, i)];
    const added = around.filter((j) => j >= firstAdded);
    if (added.length === 0) continue;
    const known = around.filter((j) => j < firstAdded).map((j) => unit(between(coordinates, i, j)));
    const directions = openDirections(molecule, coordinates, i, known, added.length, firstAdded);
    const length = covalentRadius(molecule.atomicNumbers[i]) + covalentRadius(1);
    added.forEach((hydrogen, n) => {
      for (let axis = 0; axis < 3; axis++) coordinates[3 * hydrogen + axis] = coordinates[3 * i + axis] + length * directions[n][axis];
    });
  }
}

/** `count` directions for new bonds of atom i beside the unit vectors of its known ones. */
function openDirections(
  molecule: Molecule,
  x: Coordinates,
  i: number,
  known: readonly Vector[],
  count: number,
  firstAdded: number,
): Vector[] {
  const shape = shapeOf(molecule, i);
  if (known.length === 0)
    return [[1, 1, 1] as const, [-1, -1, 1] as const, [-1, 1, -1] as const, [1, -1, -1] as const].map(unit).slice(0, count);
  if (known.length === 1) {
    const [bond] = known;
    if (shape === 'linear') return [scale(bond, -1)];
    const side = sideways(molecule, x, i, bond, firstAdded);
    const other = cross(bond, side);
    const [angle, step] = shape === 'trigonal' ? [TRIGONAL, Math.PI] : [TETRAHEDRAL, TRIGONAL];
    return Array.from({ length: count }, (_, n) => {
      const turn = n * step;
      const outward = add(scale(side, Math.cos(turn)), scale(other, Math.sin(turn)));
      return add(scale(bond, Math.cos(angle)), scale(outward, Math.sin(angle)));
    });
  }
  const sum = known.reduce(add);
  const normal = unit(cross(known[0], known[1]));
  const away = norm(sum) > 0.2 ? scale(unit(sum), -1) : normal;
  if (known.length === 2 && count === 2) {
    const half = TETRAHEDRAL / 2;
    return [1, -1].map((sign) => add(scale(away, Math.cos(half)), scale(normal, sign * Math.sin(half))));
  }
  if (known.length === 2 && count === 1 && shape === 'tetrahedral')
    return [unit(add(scale(away, Math.cos(TETRAHEDRAL / 2)), scale(normal, Math.sin(TETRAHEDRAL / 2))))];
  if (count === 1) return [away];
  // hypervalent centres: spread about the open side
  return Array.from({ length: count }, (_, n) => unit(add(away, scale(normal, n - (count - 1) / 2))));
}

/** Trigonal atoms have a double bond, or are N or O beside one. */
function shapeOf(molecule: Molecule, i: number): 'linear' | 'trigonal' | 'tetrahedral' {
  const { neighbours, bonds, atomicNumbers } = molecule;
  const orders = (j: number) => Array.from(neighbours.bond.subarray(neighbours.start[j], neighbours.start[j + 1]), (n) => bonds.order[n]);
  const own = orders(i);
  if (own.includes(3) || own.filter((order) => order === 2).length > 1) return 'linear';
  if (own.includes(2)) return 'trigonal';
  const lonePair = atomicNumbers[i] === 7 || atomicNumbers[i] === 8;
  return lonePair && own.length < 4 && neighboursOf(molecule, i).some((j) => orders(j).some((order) => order > 1))
    ? 'trigonal'
    : 'tetrahedral';
}

/** Unit vector across the only bond of atom i, anti to the first bond behind it. */
function sideways(molecule: Molecule, x: Coordinates, i: number, bond: Vector, firstAdded: number): Vector {
  const partner = neighboursOf(molecule, i)[0];
  for (const j of neighboursOf(molecule, partner)) {
    if (j === i || j >= firstAdded) continue;
    const across = reject(between(x, partner, j), bond);
    if (norm(across) > 1e-3) return scale(unit(across), -1);
  }
  const axis: Vector = Math.abs(bond[0]) < 0.6 ? [1, 0, 0] : [0, 1, 0];
  return unit(reject(axis, bond));
}

const between = (x: Coordinates, i: number, j: number): Vector => [
  x[3 * j] - x[3 * i],
  x[3 * j + 1] - x[3 * i + 1],
  x[3 * j + 2] - x[3 * i + 2],
];
const add = (u: Vector, v: Vector): Vector => [u[0] + v[0], u[1] + v[1], u[2] + v[2]];
const scale = (u: Vector, s: number): Vector => [s * u[0], s * u[1], s * u[2]];
const norm = (u: Vector): number => Math.hypot(...u);
const unit = (u: Vector): Vector => scale(u, 1 / (norm(u) || 1));
const dot = (u: Vector, v: Vector): number => u[0] * v[0] + u[1] * v[1] + u[2] * v[2];
const reject = (u: Vector, along: Vector): Vector => add(u, scale(along, -dot(u, along)));
const cross = (u: Vector, v: Vector): Vector => [u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]];
