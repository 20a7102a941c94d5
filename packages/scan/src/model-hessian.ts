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
import { type Coordinates, type Molecule, torsionGradient } from '@tordial/geometry';
import { type BlockPattern, blockAt, blockMatrix, blockPattern, factorise, solveFactorised } from './block-cholesky.js';
import { contactStiffness, contactsAt } from './contact-stiffness.js';
import { type ModelCoordinates, modelCoordinates } from './model-coordinates.js';
import type { Preconditioner } from './preconditioner.js';
import type { Torsion } from './rotors/defining-torsion.js';

const BOHR = 0.529177210903;
/** kcal/mol/angstrom^2 and kcal/mol/radian^2 where rho is 1. */
const STRETCH = 650;
const BEND = 85;
/** Resistance of a planar centre to leaving the plane of its neighbours, kcal/mol/angstrom^2. */
const OUT_OF_PLANE = 160;
/** Motions that no internal coordinate resists (the whole molecule's) get this much, kcal/mol/angstrom^2; more where fragments are not held together. */
const SHIFT = 0.01;
const SHIFT_BETWEEN_FRAGMENTS = 1;

/** Lindh's alpha (1/bohr^2) and r0 (bohr) by the periods of both atoms; later periods count as the third. */
const ALPHA = [1.0, 0.3949, 0.3949, 0.28, 0.28, 0.28];
const REFERENCE = [1.35, 2.1, 2.53, 2.87, 3.4, 3.4];
/** How far a stretched or squeezed geometry may move rho from 1: an embedded start is no reason for a wild model. */
const LEAST_DECAY = 0.3;
const MOST_DECAY = 3;

/** Sine of an angle below which it counts as straight: it bends in two directions, and torsions over it are left out. */
const STRAIGHT = 0.17;
/** Square of a torsion's slope (radian^2/angstrom^2) at an end atom, above which an angle within it is that straight. */
const STEEP = 36;

/**
 * How far (angstrom) the end of a bond may move against its start before the model is made anew. A stretch is a thousand times as stiff as a
 * turn: a few degrees of misalignment already make soft motions look stiff. What moves along as a whole does not count.
 */
const STALE = 0.03;
/** Pairs this much (angstrom) too far apart to touch get room in the matrix as well, so that its pattern need not change at each step. */
const ROOM = 0.2;
/** So many times the contacts at hand may have room. */
const IDLE = 1.5;

/**
 * Coordinates of one kind, `width` atoms a row, with the blocks of the matrix that they add to: for each pair p >= q of a row's atoms 64 times
 * the offset, plus 8 times the place in the row of the atom that is the block's row, plus that of its column's.
 */
interface Placed {
  readonly atoms: Int32Array;
  readonly blocks: Int32Array;
}

/**
 * The model Hessian of a molecule as a preconditioner, for a free relaxation or for one with the torsion `driven` held.
 * It is made at the first geometry that it follows, and anew whenever an atom has gone far from there.
 */
export function modelHessian(molecule: Molecule, driven: Torsion | null = null): Required<Preconditioner> {
  const model = modelCoordinates(molecule, driven);
  const { atomCount, bonds } = model;
  const couplings = couplingsOf(model);
  const shift = model.fragments > 1 ? SHIFT_BETWEEN_FRAGMENTS : SHIFT;
  const work = new Float64Array(3 * atomCount);
  const made = new Float64Array(3 * atomCount);
  const rho = new Float64Array(bonds.length / 2);
  let ready = false;
  let room: readonly number[] = [];
  let layout = layOut();

  /** A matrix with room for the coordinates, and where they stand in it. */
  function layOut() {
    const pattern = blockPattern(atomCount, [...couplings, ...room]);
    return {
      matrix: blockMatrix(pattern),
      bonds: placedIn(pattern, bonds, 2),
      angles: placedIn(pattern, model.angles, 3),
      torsions: placedIn(pattern, model.torsions, 4),
      differences: placedIn(pattern, model.differences, 5),
      planes: placedIn(pattern, model.planes, 4),
      contacts: placedIn(pattern, room, 2),
    };
  }

  function make(x: Coordinates): void {
    made.set(x);
    const contacts = contactsAt(model.contactKinds, model.bonded, x);
    if (!isAmong(contacts, room)) makeRoom(x);
    const { values } = layout.matrix;
    values.fill(0);
    for (let d = 0; d < 9 * atomCount; d += 9) values[d] = values[d + 4] = values[d + 8] = shift;
    addContacts(model, layout.contacts, contacts, x, values);
    addStretches(model, layout.bonds, x, rho, values);
    addBends(model, layout.angles, x, rho, values);
    addTorsions(model, layout.torsions, x, values);
    addDifferences(model, layout.differences, x, values);
    addPlanes(layout.planes, x, values);
    factorise(layout.matrix, 1e-3 * shift);
  }

  function isStale(x: Coordinates): boolean {
    for (let n = 0; n < bonds.length; n += 2) {
      const i = 3 * bonds[n],
        j = 3 * bonds[n + 1];
      for (let k = 0; k < 3; k++) if (Math.abs(x[i + k] - x[j + k] - made[i + k] + made[j + k]) > STALE) return true;
    }
    return false;
  }

  /** Contacts come and go along a scan: those met before keep their room, until most of it lies idle. */
  function makeRoom(x: Coordinates): void {
    const near = contactsAt(model.contactKinds, model.bonded, x, ROOM);
    room = room.length > IDLE * near.length ? near : merged(near, room, atomCount);
    layout = layOut();
  }

  return {
    solve: (v, out) => solveFactorised(layout.matrix, v, out, work),
    follow: (x) => {
      if (ready && !isStale(x)) return false;
      make(x);
      ready = true;
      return true;
    },
  };
}

