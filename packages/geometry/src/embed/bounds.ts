/**
 * Lower and upper bounds of all distances from the bonding alone: bonds, angles, the span of each torsion, and van der Waals contact.
 *
 * Sources: G. M. Crippen, T. F. Havel, Distance Geometry and Molecular Conformation (1988); J. M. Blaney, J. S. Dixon,
 * Rev. Comput. Chem. 5, 299 (1994). Contact radii: A. Bondi, J. Phys. Chem. 68, 441 (1964), hydrogen 1.1 after R. S. Rowland and
 * R. Taylor, J. Phys. Chem. 100, 7384 (1996).
 */
import type { Molecule } from '../molecule.js';
import type { AngleTable } from './bond-angles.js';
import type { Shapes } from './shapes.js';
import type { DistanceBounds } from './triangle-smoothing.js';
import type { CrossedAxis, FlatBond } from './turning.js';

const CONTACT_RADII: Readonly<Record<number, number>> = {
  1: 1.1,
  5: 1.9,
  6: 1.7,
  7: 1.55,
  8: 1.52,
  9: 1.47,
  14: 2.1,
  15: 1.8,
  16: 1.8,
  17: 1.75,
  33: 1.85,
  34: 1.9,
  35: 1.85,
  53: 1.98,
};
const BOND_TOLERANCE = 0.01;
const TORSION_TOLERANCE = 0.06;
const NO_LIMIT = 1000;
/** Usual length of a cumulated double bond, angstrom. */
const CUMULATED = 1.29;
const TRIGONAL = (2 * Math.PI) / 3;

/** Van der Waals radius, angstrom. */
export function contactRadius(atomicNumber: number): number {
  return CONTACT_RADII[atomicNumber] ?? 2;
}

/** Number of bonds between two atoms, n x n, 255 where more than 254 or unconnected. */
export function bondDistances({ atomCount, neighbours }: Molecule): Uint8Array {
  const apart = new Uint8Array(atomCount * atomCount).fill(255);
  const queue = new Int32Array(atomCount);
  for (let root = 0; root < atomCount; root++) {
    const row = root * atomCount;
    apart[row + root] = 0;
    queue[0] = root;
    let end = 1;
    for (let at = 0; at < end; at++) {
      const i = queue[at];
      if (apart[row + i] >= 254) continue;
      for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++) {
        const j = neighbours.atom[n];
        if (apart[row + j] !== 255) continue;
        apart[row + j] = apart[row + i] + 1;
        queue[end++] = j;
      }
    }
  }
  return apart;
}

/** What the bounds are made from. */
export interface IdealGeometry {
  readonly shapes: Shapes;
  /** Angstrom, one a bond. */
  readonly lengths: Float64Array;
  readonly angles: AngleTable;
  readonly flat: readonly FlatBond[];
  readonly crossed: readonly CrossedAxis[];
  readonly apart: Uint8Array;
}

