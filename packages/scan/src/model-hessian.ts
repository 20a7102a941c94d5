/**
 * A positive definite model of a molecule's Hessian, as a preconditioner for its relaxation.
 *
 *   P = sum over bonds, angles, torsions, planar centres and contacts of k (dq/dx) (dq/dx)^T  +  shift I
 *
 * Stretches and bends stiffen as atoms come closer: rho_ij = exp(alpha_ij (r0_ij^2 - r_ij^2)), k(stretch) = STRETCH rho_ij,
 * k(bend) = BEND rho_ij rho_jk. The stiffness of torsions depends on the kind of bond far more than on distances: each bond has one that is
 * shared out among its torsions.
 *
 * Sources: the decay and its constants, R. Lindh, A. Bernhardsson, G. Karlstrom, P.-A. Malmqvist, Chem. Phys. Lett. 241, 423 (1995), over the
 * molecule's bonds and angles instead of all pairs of atoms; a model from bonding as a preconditioner: L. Mones, C. Ortner, G. Csanyi,
 * Sci. Rep. 8, 13991 (2018). The force constants here are rounded from typical molecular mechanics: a preconditioner changes how fast
 * a relaxation arrives, not where, so they carry no result.
 */
import { angle, type Coordinates, type Molecule, neighboursOf, torsionGradient } from '@tordial/geometry';
import {
  addOuterProduct,
  type BlockMatrix,
  type BlockPattern,
  blockMatrix,
  blockPattern,
  factorise,
  solveFactorised,
} from './block-cholesky.js';
import { contactAtoms, contactsAt } from './contact-stiffness.js';
import type { Preconditioner } from './minimise.js';
import { aromaticAtoms } from './rotors/aromatic-atoms.js';
import { atomShape } from './rotors/atom-shape.js';
import type { Torsion } from './rotors/defining-torsion.js';

/** The internal coordinates of a molecule that its model Hessian is made of, as rows of atoms. Made once a molecule (and rotor). */
export interface ModelHessian {
  readonly bonds: Int32Array;
  readonly angles: Int32Array;
  readonly torsions: Int32Array;
  /** Force constant of each torsion, kcal/mol/radian^2. */
  readonly torsionForces: Float64Array;
  /** Rows of a planar centre and its three neighbours. */
  readonly planes: Int32Array;
  readonly atoms: ReturnType<typeof contactAtoms>;
  /** Pairs i < j, as i * atomCount + j, joined by one or two bonds: no contacts. */
  readonly bonded: ReadonlySet<number>;
  /** Pairs of atoms, flat, that bonds, angles and torsions couple. */
  readonly couplings: readonly number[];
  /** The pattern in use and the contacts that it has room for; grows as new ones are met. */
  readonly room: { pattern: BlockPattern; contacts: Set<number> };
  /** Periods of the table of constants (1, 2, 3) by atom. */
  readonly period: Uint8Array;
  /** Added to the diagonal, kcal/mol/angstrom^2. */
  readonly shift: number;
  /** The torsion that a constraint holds: other torsions on its axis count by how they differ from it. */
  readonly driven: Torsion | null;
}

const BOHR = 0.529177210903;
/** kcal/mol/angstrom^2 and kcal/mol/radian^2 where rho is 1. */
const STRETCH = 650;
const BEND = 75;
/** Resistance of a planar centre to leaving the plane of its neighbours, kcal/mol/angstrom^2: a multiple bond at it, or a lone pair that conjugates. */
const OUT_OF_PLANE = 100;

/** Stiffness of turning about a bond, kcal/mol/radian^2, shared out among the torsions about it. */
const TURN = { aromatic: 60, double: 100, amide: 30, conjugated: 10, planarToOther: 2, other: 10 };

/** Lindh's alpha (1/bohr^2) and r0 (bohr) by the periods of both atoms; later periods count as the third. */
const ALPHA = [1.0, 0.3949, 0.3949, 0.28, 0.28, 0.28];
const REFERENCE = [1.35, 2.1, 2.53, 2.87, 3.4, 3.4];