/** Pairs of atoms, flat, that share a coordinate. */
function couplingsOf({ bonds, angles, torsions, differences }: ModelCoordinates): number[] {
  const pairs = [...bonds];
  for (let n = 0; n < angles.length; n += 3) pairs.push(angles[n], angles[n + 2]);
  for (let n = 0; n < torsions.length; n += 4) pairs.push(torsions[n], torsions[n + 3]);
  for (let n = 0; n < differences.length; n += 5)
    for (let p = 1; p < 5; p++) for (let q = 0; q < p; q++) pairs.push(differences[n + q], differences[n + p]);
  return pairs;
}

/** Whether each of some pairs (flat, ascending) is one of others. */
function isAmong(pairs: readonly number[], others: readonly number[]): boolean {
  let at = 0;
  for (let n = 0; n < pairs.length; n += 2, at += 2) {
    while (at < others.length && (others[at] !== pairs[n] || others[at + 1] !== pairs[n + 1])) at += 2;
    if (at >= others.length) return false;
  }
  return true;
}

/** The pairs (flat, ascending) that are in one of two lists or in both. */
function merged(pairs: readonly number[], others: readonly number[], atomCount: number): number[] {
  const keys = new Set<number>();
  for (const list of [pairs, others]) for (let n = 0; n < list.length; n += 2) keys.add(list[n] * atomCount + list[n + 1]);
  return [...keys].sort((p, q) => p - q).flatMap((key) => [Math.floor(key / atomCount), key % atomCount]);
}

function placedIn(pattern: BlockPattern, atoms: ArrayLike<number>, width: number): Placed {
  const rows = atoms.length / width;
  const blocks = new Int32Array((rows * width * (width + 1)) / 2);
  let at = 0;
  for (let n = 0; n < atoms.length; n += width)
    for (let p = 0; p < width; p++)
      for (let q = 0; q <= p; q++) {
        const { offset, iIsRow } = blockAt(pattern, atoms[n + p], atoms[n + q]);
        blocks[at++] = 64 * offset + (iIsRow ? 8 * p + q : 8 * q + p);
      }
  return { atoms: Int32Array.from(atoms), blocks };
}

/** Adds k g g^T for a coordinate with the gradient g, to the blocks from `at` up to `end`. */
function addCoordinate(values: Float64Array, blocks: Int32Array, at: number, end: number, g: Float64Array, k: number): void {
  for (let n = at; n < end; n++) {
    const code = blocks[n];
    const o = code >> 6,
      row = 3 * ((code >> 3) & 7),
      column = 3 * (code & 7);
    const c0 = k * g[column],
      c1 = k * g[column + 1],
      c2 = k * g[column + 2];
    const r0 = g[row],
      r1 = g[row + 1],
      r2 = g[row + 2];
    values[o] += r0 * c0;
    values[o + 1] += r0 * c1;
    values[o + 2] += r0 * c2;
    values[o + 3] += r1 * c0;
    values[o + 4] += r1 * c1;
    values[o + 5] += r1 * c2;
    values[o + 6] += r2 * c0;
    values[o + 7] += r2 * c1;
    values[o + 8] += r2 * c2;
  }
}

