/**
 * A light strain function in three dimensions that brings an embedded structure close to what a force field would make of it: harmonic bonds
 * and angles, flat centres, torsion preferences, contact between atoms more than two bonds apart, signed volumes.
 *
 * Sizes are common practice: bonds 350, angles 55, out-of-plane 25 kcal/mol per angstrom^2 or per unit of the cosine or triple product squared.
 */
import type { Molecule } from '../molecule.js';
import { contactRadius, type IdealGeometry } from './bounds.js';
import { addVolumeError, type SignedVolumes } from './handedness.js';
import type { ErrorFunction } from './lbfgs.js';
import type { Turning } from './turning.js';

const BOND = 350;
const ANGLE = 55;
/** Cosine of an angle that counts as straight. */
const STRAIGHT = -0.97;
const OUT_OF_PLANE = 12;
const VOLUME = 40;
const CONTACT = 25;

/** The strain (kcal/mol) as a function of x (3 values an atom). */
export function strain(
  molecule: Molecule,
  { shapes, lengths, angles, apart }: IdealGeometry,
  { torsions }: Turning,
  volumes: SignedVolumes,
): ErrorFunction {
  const { atomCount, atomicNumbers, bonds, neighbours } = molecule;
  const bondA = bonds.a.map((i) => 3 * i);
  const bondB = bonds.b.map((i) => 3 * i);
  const cosines = angles.angle.map(Math.cos);
  // dE/dtheta^2 is the same for all angles when the cosine's force constant carries 1/sin^2
  const stiffness = angles.angle.map((theta, n) => (shapes.steric[angles.j[n]] > 4 ? 0 : ANGLE / Math.max(0.25, Math.sin(theta) ** 2)));
  const repelled = shapes.steric.map((steric) => (steric > 4 ? 1 : 0));
  const flatCentres: number[] = [];
  for (let i = 0; i < atomCount; i++)
    if (shapes.steric[i] === 3 && neighbours.start[i + 1] - neighbours.start[i] === 3)
      flatCentres.push(i, ...neighbours.atom.subarray(neighbours.start[i], neighbours.start[i + 1]));
  const flat = Int32Array.from(flatCentres, (i) => 3 * i);

  const pairCount = (atomCount * (atomCount - 1)) / 2;
  const contact = new Float64Array(pairCount);
  for (let i = 1, n = 0; i < atomCount; i++)
    for (let j = 0; j < i; j++, n++) {
      const steps = apart[i * atomCount + j];
      if (steps < 3) continue;
      let radius = contactRadius(atomicNumbers[i]) + contactRadius(atomicNumbers[j]) - (steps === 3 ? 0.55 : 0.1);
      if (hydrogenBond(i, j)) radius -= 0.7;
      contact[n] = radius * radius;
    }

  return (x, gradient) => {
    gradient.fill(0);
    return (
      stretch(x, gradient) +
      bend(x, gradient) +
      outOfPlane(x, gradient) +
      turn(x, gradient) +
      touch(x, gradient) +
      addVolumeError(volumes, x, 3, VOLUME, gradient)
    );
  };

  function hydrogenBond(i: number, j: number): boolean {
    const [h, other] = atomicNumbers[i] === 1 ? [i, j] : [j, i];
    if (atomicNumbers[h] !== 1 || neighbours.start[h + 1] === neighbours.start[h]) return false;
    const donor = atomicNumbers[neighbours.atom[neighbours.start[h]]];
    return (donor === 7 || donor === 8) && [7, 8, 9].includes(atomicNumbers[other]);
  }

  function stretch(x: Float64Array, gradient: Float64Array): number {
    let sum = 0;
    for (let n = 0; n < bondA.length; n++) {
      const i = bondA[n];
      const j = bondB[n];
      const dx = x[i] - x[j];
      const dy = x[i + 1] - x[j + 1];
      const dz = x[i + 2] - x[j + 2];
      const length = Math.sqrt(dx * dx + dy * dy + dz * dz) + 1e-12;
      const off = length - lengths[n];
      sum += BOND * off * off;
      const slope = (2 * BOND * off) / length;
      gradient[i] += slope * dx;
      gradient[i + 1] += slope * dy;
      gradient[i + 2] += slope * dz;
      gradient[j] -= slope * dx;
      gradient[j + 1] -= slope * dy;
      gradient[j + 2] -= slope * dz;
    }
    return sum;
  }

  function bend(x: Float64Array, gradient: Float64Array): number {
    let sum = 0;
    for (let n = 0; n < cosines.length; n++) {
      const i = 3 * angles.i[n];
      const j = 3 * angles.j[n];
      const k = 3 * angles.k[n];
      let ux = x[i] - x[j];
      let uy = x[i + 1] - x[j + 1];
      let uz = x[i + 2] - x[j + 2];
      let vx = x[k] - x[j];
      let vy = x[k + 1] - x[j + 1];
      let vz = x[k + 2] - x[j + 2];
      const p = 1 / (Math.sqrt(ux * ux + uy * uy + uz * uz) + 1e-12);
      const q = 1 / (Math.sqrt(vx * vx + vy * vy + vz * vz) + 1e-12);
      ux *= p;
      uy *= p;
      uz *= p;
      vx *= q;
      vy *= q;
      vz *= q;
      const cosine = ux * vx + uy * vy + uz * vz;
      let slope: number;
      if (repelled[angles.j[n]]) {
        // around hypervalent centres the bonds keep apart from each other, whatever polyhedron that gives
        const close = 1.3 + cosine;
        sum += ANGLE * close * close;
        slope = 2 * ANGLE * close;
      } else if (cosines[n] < STRAIGHT) {
        // the square of a cosine's deviation is too soft at 180 degrees
        sum += 2 * ANGLE * (1 + cosine);
        slope = 2 * ANGLE;
      } else {
        const off = cosine - cosines[n];
        sum += stiffness[n] * off * off;
        slope = 2 * stiffness[n] * off;
      }
      const gix = slope * p * (vx - cosine * ux);
      const giy = slope * p * (vy - cosine * uy);
      const giz = slope * p * (vz - cosine * uz);
      const gkx = slope * q * (ux - cosine * vx);
      const gky = slope * q * (uy - cosine * vy);
      const gkz = slope * q * (uz - cosine * vz);
      gradient[i] += gix;
      gradient[i + 1] += giy;
      gradient[i + 2] += giz;
      gradient[k] += gkx;
      gradient[k + 1] += gky;
      gradient[k + 2] += gkz;
      gradient[j] -= gix + gkx;
      gradient[j + 1] -= giy + gky;
      gradient[j + 2] -= giz + gkz;
    }
    return sum;
  }

  /** Volume of the centre above its three neighbours, angstrom^3, squared. */
  function outOfPlane(x: Float64Array, gradient: Float64Array): number {
    let sum = 0;
    for (let n = 0; n < flat.length; n += 4) {
      const c = flat[n];
      const i = flat[n + 1];
      const j = flat[n + 2];
      const k = flat[n + 3];
      const ax = x[i] - x[c];
      const ay = x[i + 1] - x[c + 1];
      const az = x[i + 2] - x[c + 2];
      const bx = x[j] - x[c];
      const by = x[j + 1] - x[c + 1];
      const bz = x[j + 2] - x[c + 2];
      const dx = x[k] - x[c];
      const dy = x[k + 1] - x[c + 1];
      const dz = x[k + 2] - x[c + 2];
      const ux = by * dz - bz * dy;
      const uy = bz * dx - bx * dz;
      const uz = bx * dy - by * dx;
      const volume = ax * ux + ay * uy + az * uz;
      sum += OUT_OF_PLANE * volume * volume;
      const slope = 2 * OUT_OF_PLANE * volume;
      const gjx = slope * (dy * az - dz * ay);
      const gjy = slope * (dz * ax - dx * az);
      const gjz = slope * (dx * ay - dy * ax);
      const gkx = slope * (ay * bz - az * by);
      const gky = slope * (az * bx - ax * bz);
      const gkz = slope * (ax * by - ay * bx);
      gradient[i] += slope * ux;
      gradient[i + 1] += slope * uy;
      gradient[i + 2] += slope * uz;
      gradient[j] += gjx;
      gradient[j + 1] += gjy;
      gradient[j + 2] += gjz;
      gradient[k] += gkx;
      gradient[k + 1] += gky;
      gradient[k + 2] += gkz;
      gradient[c] -= slope * ux + gjx + gkx;
      gradient[c + 1] -= slope * uy + gjy + gky;
      gradient[c + 2] -= slope * uz + gjz + gkz;
    }
    return sum;
  }

  function turn(x: Float64Array, gradient: Float64Array): number {
    let sum = 0;
    const { count, c1, c2, c3 } = torsions;
    for (let n = 0; n < count; n++) {
      const i = 3 * torsions.i[n];
      const j = 3 * torsions.j[n];
      const k = 3 * torsions.k[n];
      const l = 3 * torsions.l[n];
      const ax = x[j] - x[i];
      const ay = x[j + 1] - x[i + 1];
      const az = x[j + 2] - x[i + 2];
      const bx = x[k] - x[j];
      const by = x[k + 1] - x[j + 1];
      const bz = x[k + 2] - x[j + 2];
      const dx = x[l] - x[k];
      const dy = x[l + 1] - x[k + 1];
      const dz = x[l + 2] - x[k + 2];
      // normals of the two planes; a straight angle has none and takes no part
      let mx = ay * bz - az * by;
      let my = az * bx - ax * bz;
      let mz = ax * by - ay * bx;
      let nx = by * dz - bz * dy;
      let ny = bz * dx - bx * dz;
      let nz = bx * dy - by * dx;
      const m2 = mx * mx + my * my + mz * mz;
      const n2 = nx * nx + ny * ny + nz * nz;
      if (m2 < 0.01 || n2 < 0.01) continue;
      const p = 1 / Math.sqrt(m2);
      const q = 1 / Math.sqrt(n2);
      mx *= p;
      my *= p;
      mz *= p;
      nx *= q;
      ny *= q;
      nz *= q;
      const cosine = mx * nx + my * ny + mz * nz;
      sum += cosine * (c1[n] + cosine * (c2[n] + cosine * c3[n]));
      const slope = c1[n] + cosine * (2 * c2[n] + cosine * 3 * c3[n]);
      // derivatives of the cosine by the two unnormalised normals
      const sx = slope * p * (nx - cosine * mx);
      const sy = slope * p * (ny - cosine * my);
      const sz = slope * p * (nz - cosine * mz);
      const tx = slope * q * (mx - cosine * nx);
      const ty = slope * q * (my - cosine * ny);
      const tz = slope * q * (mz - cosine * nz);
      // m = a x b, n = b x d: dE/da = b x s, dE/db = s x a + d x t, dE/dd = t x b
      const eax = by * sz - bz * sy;
      const eay = bz * sx - bx * sz;
      const eaz = bx * sy - by * sx;
      const ebx = sy * az - sz * ay + dy * tz - dz * ty;
      const eby = sz * ax - sx * az + dz * tx - dx * tz;
      const ebz = sx * ay - sy * ax + dx * ty - dy * tx;
      const edx = ty * bz - tz * by;
      const edy = tz * bx - tx * bz;
      const edz = tx * by - ty * bx;
      gradient[i] -= eax;
      gradient[i + 1] -= eay;
      gradient[i + 2] -= eaz;
      gradient[j] += eax - ebx;
      gradient[j + 1] += eay - eby;
      gradient[j + 2] += eaz - ebz;
      gradient[k] += ebx - edx;
      gradient[k + 1] += eby - edy;
      gradient[k + 2] += ebz - edz;
      gradient[l] += edx;
      gradient[l + 1] += edy;
      gradient[l + 2] += edz;
    }
    return sum;
  }

  function touch(x: Float64Array, gradient: Float64Array): number {
    let sum = 0;
    for (let i = 1, n = 0; i < atomCount; i++) {
      const p = 3 * i;
      const x0 = x[p];
      const x1 = x[p + 1];
      const x2 = x[p + 2];
      for (let q = 0; q < p; q += 3, n++) {
        const d0 = x0 - x[q];
        const d1 = x1 - x[q + 1];
        const d2 = x2 - x[q + 2];
        const square = d0 * d0 + d1 * d1 + d2 * d2;
        if (square >= contact[n]) continue;
        const inverse = 1 / contact[n];
        const close = 1 - square * inverse;
        sum += CONTACT * close * close;
        const slope = -4 * CONTACT * close * inverse;
        gradient[p] += slope * d0;
        gradient[p + 1] += slope * d1;
        gradient[p + 2] += slope * d2;
        gradient[q] -= slope * d0;
        gradient[q + 1] -= slope * d1;
        gradient[q + 2] -= slope * d2;
      }
    }
    return sum;
  }
}
