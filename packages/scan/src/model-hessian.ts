/**
 * A positive definite model of a molecule's Hessian, as a preconditioner for its relaxation.
 *
 *   P = sum over bonds, angles and torsions of k (dq/dx) (dq/dx)^T  +  shift I
 *
 * The force constants fall off with distance: rho_ij = exp(alpha_ij (r0_ij^2 - r_ij^2)), k(stretch) = 0.45 rho_ij,
 * k(bend) = 0.15 rho_ij rho_jk, k(torsion) = 0.005 rho_ij rho_jk rho_kl hartree per bohr^2 or radian^2.
 *
 * Source: R. Lindh, A. Bernhardsson, G. Karlstrom, P.-A. Malmqvist, Chem. Phys. Lett. 241, 423 (1995), over the molecule's bonds, angles and
 * torsions instead of all pairs of atoms; as a preconditioner: L. Mones, C. Ortner, G. Csanyi, Sci. Rep. 8, 13991 (2018).
 * A preconditioner changes how fast a relaxation arrives, not where: its constants carry no result.
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
import type { Preconditioner } from './minimise.js';
import type { Torsion } from './rotors/defining-torsion.js';

/** The internal coordinates of a molecule that its model Hessian is made of, as rows of atoms. Made once a molecule (and rotor). */
export interface ModelHessian {
  readonly pattern: BlockPattern;
  readonly bonds: Int32Array;
  readonly angles: Int32Array;
  readonly torsions: Int32Array;
  /** Kekule orders of the torsions' middle bonds. */
  readonly middleOrders: Float64Array;
  /** Periods of the table of constants (1, 2, 3) by atom. */
  readonly period: Uint8Array;
  /** Added to the diagonal, kcal/mol/angstrom^2. */
  readonly shift: number;
  /** The torsion that a constraint holds: other torsions on its axis count by how they differ from it. */
  readonly driven: Torsion | null;
}

const BOHR = 0.529177210903;
const HARTREE = 627.5094740631;
const STRETCH = (0.45 * HARTREE) / BOHR ** 2;
const BEND = 0.15 * HARTREE;
const TORSION = 0.005 * HARTREE;
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
  const orders: number[] = [];
  for (let n = 0; n < bonds.count; n++) {
    const b = bonds.a[n];
    const c = bonds.b[n];
    bondRows.push(b, c);
    for (const a of neighboursOf(molecule, b))
      for (const d of neighboursOf(molecule, c)) {
        if (a === c || d === b || a === d) continue;
        torsions.push(a, b, c, d);
        orders.push(bonds.order[n]);
      }
  }
  for (let j = 0; j < atomCount; j++) {
    const around = neighboursOf(molecule, j);
    for (let p = 0; p < around.length; p++) for (let q = 0; q < p; q++) angles.push(around[q], j, around[p]);
  }
  const couplings = [...bondRows];
  for (let n = 0; n < angles.length; n += 3) couplings.push(angles[n], angles[n + 2]);
  for (let n = 0; n < torsions.length; n += 4) couplings.push(torsions[n], torsions[n + 3]);
  return {
    pattern: blockPattern(atomCount, couplings),
    bonds: Int32Array.from(bondRows),
    angles: Int32Array.from(angles),
    torsions: Int32Array.from(torsions),
    middleOrders: Float64Array.from(orders),
    period: molecule.atomicNumbers.map((z) => (z <= 2 ? 1 : z <= 10 ? 2 : 3)),
    shift: fragmentCount(molecule) > 1 ? SHIFT_BETWEEN_FRAGMENTS : SHIFT,
    driven,
  };
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

/** How far (angstrom) a coordinate may move before the model is made anew. */
const STALE = 0.4;

/** The model at the geometry x, factored; it is made anew when the geometry that it follows has gone far from there. */
export function preconditionerAt(model: ModelHessian, x: Coordinates): Preconditioner {
  const matrix = blockMatrix(model.pattern);
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
    matrix.below.fill(0);
    matrix.diagonal.fill(0);
    for (let d = 0; d < matrix.diagonal.length; d += 9) for (let k = 0; k < 9; k += 4) matrix.diagonal[d + k] = model.shift;
    addStretches(model, at, matrix);
    addBends(model, at, matrix);
    addTorsions(model, at, matrix);
    factorise(matrix, 1e-3 * model.shift);
  }
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
    const force = TORSION * decay(model, x, a, b) * decay(model, x, b, c) * decay(model, x, c, d);
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

function bent(x: Coordinates, i: number, j: number, k: number): number {
  const at = angle(x, i, j, k);
  return Math.min(at, Math.PI - at);
}

function sameAxis(b: number, c: number, driven: Torsion): boolean {
  return (b === driven[1] && c === driven[2]) || (b === driven[2] && c === driven[1]);
}