/** Motions that no internal coordinate of the model resists (the whole molecule's) get this much, kcal/mol/angstrom^2. */
const SHIFT = 0.01;
/** The same where fragments are held against each other by nothing that the model knows. */
const SHIFT_BETWEEN_FRAGMENTS = 1;

/** Lists the internal coordinates. With `driven`, the model is that of the energy minimised with this torsion angle held. */
export function modelHessian(molecule: Molecule, driven: Torsion | null = null): ModelHessian {
  const { atomCount, bonds } = molecule;
  const bondRows: number[] = [];
  const angles: number[] = [];
  const torsions: number[] = [];
  const torsionForces: number[] = [];
  const planes: number[] = [];
  const aromatic = aromaticAtoms(molecule);
  const sharesRing = (b: number, c: number) => molecule.rings.some((ring) => ring.includes(b) && ring.includes(c));
  const planar = Array.from({ length: atomCount }, (_, i) => atomShape(molecule, i) === 'planar');
  for (let n = 0; n < bonds.count; n++) {
    const b = bonds.a[n];
    const c = bonds.b[n];
    bondRows.push(b, c);
    const first = torsions.length;
    for (const a of neighboursOf(molecule, b))
      for (const d of neighboursOf(molecule, c)) if (a !== c && d !== b && a !== d) torsions.push(a, b, c, d);
    const count = (torsions.length - first) / 4;
    const turn = TURN[turningKind(molecule, n, aromatic, planar, sharesRing(b, c))];
    for (let m = 0; m < count; m++) torsionForces.push(turn / count);
  }
  for (let j = 0; j < atomCount; j++) {
    const around = neighboursOf(molecule, j);
    for (let p = 0; p < around.length; p++) for (let q = 0; q < p; q++) angles.push(around[q], j, around[p]);
    if (planar[j]) planes.push(j, ...around);
  }
  const couplings = [...bondRows];
  for (let n = 0; n < angles.length; n += 3) couplings.push(angles[n], angles[n + 2]);
  const bonded: number[] = [];
  for (let n = 0; n < couplings.length; n += 2)
    bonded.push(Math.min(couplings[n], couplings[n + 1]) * atomCount + Math.max(couplings[n], couplings[n + 1]));
  for (let n = 0; n < torsions.length; n += 4) couplings.push(torsions[n], torsions[n + 3]);
  return {
    atoms: contactAtoms(molecule),
    bonded: new Set(bonded),
    couplings,
    room: { pattern: blockPattern(atomCount, couplings), contacts: new Set() },
    bonds: Int32Array.from(bondRows),
    angles: Int32Array.from(angles),
    torsions: Int32Array.from(torsions),
    torsionForces: Float64Array.from(torsionForces),
    planes: Int32Array.from(planes),
    period: molecule.atomicNumbers.map((z) => (z <= 2 ? 1 : z <= 10 ? 2 : 3)),
    shift: fragmentCount(molecule) > 1 ? SHIFT_BETWEEN_FRAGMENTS : SHIFT,
    driven,
  };
}

/** The kind of a bond as far as turning about it goes. */
function turningKind(
  { bonds, atomicNumbers }: Molecule,
  n: number,
  aromatic: Uint8Array,
  planar: readonly boolean[],
  inRing: boolean,
): keyof typeof TURN {
  const b = bonds.a[n];
  const c = bonds.b[n];
  if (aromatic[b] && aromatic[c]) return bonds.order[n] > 1 || inRing ? 'aromatic' : 'conjugated';
  if (bonds.order[n] > 1) return 'double';
  if (planar[b] && planar[c]) return atomicNumbers[b] === 6 && atomicNumbers[c] === 6 ? 'conjugated' : 'amide';
  if (planar[b] || planar[c]) return atomicNumbers[planar[b] ? c : b] === 8 ? 'conjugated' : 'planarToOther';
  return 'other';
}