/** The bounds before smoothing. */
export function distanceBounds(molecule: Molecule, { shapes, lengths, angles, flat, crossed, apart }: IdealGeometry): DistanceBounds {
  const { atomCount: n, atomicNumbers, bonds, neighbours, rings } = molecule;
  const lower = new Float64Array(n * n);
  const upper = new Float64Array(n * n).fill(NO_LIMIT);
  const set = (i: number, j: number, l: number, u: number) => {
    lower[i * n + j] = lower[j * n + i] = l;
    upper[i * n + j] = upper[j * n + i] = u;
  };
  const widen = (i: number, j: number, l: number, u: number) => {
    if (upper[i * n + j] === NO_LIMIT) set(i, j, l, u);
    else set(i, j, Math.min(lower[i * n + j], l), Math.max(upper[i * n + j], u));
  };
  for (let i = 0; i < n; i++) upper[i * n + i] = 0;

  for (let m = 0; m < bonds.count; m++) set(bonds.a[m], bonds.b[m], lengths[m] - BOND_TOLERANCE, lengths[m] + BOND_TOLERANCE);

  const angleAt = new Map<number, number>();
  for (let m = 0; m < angles.count; m++) {
    const [i, j, k] = [angles.i[m], angles.j[m], angles.k[m]];
    angleAt.set((i * n + j) * n + k, m);
    if (apart[i * n + k] < 2) continue;
    const [p, q] = [lengthOf(i, j), lengthOf(j, k)];
    const [theta, spread] = [angles.angle[m], angles.tolerance[m]];
    widen(i, k, side(p, q, Math.max(0.9, theta - spread)), side(p, q, Math.min(Math.PI, theta + spread)));
  }

  const ringBondsOf = rings.filter((ring) => ring.length === 6).map((ring) => new Set(ring));
  const flatAt = new Map(flat.map((entry) => [Math.min(entry.a, entry.b) * n + Math.max(entry.a, entry.b), entry]));
  const spans = new Map<number, [number, number]>();
  for (let m = 0; m < bonds.count; m++) {
    const [j, k] = [bonds.a[m], bonds.b[m]];
    for (let p = neighbours.start[j]; p < neighbours.start[j + 1]; p++)
      for (let q = neighbours.start[k]; q < neighbours.start[k + 1]; q++) {
        const [i, l] = [neighbours.atom[p], neighbours.atom[q]];
        if (i === k || l === j || apart[i * n + l] !== 3) continue;
        const [least, most] = torsionSpan(i, j, k, l);
        const cis = outer(i, j, k, l, least);
        const trans = outer(i, j, k, l, most);
        const key = Math.min(i, l) * n + Math.max(i, l);
        const bounds: [number, number] = [Math.max(0.5, cis - TORSION_TOLERANCE), trans + TORSION_TOLERANCE];
        const before = spans.get(key);
        // several paths: what all of them allow, or anything between when they contradict each other
        if (!before) spans.set(key, bounds);
        else {
          const l2 = Math.max(before[0], bounds[0]);
          const u2 = Math.min(before[1], bounds[1]);
          spans.set(key, l2 <= u2 ? [l2, u2] : [u2, l2]);
        }
      }
  }
  for (const [key, [l, u]] of spans) set(Math.floor(key / n), key % n, l, u);
  for (const { a, b, atA, atB, cis } of flat) if (cis !== null && apart[a * n + b] > 1) spanAxis(a, b, atA, atB, cis ? 0 : Math.PI);
  for (const { a, b, atA, atB } of crossed) for (const p of atA) for (const q of atB) spanAxis(a, b, p, q, Math.PI / 2);

  for (let i = 0; i < n; i++)
    for (let j = 0; j < i; j++) {
      const bondsApart = apart[i * n + j];
      if (bondsApart < 4 || lower[i * n + j] > 0) continue;
      const contact = contactRadius(atomicNumbers[i]) + contactRadius(atomicNumbers[j]);
      set(i, j, contact * (bondsApart === 4 ? 0.7 : bondsApart === 5 ? 0.82 : 0.92) * (mayBond(i, j) ? 0.75 : 1), upper[i * n + j]);
    }
  return { size: n, lower, upper };

  function lengthOf(i: number, j: number): number {
    for (let m = neighbours.start[i]; m < neighbours.start[i + 1]; m++) if (neighbours.atom[m] === j) return lengths[neighbours.bond[m]];
    return 0;
  }
  function theta(i: number, j: number, k: number): number {
    const m = angleAt.get((Math.min(i, k) * n + j) * n + Math.max(i, k));
    return m === undefined ? Math.PI : angles.angle[m];
  }
  /** Distance of the ends of i-j-k-l at a torsion angle. */
  function outer(i: number, j: number, k: number, l: number, torsion: number): number {
    const [p, q, r] = [lengthOf(i, j), lengthOf(j, k), lengthOf(k, l)];
    const [first, second] = [theta(i, j, k), theta(j, k, l)];
    const along = q - p * Math.cos(first) - r * Math.cos(second);
    const [up, over] = [p * Math.sin(first), r * Math.sin(second)];
    return Math.sqrt(Math.max(0, along * along + up * up + over * over - 2 * up * over * Math.cos(torsion)));
  }
  /** Least and largest size of the torsion angle, radians. */
  function torsionSpan(i: number, j: number, k: number, l: number): [number, number] {
    const entry = flatAt.get(Math.min(j, k) * n + Math.max(j, k));
    if (entry && entry.cis !== null) {
      const [atJ, atK] = entry.a === j ? [entry.atA, entry.atB] : [entry.atB, entry.atA];
      const cis = (i === atJ) === (l === atK) ? entry.cis : !entry.cis;
      return cis ? [0, 0] : [Math.PI, Math.PI];
    }
    if (shapes.steric[j] === 4 && shapes.steric[k] === 4)
      for (const ring of ringBondsOf) if (ring.has(i) && ring.has(j) && ring.has(k) && ring.has(l)) return [0, 1.3];
    return [0, Math.PI];
  }
  /** Distance of the substituents p and q at the ends of a straight axis a ... b, at a torsion angle. */
  function spanAxis(a: number, b: number, p: number, q: number, torsion: number): void {
    if (apart[p * n + q] !== apart[a * n + b] + 2) return;
    const known = upper[a * n + b] < NO_LIMIT;
    const length = known ? (lower[a * n + b] + upper[a * n + b]) / 2 : CUMULATED * apart[a * n + b];
    const [first, second] = [lengthOf(p, a), lengthOf(q, b)];
    const [up, over] = [first * Math.sin(TRIGONAL), second * Math.sin(TRIGONAL)];
    const along = length - (first + second) * Math.cos(TRIGONAL);
    const distance = Math.sqrt(along * along + up * up + over * over - 2 * up * over * Math.cos(torsion));
    set(p, q, distance - 0.15, distance + 0.15);
  }
  /** A hydrogen on N or O in front of N, O or a halogen: a hydrogen bond is shorter than contact. */
  function mayBond(i: number, j: number): boolean {
    const [h, acceptor] = atomicNumbers[i] === 1 ? [i, j] : [j, i];
    if (atomicNumbers[h] !== 1 || neighbours.start[h + 1] === neighbours.start[h]) return false;
    const donor = atomicNumbers[neighbours.atom[neighbours.start[h]]];
    return (donor === 7 || donor === 8) && [7, 8, 9].includes(atomicNumbers[acceptor]);
  }
}

/** Third side of a triangle. */
function side(p: number, q: number, angle: number): number {
  return Math.sqrt(p * p + q * q - 2 * p * q * Math.cos(angle));
}
