/** The internal coordinates that a molecule's model Hessian is made of, and how stiff those are that depend on the kind of bond. */
import { type Molecule, neighboursOf } from '@tordial/geometry';
import { type BondedRows, contactKinds } from './contact-stiffness.js';
import { aromaticAtoms } from './rotors/aromatic-atoms.js';
import { atomShape } from './rotors/atom-shape.js';
import type { Torsion } from './rotors/defining-torsion.js';

/** Rows of atoms; made once a molecule and rotor. */
export interface ModelCoordinates {
  readonly atomCount: number;
  readonly bonds: Int32Array;
  /** The atom in the middle stands second; `angleBonds` has the two bonds of each. */
  readonly angles: Int32Array;
  readonly angleBonds: Int32Array;
  readonly torsions: Int32Array;
  /** Force constant of each torsion, kcal/mol/radian^2. */
  readonly torsionForces: Float64Array;
  /**
   * The torsion that a constraint holds, in the direction of its bond, and the others on its axis: only what they differ by is free to change.
   * Each row has the four atoms of such a torsion, which shares one end with the driven one, and that one's other end.
   */
  readonly driven: Torsion | null;
  readonly differences: Int32Array;
  /** Force constant of each difference, kcal/mol/radian^2. */
  readonly differenceForce: number;
  /** A planar centre and its three neighbours. */
  readonly planes: Int32Array;
  /** Periods of the table of constants (1, 2, 3) by atom. */
  readonly period: Uint8Array;
  /** Kinds of atoms as partners in contacts, and the pairs that one or two bonds join: no contacts. */
  readonly contactKinds: Uint8Array;
  readonly bonded: BondedRows;
  readonly fragments: number;
}

/** Stiffness of turning about a bond, kcal/mol/radian^2, shared out among the torsions about it. */
const TURN = { aromatic: 60, double: 100, amide: 30, conjugated: 15, planarToOther: 2, other: 10 };

/**
 * Lists the coordinates. With `driven`, they are those of the energy minimised with this torsion angle held.
 *
 * Of the torsions about a bond only those count that share an end with one of them, the driven one where there is one: bends hold the other
 * ends together, and the fewer atoms a coordinate couples, the sparser the matrix.
 */
export function modelCoordinates(molecule: Molecule, driven: Torsion | null = null): ModelCoordinates {
  const { atomCount, bonds, neighbours } = molecule;
  const torsions: number[] = [];
  const torsionForces: number[] = [];
  const differences: number[] = [];
  let differenceForce = 0;
  let drivenAlong: Torsion | null = null;
  const stiffnessOf = turningStiffness(molecule);
  for (let n = 0; n < bonds.count; n++) {
    const b = bonds.a[n];
    const c = bonds.b[n];
    const about: Torsion[] = [];
    for (const a of neighboursOf(molecule, b))
      for (const d of neighboursOf(molecule, c)) if (a !== c && d !== b && a !== d) about.push([a, b, c, d]);
    if (about.length === 0) continue;
    const onDrivenAxis = driven !== null && Math.min(driven[1], driven[2]) === b && Math.max(driven[1], driven[2]) === c;
    const [front, , , rear]: Torsion = onDrivenAxis && driven[1] === c ? reversed(driven) : onDrivenAxis ? driven : about[0];
    const sharing = about.filter(([a, , , d]) => a === front || d === rear);
    const force = stiffnessOf(n) / sharing.length;
    if (onDrivenAxis) {
      drivenAlong = [front, b, c, rear];
      differenceForce = force;
    }
    for (const torsion of sharing) {
      const [a, , , d] = torsion;
      if (!onDrivenAxis) {
        torsions.push(...torsion);
        torsionForces.push(force);
      } else if (a !== front) differences.push(...torsion, front);
      else if (d !== rear) differences.push(...torsion, rear);
    }
  }

  const angles: number[] = [];
  const angleBonds: number[] = [];
  const planes: number[] = [];
  for (let j = 0; j < atomCount; j++) {
    for (let p = neighbours.start[j]; p < neighbours.start[j + 1]; p++)
      for (let q = neighbours.start[j]; q < p; q++) {
        angles.push(neighbours.atom[q], j, neighbours.atom[p]);
        angleBonds.push(neighbours.bond[q], neighbours.bond[p]);
      }
    if (atomShape(molecule, j) === 'planar') planes.push(j, ...neighboursOf(molecule, j));
  }

  return {
    atomCount,
    bonds: Int32Array.from({ length: 2 * bonds.count }, (_, n) => (n % 2 === 0 ? bonds.a[n >> 1] : bonds.b[n >> 1])),
    angles: Int32Array.from(angles),
    angleBonds: Int32Array.from(angleBonds),
    torsions: Int32Array.from(torsions),
    torsionForces: Float64Array.from(torsionForces),
    driven: drivenAlong,
    differences: Int32Array.from(differences),
    differenceForce,
    planes: Int32Array.from(planes),
    period: molecule.atomicNumbers.map((z) => (z <= 2 ? 1 : z <= 10 ? 2 : 3)),
    contactKinds: contactKinds(molecule),
    bonded: bondedRows(molecule),
    fragments: fragmentCount(molecule),
  };
}

function reversed([i, a, b, j]: Torsion): Torsion {
  return [j, b, a, i];
}

function bondedRows(molecule: Molecule): BondedRows {
  const { atomCount } = molecule;
  const start = new Int32Array(atomCount + 1);
  const atom: number[] = [];
  for (let i = 0; i < atomCount; i++) {
    const reached = new Set<number>();
    for (const j of neighboursOf(molecule, i)) {
      reached.add(j);
      for (const k of neighboursOf(molecule, j)) reached.add(k);
    }
    atom.push(...[...reached].filter((j) => j > i).sort((p, q) => p - q));
    start[i + 1] = atom.length;
  }
  return { start, atom: Int32Array.from(atom) };
}

/** How stiffly the two sides of a bond (by index) resist being turned. */
function turningStiffness(molecule: Molecule): (n: number) => number {
  const { atomicNumbers, bonds, rings } = molecule;
  const aromatic = aromaticAtoms(molecule);
  const planar = Array.from({ length: molecule.atomCount }, (_, i) => atomShape(molecule, i) === 'planar');
  return (n) => {
    const b = bonds.a[n];
    const c = bonds.b[n];
    if (aromatic[b] && aromatic[c])
      return bonds.order[n] > 1 || rings.some((ring) => ring.includes(b) && ring.includes(c)) ? TURN.aromatic : TURN.conjugated;
    if (bonds.order[n] > 1) return TURN.double;
    if (planar[b] && planar[c]) return atomicNumbers[b] === 6 && atomicNumbers[c] === 6 ? TURN.conjugated : TURN.amide;
    if (planar[b] || planar[c]) return atomicNumbers[planar[b] ? c : b] === 8 ? TURN.conjugated : TURN.planarToOther;
    return TURN.other;
  };
}

function fragmentCount(molecule: Molecule): number {
  const seen = new Set<number>();
  let fragments = 0;
  for (let start = 0; start < molecule.atomCount; start++) {
    if (seen.has(start)) continue;
    fragments++;
    const fragment = new Set([start]);
    for (const i of fragment) for (const j of neighboursOf(molecule, i)) fragment.add(j);
    for (const i of fragment) seen.add(i);
  }
  return fragments;
}
