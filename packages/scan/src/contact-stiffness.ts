/**
 * How stiffly two atoms that touch without a bond resist being pushed together, for the model Hessian.
 *
 * The second derivative of the buffered 14-7 potential, T. A. Halgren, J. Am. Chem. Soc. 114, 7827 (1992), with radii and well depths rounded
 * by element: the model needs the order of magnitude, of whatever potential it serves.
 */
import { type Coordinates, type Molecule, neighboursOf } from '@tordial/geometry';

/** Half the distance of the minimum, angstrom, and the well depth, kcal/mol, of each kind of atom. */
const KINDS = [
  { radius: 1.5, depth: 0.02 }, // hydrogen
  { radius: 0.6, depth: 0.02 }, // hydrogen on nitrogen, oxygen, fluorine or sulfur: comes close to what it bonds to without touching
  { radius: 1.95, depth: 0.07 }, // carbon
  { radius: 1.85, depth: 0.07 }, // nitrogen
  { radius: 1.75, depth: 0.07 }, // oxygen
  { radius: 1.6, depth: 0.07 }, // fluorine
  { radius: 2.05, depth: 0.07 }, // others
];
const OTHER = KINDS.length - 1;

/** Softer than this a contact does not count, and none is stiffer than that, kcal/mol/angstrom^2. */
const LEAST = 1;
const MOST = 50;

/** Kind of each atom as a partner in contacts. */
export function contactKinds(molecule: Molecule): Uint8Array {
  const { atomicNumbers } = molecule;
  const polar = (i: number) => neighboursOf(molecule, i).some((j) => [7, 8, 9, 16].includes(atomicNumbers[j]));
  return atomicNumbers.map((z, i) => (z === 1 ? (polar(i) ? 1 : 0) : z >= 6 && z <= 9 ? z - 4 : OTHER));
}

/** Squares of the distances (angstrom^2) within which atoms of two kinds touch, row by row. */
const TOUCH = Float64Array.from({ length: KINDS.length ** 2 }, (_, n) => {
  const pair = pairOf(n);
  let low = 0.5;
  let high = 1;
  if (pair.scale * bendOfWell(low) < LEAST) return 0;
  for (let step = 0; step < 40; step++) {
    const middle = (low + high) / 2;
    if (pair.scale * bendOfWell(middle) > LEAST) low = middle;
    else high = middle;
  }
  return (low * pair.size) ** 2;
});

/** Sums of the radii, and what scales the curvature, row by row. */
const SIZE = Float64Array.from(TOUCH, (_, n) => pairOf(n).size);
const SCALE = Float64Array.from(TOUCH, (_, n) => pairOf(n).scale);

function pairOf(n: number): { size: number; scale: number } {
  const a = KINDS[Math.floor(n / KINDS.length)];
  const b = KINDS[n % KINDS.length];
  const size = a.radius + b.radius;
  return { size, scale: Math.sqrt(a.depth * b.depth) / (size * size) };
}

/** Atoms j > i that one or two bonds join to each atom i, ascending: `atom[start[i]] .. atom[start[i + 1] - 1]`. */
export interface BondedRows {
  readonly start: Int32Array;
  readonly atom: Int32Array;
}

/**
 * The pairs i < j of atoms (flat, ascending) that touch at x, or would if they were `margin` angstrom closer, without those that one or two
 * bonds join.
 */
export function contactsAt(kinds: Uint8Array, bonded: BondedRows, x: Coordinates, margin = 0): number[] {
  const count = kinds.length;
  const touch = margin === 0 ? TOUCH : TOUCH.map((square) => (square > 0 ? (Math.sqrt(square) + margin) ** 2 : 0));
  const pairs: number[] = [];
  for (let i = 0; i < count; i++) {
    const row = kinds[i] * KINDS.length;
    const xi = x[3 * i],
      yi = x[3 * i + 1],
      zi = x[3 * i + 2];
    let near = bonded.start[i];
    const end = bonded.start[i + 1];
    for (let j = i + 1; j < count; j++) {
      if (near < end && bonded.atom[near] === j) {
        near++;
        continue;
      }
      const dx = xi - x[3 * j],
        dy = yi - x[3 * j + 1],
        dz = zi - x[3 * j + 2];
      if (dx * dx + dy * dy + dz * dz < touch[row + kinds[j]]) pairs.push(i, j);
    }
  }
  return pairs;
}

/** Stiffness along the line between two atoms of these kinds at a distance (angstrom), kcal/mol/angstrom^2. */
export function contactStiffness(kindI: number, kindJ: number, distance: number): number {
  const pair = kindI * KINDS.length + kindJ;
  return Math.min(MOST, SCALE[pair] * bendOfWell(Math.max(0.5, distance / SIZE[pair])));
}

/** Second derivative of the buffered 14-7 potential with depth 1 at the distance rho, in units of its minimum's. */
function bendOfWell(rho: number): number {
  const b = rho + 0.07;
  const cube = rho * rho * rho;
  const p6 = cube * cube;
  const d = p6 * rho + 0.12;
  const ratio = 1.07 / b;
  const ratio3 = ratio * ratio * ratio;
  const outer = ratio3 * ratio3 * ratio;
  const inner = 1.12 / d - 2;
  const innerSlope = (-7.84 * p6) / (d * d);
  const innerBend = (-7.84 / (d * d)) * ((6 * p6) / rho - (14 * p6 * p6) / d);
  return outer * ((56 / (b * b)) * inner - (14 / b) * innerSlope + innerBend);
}
