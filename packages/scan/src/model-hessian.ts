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
import type { Preconditioner } from './minimise.js';
import { type ModelCoordinates, modelCoordinates } from './model-coordinates.js';
import type { Torsion } from './rotors/defining-torsion.js';

const BOHR = 0.529177210903;
/** kcal/mol/angstrom^2 and kcal/mol/radian^2 where rho is 1. */
const STRETCH = 650;
const BEND = 75;
/** Resistance of a planar centre to leaving the plane of its neighbours, kcal/mol/angstrom^2. */
const OUT_OF_PLANE = 100;
/** Motions that no internal coordinate resists (the whole molecule's) get this much, kcal/mol/angstrom^2; more where fragments are not held together. */
const SHIFT = 0.01;
const SHIFT_BETWEEN_FRAGMENTS = 1;

/** Lindh's alpha (1/bohr^2) and r0 (bohr) by the periods of both atoms; later periods count as the third. */
const ALPHA = [1.0, 0.3949, 0.3949, 0.28, 0.28, 0.28];
const REFERENCE = [1.35, 2.1, 2.53, 2.87, 3.4, 3.4];
/** How far a stretched or squeezed geometry may move rho from 1: an embedded start is no reason for a wild model. */
const LEAST_DECAY = 0.3;
const MOST_DECAY = 2;

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
const ROOM = 0.4;
/** So many times the contacts at hand may have room. */
const IDLE = 3;

/** Coordinates of one kind with the blocks of the matrix that they add to: for atoms p >= q of a row, twice the offset, plus 1 if q is its row. */
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
  const { atomCount, bonds, angles, torsions, differences, planes } = model;
  const couplings = couplingsOf(model);
  const shift = model.fragments > 1 ? SHIFT_BETWEEN_FRAGMENTS : SHIFT;
  const work = new Float64Array(3 * atomCount);
  const made = new Float64Array(3 * atomCount);
  let ready = false;
  const rho = new Float64Array(bonds.length / 2);
  const room = new Set<number>();
  let matrix = blockMatrix(blockPattern(atomCount, couplings));
  let placed = place(matrix.pattern);

  function place(pattern: BlockPattern) {
    return {
      bonds: placedIn(pattern, bonds, 2),
      angles: placedIn(pattern, angles, 3),
      torsions: placedIn(pattern, torsions, 4),
      planes: placedIn(pattern, planes, 4),
      differences: differences.map(({ atoms }) => placedIn(pattern, atoms, atoms.length)),
    };
  }

  function make(x: Coordinates): void {
    made.set(x);
    const contacts = contactsAt(model.contactKinds, model.bonded, x);
    if (!hasRoom(contacts)) makeRoom(x);
    const { values, pattern } = matrix;
    values.fill(0);
    for (let d = 0; d < 9 * atomCount; d += 9) values[d] = values[d + 4] = values[d + 8] = shift;
    addContacts(model, placedIn(pattern, Int32Array.from(contacts), 2), x, values);
    addStretches(model, placed.bonds, x, rho, values);
    addBends(model, placed.angles, x, rho, values);
    addTorsions(model, placed.torsions, x, values);
    addDifferences(model, placed.differences, x, values);
    addPlanes(placed.planes, x, values);
    factorise(matrix, 1e-3 * shift);
  }

  function isStale(x: Coordinates): boolean {
    for (let n = 0; n < bonds.length; n += 2) {
      const i = 3 * bonds[n],
        j = 3 * bonds[n + 1];
      for (let k = 0; k < 3; k++) if (Math.abs(x[i + k] - x[j + k] - made[i + k] + made[j + k]) > STALE) return true;
    }
    return false;
  }

  function hasRoom(contacts: readonly number[]): boolean {
    for (let n = 0; n < contacts.length; n += 2) if (!room.has(contacts[n] * atomCount + contacts[n + 1])) return false;
    return true;
  }

  /** Contacts come and go along a scan: those met before keep their room, until most of it lies idle. */
  function makeRoom(x: Coordinates): void {
    const near = contactsAt(model.contactKinds, model.bonded, x, ROOM);
    if (2 * room.size > IDLE * near.length) room.clear();
    for (let n = 0; n < near.length; n += 2) room.add(near[n] * atomCount + near[n + 1]);
    const pairs = [...room].flatMap((key) => [Math.floor(key / atomCount), key % atomCount]);
    matrix = blockMatrix(blockPattern(atomCount, [...couplings, ...pairs]));
    placed = place(matrix.pattern);
  }

  return {
    solve: (v, out) => solveFactorised(matrix, v, out, work),
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
  for (const { atoms } of differences) for (const i of atoms) for (const j of atoms) if (i < j) pairs.push(i, j);
  return pairs;
}