/** Adds k u u^T for a distance along the unit vector u: to the diagonal blocks of both atoms, and its negative to theirs in common. */
function addDistance(values: Float64Array, blocks: Int32Array, at: number, ux: number, uy: number, uz: number, k: number): void {
  const i = blocks[at] >> 6,
    between = blocks[at + 1] >> 6,
    j = blocks[at + 2] >> 6;
  const xx = k * ux * ux,
    xy = k * ux * uy,
    xz = k * ux * uz,
    yy = k * uy * uy,
    yz = k * uy * uz,
    zz = k * uz * uz;
  for (const d of [i, j]) {
    values[d] += xx;
    values[d + 3] += xy;
    values[d + 4] += yy;
    values[d + 6] += xz;
    values[d + 7] += yz;
    values[d + 8] += zz;
  }
  values[between] -= xx;
  values[between + 1] -= xy;
  values[between + 2] -= xz;
  values[between + 3] -= xy;
  values[between + 4] -= yy;
  values[between + 5] -= yz;
  values[between + 6] -= xz;
  values[between + 7] -= yz;
  values[between + 8] -= zz;
}

/** Gradient of the coordinate at hand; no coordinate has more than five atoms. */
const gradient = new Float64Array(15);
const slope = new Float64Array(12);

/** Adds the contacts (flat pairs, ascending) that are at hand, all of which have room. */
function addContacts(
  { contactKinds }: ModelCoordinates,
  { atoms, blocks }: Placed,
  contacts: readonly number[],
  x: Coordinates,
  values: Float64Array,
): void {
  let n = 0;
  for (let m = 0; m < contacts.length; m += 2) {
    const i = contacts[m],
      j = contacts[m + 1];
    while (atoms[n] !== i || atoms[n + 1] !== j) n += 2;
    const dx = x[3 * i] - x[3 * j],
      dy = x[3 * i + 1] - x[3 * j + 1],
      dz = x[3 * i + 2] - x[3 * j + 2];
    const r = Math.max(Math.sqrt(dx * dx + dy * dy + dz * dz), 1e-3);
    addDistance(values, blocks, (3 * n) / 2, dx / r, dy / r, dz / r, contactStiffness(contactKinds[i], contactKinds[j], r));
  }
}

/** Also writes each bond's rho. */
function addStretches(
  { period }: ModelCoordinates,
  { atoms, blocks }: Placed,
  x: Coordinates,
  rho: Float64Array,
  values: Float64Array,
): void {
  for (let n = 0; n < atoms.length; n += 2) {
    const i = atoms[n],
      j = atoms[n + 1];
    const dx = x[3 * i] - x[3 * j],
      dy = x[3 * i + 1] - x[3 * j + 1],
      dz = x[3 * i + 2] - x[3 * j + 2];
    const distance = Math.max(Math.sqrt(dx * dx + dy * dy + dz * dz), 1e-3);
    const r = distance / BOHR;
    const low = Math.min(period[i], period[j]);
    const row = low === 1 ? Math.max(period[i], period[j]) - 1 : period[i] + period[j] - 1;
    const decay = Math.exp(ALPHA[row] * (REFERENCE[row] * REFERENCE[row] - r * r));
    rho[n / 2] = Math.min(Math.max(decay, LEAST_DECAY), MOST_DECAY);
    addDistance(values, blocks, (3 * n) / 2, dx / distance, dy / distance, dz / distance, STRETCH * rho[n / 2]);
  }
}

function addBends(
  { angleBonds }: ModelCoordinates,
  { atoms, blocks }: Placed,
  x: Coordinates,
  rho: Float64Array,
  values: Float64Array,
): void {
  for (let n = 0, bond = 0, at = 0; n < atoms.length; n += 3, bond += 2, at += 6) {
    const force = BEND * rho[angleBonds[bond]] * rho[angleBonds[bond + 1]];
    const i = 3 * atoms[n],
      j = 3 * atoms[n + 1],
      k = 3 * atoms[n + 2];
    let ux = x[i] - x[j],
      uy = x[i + 1] - x[j + 1],
      uz = x[i + 2] - x[j + 2];
    let vx = x[k] - x[j],
      vy = x[k + 1] - x[j + 1],
      vz = x[k + 2] - x[j + 2];
    const ru = Math.max(Math.sqrt(ux * ux + uy * uy + uz * uz), 1e-3),
      rv = Math.max(Math.sqrt(vx * vx + vy * vy + vz * vz), 1e-3);
    ux /= ru;
    uy /= ru;
    uz /= ru;
    vx /= rv;
    vy /= rv;
    vz /= rv;
    const cosine = ux * vx + uy * vy + uz * vz;
    const sine = Math.sqrt(Math.max(0, 1 - cosine * cosine));
    if (sine > STRAIGHT) {
      const perU = 1 / (ru * sine),
        perV = 1 / (rv * sine);
      gradient[0] = (cosine * ux - vx) * perU;
      gradient[1] = (cosine * uy - vy) * perU;
      gradient[2] = (cosine * uz - vz) * perU;
      gradient[6] = (cosine * vx - ux) * perV;
      gradient[7] = (cosine * vy - uy) * perV;
      gradient[8] = (cosine * vz - uz) * perV;
      for (let m = 0; m < 3; m++) gradient[m + 3] = -gradient[m] - gradient[m + 6];
      addCoordinate(values, blocks, at, at + 6, gradient, force);
      continue;
    }
    // a straight angle bends alike in every plane through it: the sum over two directions is the projector I - u u^T
    const u = [ux, uy, uz];
    for (let m = 0; m < 3; m++) {
      for (let o = 0; o < 3; o++) {
        const across = (m === o ? 1 : 0) - u[m] * u[o];
        gradient[o] = across / ru;
        gradient[o + 6] = (-Math.sign(cosine) * across) / rv;
        gradient[o + 3] = -gradient[o] - gradient[o + 6];
      }
      addCoordinate(values, blocks, at, at + 6, gradient, force);
    }
  }
}