function fragmentCount(molecule: Molecule): number {
  const seen = new Set<number>();
  let fragments = 0;
  for (let start = 0; start < molecule.atomCount; start++) {
    if (seen.has(start)) continue;
    fragments++;
    const fragment = [start];
    seen.add(start);
    for (const i of fragment)
      for (const j of neighboursOf(molecule, i))
        if (!seen.has(j)) {
          seen.add(j);
          fragment.push(j);
        }
  }
  return fragments;
}

/** How far a stretched or squeezed geometry may move rho from 1: an embedded start is no reason for a wild model. */
const LEAST_DECAY = 0.3;
const MOST_DECAY = 2;

/**
 * How far (angstrom) a coordinate may move before the model is made anew. A stretch is a thousand times as stiff as a turn: a few degrees of
 * misalignment already make soft motions look stiff.
 */
const STALE = 0.05;

/** The model at the geometry x, factored; it is made anew when the geometry that it follows has gone far from there. */
export function preconditionerAt(model: ModelHessian, x: Coordinates): Preconditioner {
  let matrix = blockMatrix(model.room.pattern);
  const work = new Float64Array(x.length);
  const made = new Float64Array(x.length);
  make(x);
  return {
    solve: (v, out) => solveFactorised(matrix, v, out, work),
    follow: (now) => {
      for (let k = 0; k < now.length; k++)
        if (Math.abs(now[k] - made[k]) > STALE) {
          make(now);
          return true;
        }
      return false;
    },
  };

  function make(at: Coordinates): void {
    made.set(at);
    const { pairs, stiffness } = contactsAt(model.atoms, model.bonded, at);
    const pattern = patternFor(model, pairs);
    if (pattern !== matrix.pattern) matrix = blockMatrix(pattern);
    else {
      matrix.below.fill(0);
      matrix.diagonal.fill(0);
    }
    for (let d = 0; d < matrix.diagonal.length; d += 9) for (let k = 0; k < 9; k += 4) matrix.diagonal[d + k] = model.shift;
    addContacts(pairs, stiffness, at, matrix);
    addStretches(model, at, matrix);
    addBends(model, at, matrix);
    addTorsions(model, at, matrix);
    addPlanes(model, at, matrix);
    factorise(matrix, 1e-3 * model.shift);
  }
}

/** The pattern that has room for the contacts: the last one if they all are in it, a new one otherwise. */
function patternFor(model: ModelHessian, pairs: readonly number[]): BlockPattern {
  const { room } = model;
  const count = model.period.length;
  const keys: number[] = [];
  for (let n = 0; n < pairs.length; n += 2) keys.push(pairs[n] * count + pairs[n + 1]);
  if (keys.every((key) => room.contacts.has(key))) return room.pattern;
  // contacts come and go along a scan: what was met before keeps its room, until most of that lies idle
  const kept = room.contacts.size > 2 * keys.length + 20 ? [] : room.contacts;
  room.contacts = new Set([...kept, ...keys]);
  room.pattern = blockPattern(count, [...model.couplings, ...[...room.contacts].flatMap((key) => [Math.floor(key / count), key % count])]);
  return room.pattern;
}

function addContacts(pairs: readonly number[], stiffness: readonly number[], x: Coordinates, matrix: BlockMatrix): void {
  const gradient = new Float64Array(6);
  stiffness.forEach((k, n) => {
    unitVector(x, pairs[2 * n], pairs[2 * n + 1], gradient);
    for (let m = 0; m < 3; m++) gradient[m + 3] = -gradient[m];
    addCoordinate(matrix, pairs, 2 * n, 2, gradient, k);
  });
}