function placedIn(pattern: BlockPattern, atoms: Int32Array, width: number): Placed {
  const rows = atoms.length / width;
  const blocks = new Int32Array((rows * width * (width + 1)) / 2);
  let at = 0;
  for (let n = 0; n < atoms.length; n += width)
    for (let p = 0; p < width; p++)
      for (let q = 0; q <= p; q++) {
        const { offset, iIsRow } = blockAt(pattern, atoms[n + p], atoms[n + q]);
        blocks[at++] = 2 * offset + (iIsRow ? 0 : 1);
      }
  return { atoms, blocks };
}

/** Adds k g g^T for a coordinate with the gradient g at `count` atoms, whose blocks start at `at`. */
function addCoordinate(values: Float64Array, blocks: Int32Array, at: number, count: number, g: Float64Array, k: number): void {
  for (let p = 0, n = at; p < count; p++)
    for (let q = 0; q <= p; q++, n++) {
      const flipped = blocks[n] & 1;
      const row = flipped ? 3 * q : 3 * p;
      const column = flipped ? 3 * p : 3 * q;
      const o = blocks[n] >> 1;
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

/** Gradient of the coordinate at hand; no coordinate has more than eight atoms. */
const gradient = new Float64Array(24);
const slope = new Float64Array(12);

/** Writes the gradient of the distance of i and j and returns the distance. */
function stretchGradient(x: Coordinates, i: number, j: number): number {
  const dx = x[3 * i] - x[3 * j],
    dy = x[3 * i + 1] - x[3 * j + 1],
    dz = x[3 * i + 2] - x[3 * j + 2];
  const r = Math.max(Math.sqrt(dx * dx + dy * dy + dz * dz), 1e-3);
  gradient[0] = dx / r;
  gradient[1] = dy / r;
  gradient[2] = dz / r;
  gradient[3] = -gradient[0];
  gradient[4] = -gradient[1];
  gradient[5] = -gradient[2];
  return r;
}

function addContacts({ contactKinds }: ModelCoordinates, { atoms, blocks }: Placed, x: Coordinates, values: Float64Array): void {
  for (let n = 0; n < atoms.length; n += 2) {
    const r = stretchGradient(x, atoms[n], atoms[n + 1]);
    addCoordinate(values, blocks, (3 * n) / 2, 2, gradient, contactStiffness(contactKinds[atoms[n]], contactKinds[atoms[n + 1]], r));
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
    const r = stretchGradient(x, i, j) / BOHR;
    const low = Math.min(period[i], period[j]);
    const row = low === 1 ? Math.max(period[i], period[j]) - 1 : period[i] + period[j] - 1;
    const decay = Math.exp(ALPHA[row] * (REFERENCE[row] * REFERENCE[row] - r * r));
    rho[n / 2] = Math.min(Math.max(decay, LEAST_DECAY), MOST_DECAY);
    addCoordinate(values, blocks, (3 * n) / 2, 2, gradient, STRETCH * rho[n / 2]);
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
      addCoordinate(values, blocks, at, 3, gradient, force);
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
      addCoordinate(values, blocks, at, 3, gradient, force);
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
    if (isBent(gradient)) addCoordinate(values, blocks, 10 * row, 4, gradient, torsionForces[row]);
  }
}

/** With the driven torsion held, the others about its axis can change only by what they differ from it (a torsion is the same from either end). */
function addDifferences({ differences, driven }: ModelCoordinates, placed: readonly Placed[], x: Coordinates, values: Float64Array): void {
  if (!driven) return;
  differences.forEach(({ torsion, atoms, placeOfDriven, force }, n) => {
    gradient.fill(0);
    torsionGradient(x, torsion[0], torsion[1], torsion[2], torsion[3], gradient);
    torsionGradient(x, driven[0], driven[1], driven[2], driven[3], slope);
    if (!isBent(gradient) || !isBent(slope)) return;
    placeOfDriven.forEach((place, p) => {
      for (let k = 0; k < 3; k++) gradient[3 * place + k] -= slope[3 * p + k];
    });
    addCoordinate(values, placed[n].blocks, 0, atoms.length, gradient, force);
  });
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
    addCoordinate(values, blocks, at, 4, gradient, OUT_OF_PLANE);
  }
}