/** Whether a torsion's gradient in the first 12 values of `g` comes from angles that are not nearly straight. */
function isBent(g: Float64Array): boolean {
  return g[0] * g[0] + g[1] * g[1] + g[2] * g[2] < STEEP && g[9] * g[9] + g[10] * g[10] + g[11] * g[11] < STEEP;
}

function addTorsions({ torsionForces }: ModelCoordinates, { atoms, blocks }: Placed, x: Coordinates, values: Float64Array): void {
  for (let n = 0, row = 0; n < atoms.length; n += 4, row++) {
    torsionGradient(x, atoms[n], atoms[n + 1], atoms[n + 2], atoms[n + 3], gradient);
    if (isBent(gradient)) addCoordinate(values, blocks, 10 * row, 10 * row + 10, gradient, torsionForces[row]);
  }
}

/** With the driven torsion held, the others about its axis can change only by what they differ from it. */
function addDifferences(
  { driven, differenceForce }: ModelCoordinates,
  { atoms, blocks }: Placed,
  x: Coordinates,
  values: Float64Array,
): void {
  if (!driven) return;
  const [front, b, c, rear] = driven;
  torsionGradient(x, front, b, c, rear, slope);
  if (!isBent(slope)) return;
  for (let n = 0, at = 0; n < atoms.length; n += 5, at += 15) {
    torsionGradient(x, atoms[n], b, c, atoms[n + 3], gradient);
    if (!isBent(gradient)) continue;
    const frontAt = atoms[n] === front ? 0 : 12,
      rearAt = atoms[n + 3] === rear ? 9 : 12;
    gradient[12] = gradient[13] = gradient[14] = 0;
    for (let k = 0; k < 3; k++) {
      gradient[frontAt + k] -= slope[k];
      gradient[3 + k] -= slope[3 + k];
      gradient[6 + k] -= slope[6 + k];
      gradient[rearAt + k] -= slope[9 + k];
    }
    addCoordinate(values, blocks, at, at + 15, gradient, differenceForce);
  }
}

function addPlanes({ atoms, blocks }: Placed, x: Coordinates, values: Float64Array): void {
  for (let n = 0, at = 0; n < atoms.length; n += 4, at += 10) {
    const c = 3 * atoms[n],
      p = 3 * atoms[n + 1],
      q = 3 * atoms[n + 2],
      r = 3 * atoms[n + 3];
    const ux = x[q] - x[p],
      uy = x[q + 1] - x[p + 1],
      uz = x[q + 2] - x[p + 2];
    const vx = x[r] - x[p],
      vy = x[r + 1] - x[p + 1],
      vz = x[r + 2] - x[p + 2];
    const wx = x[c] - x[p],
      wy = x[c + 1] - x[p + 1],
      wz = x[c + 2] - x[p + 2];
    const nx = uy * vz - uz * vy,
      ny = uz * vx - ux * vz,
      nz = ux * vy - uy * vx;
    const square = nx * nx + ny * ny + nz * nz;
    if (square < 0.1) continue;
    // height of the centre above its neighbours' plane; the plane counts where the centre's foot is, by barycentric weights
    const weightR = ((uy * wz - uz * wy) * nx + (uz * wx - ux * wz) * ny + (ux * wy - uy * wx) * nz) / square;
    const weightQ = ((wy * vz - wz * vy) * nx + (wz * vx - wx * vz) * ny + (wx * vy - wy * vx) * nz) / square;
    const length = Math.sqrt(square);
    gradient[0] = nx / length;
    gradient[1] = ny / length;
    gradient[2] = nz / length;
    for (let k = 0; k < 3; k++) {
      gradient[3 + k] = (weightQ + weightR - 1) * gradient[k];
      gradient[6 + k] = -weightQ * gradient[k];
      gradient[9 + k] = -weightR * gradient[k];
    }
    addCoordinate(values, blocks, at, at + 10, gradient, OUT_OF_PLANE);
  }
}