/** Lindh's rho of the atoms i and j. */
function decay({ period }: ModelHessian, x: Coordinates, i: number, j: number): number {
  const low = Math.min(period[i], period[j]);
  const high = Math.max(period[i], period[j]);
  const row = low === 1 ? high - 1 : low + high - 1;
  const dx = x[3 * i] - x[3 * j],
    dy = x[3 * i + 1] - x[3 * j + 1],
    dz = x[3 * i + 2] - x[3 * j + 2];
  const rho = Math.exp(ALPHA[row] * (REFERENCE[row] ** 2 - (dx * dx + dy * dy + dz * dz) / BOHR ** 2));
  return Math.min(Math.max(rho, LEAST_DECAY), MOST_DECAY);
}

/** Adds k g g^T for an internal coordinate with the gradient g, 3 values for each of `count` atoms from `atoms[at]` on. */
function addCoordinate(matrix: BlockMatrix, atoms: ArrayLike<number>, at: number, count: number, gradient: Float64Array, k: number): void {
  for (let p = 0; p < count; p++)
    for (let q = 0; q <= p; q++) addOuterProduct(matrix, atoms[at + p], atoms[at + q], gradient, gradient, 3 * p, 3 * q, k);
}

function addStretches(model: ModelHessian, x: Coordinates, matrix: BlockMatrix): void {
  const gradient = new Float64Array(6);
  for (let n = 0; n < model.bonds.length; n += 2) {
    const i = model.bonds[n];
    const j = model.bonds[n + 1];
    unitVector(x, i, j, gradient);
    for (let k = 0; k < 3; k++) gradient[k + 3] = -gradient[k];
    addCoordinate(matrix, model.bonds, n, 2, gradient, STRETCH * decay(model, x, i, j));
  }
}

/** Writes the unit vector from j to i into out[0..2] and returns the distance. */
function unitVector(x: Coordinates, i: number, j: number, out: Float64Array): number {
  const dx = x[3 * i] - x[3 * j],
    dy = x[3 * i + 1] - x[3 * j + 1],
    dz = x[3 * i + 2] - x[3 * j + 2];
  const r = Math.max(Math.hypot(dx, dy, dz), 1e-3);
  out[0] = dx / r;
  out[1] = dy / r;
  out[2] = dz / r;
  return r;
}

/** Sine of an angle below which it counts as straight and bends in two directions. */
const STRAIGHT = 0.17;

function addBends(model: ModelHessian, x: Coordinates, matrix: BlockMatrix): void {
  const u = new Float64Array(3);
  const v = new Float64Array(3);
  const gradient = new Float64Array(9);
  for (let n = 0; n < model.angles.length; n += 3) {
    const i = model.angles[n],
      j = model.angles[n + 1],
      k = model.angles[n + 2];
    const force = BEND * decay(model, x, i, j) * decay(model, x, j, k);
    const ri = unitVector(x, i, j, u);
    const rk = unitVector(x, k, j, v);
    const cosine = u[0] * v[0] + u[1] * v[1] + u[2] * v[2];
    const sine = Math.sqrt(Math.max(0, 1 - cosine * cosine));
    if (sine > STRAIGHT) {
      for (let m = 0; m < 3; m++) {
        gradient[m] = (cosine * u[m] - v[m]) / (ri * sine);
        gradient[m + 6] = (cosine * v[m] - u[m]) / (rk * sine);
        gradient[m + 3] = -gradient[m] - gradient[m + 6];
      }
      addCoordinate(matrix, model.angles, n, 3, gradient, force);
    } else {
      // a straight angle bends alike in every plane through it: the sum over two directions e is the projector I - u u^T
      for (let m = 0; m < 3; m++) {
        for (let o = 0; o < 3; o++) {
          const e = (m === o ? 1 : 0) - u[m] * u[o];
          gradient[o] = e / ri;
          gradient[o + 6] = (-Math.sign(cosine) * e) / rk;
          gradient[o + 3] = -gradient[o] - gradient[o + 6];
        }
        addCoordinate(matrix, model.angles, n, 3, gradient, force);
      }
    }
  }
}

/** Below this angle (radian) at a middle atom, from 0 or from pi, a torsion is left out. */
const TORSION_UNDEFINED = 0.2;

function addTorsions(model: ModelHessian, x: Coordinates, matrix: BlockMatrix): void {
  const { torsions, driven } = model;
  const gradient = new Float64Array(12);
  const atoms = new Int32Array(8);
  const difference = new Float64Array(24);
  for (let n = 0; n < torsions.length; n += 4) {
    const a = torsions[n],
      b = torsions[n + 1],
      c = torsions[n + 2],
      d = torsions[n + 3];
    if (bent(x, a, b, c) < TORSION_UNDEFINED || bent(x, b, c, d) < TORSION_UNDEFINED) continue;
    const force = model.torsionForces[n / 4];
    torsionGradient(x, a, b, c, d, gradient);
    if (!driven || !sameAxis(b, c, driven)) {
      addCoordinate(matrix, torsions, n, 4, gradient, force);
      continue;
    }
    // held with the driven torsion: only the difference of the two is free to change (a torsion is the same from either end)
    let count = 4;
    for (let p = 0; p < 4; p++) {
      atoms[p] = torsions[n + p];
      for (let k = 0; k < 3; k++) difference[3 * p + k] = gradient[3 * p + k];
    }
    torsionGradient(x, driven[0], driven[1], driven[2], driven[3], gradient);
    for (let p = 0; p < 4; p++) {
      let to = 0;
      while (to < count && atoms[to] !== driven[p]) to++;
      if (to === count) {
        atoms[count++] = driven[p];
        difference.fill(0, 3 * to, 3 * to + 3);
      }
      for (let k = 0; k < 3; k++) difference[3 * to + k] -= gradient[3 * p + k];
    }
    addCoordinate(matrix, atoms, 0, count, difference, force);
  }
}

function addPlanes({ planes }: ModelHessian, x: Coordinates, matrix: BlockMatrix): void {
  const gradient = new Float64Array(12);
  for (let n = 0; n < planes.length; n += 4) {
    const [c, p, q, r] = [3 * planes[n], 3 * planes[n + 1], 3 * planes[n + 2], 3 * planes[n + 3]];
    const ux = x[q] - x[p],
      uy = x[q + 1] - x[p + 1],
      uz = x[q + 2] - x[p + 2];
    const vx = x[r] - x[p],
      vy = x[r + 1] - x[p + 1],
      vz = x[r + 2] - x[p + 2];
    const wx = x[c] - x[p],
      wy = x[c + 1] - x[p + 1],
      wz = x[c + 2] - x[p + 2];
    let nx = uy * vz - uz * vy,
      ny = uz * vx - ux * vz,
      nz = ux * vy - uy * vx;
    const square = nx * nx + ny * ny + nz * nz;
    if (square < 0.1) continue;
    // height of the centre above its neighbours' plane; the plane counts where the centre's foot is, by barycentric weights
    const weightR = ((uy * wz - uz * wy) * nx + (uz * wx - ux * wz) * ny + (ux * wy - uy * wx) * nz) / square;
    const weightQ = ((wy * vz - wz * vy) * nx + (wz * vx - wx * vz) * ny + (wx * vy - wy * vx) * nz) / square;
    const length = Math.sqrt(square);
    nx /= length;
    ny /= length;
    nz /= length;
    [1, weightQ + weightR - 1, -weightQ, -weightR].forEach((weight, m) => {
      gradient[3 * m] = weight * nx;
      gradient[3 * m + 1] = weight * ny;
      gradient[3 * m + 2] = weight * nz;
    });
    addCoordinate(matrix, planes, n, 4, gradient, OUT_OF_PLANE);
  }
}

function bent(x: Coordinates, i: number, j: number, k: number): number {
  const at = angle(x, i, j, k);
  return Math.min(at, Math.PI - at);
}

function sameAxis(b: number, c: number, driven: Torsion): boolean {
  return (b === driven[1] && c === driven[2]) || (b === driven[2] && c === driven[1]);
}
