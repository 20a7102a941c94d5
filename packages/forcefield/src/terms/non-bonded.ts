/**
 * Van der Waals and electrostatic energy of all pairs of atoms three or more bonds apart, those in separate fragments included.
 *
 * Both terms need the distance, so one loop serves both. It walks dense rows - all j > i for one i - with the constants of each pair
 * ready in that order: no index is looked up, and the gradient of i stays in locals. Pairs one or two bonds apart stand in the rows
 * with strength zero; at any size they are too few to be worth a branch.
 *
 * With t = 1 / (r + a), w = 1 / (r^7 + b), u = 1 / (r + 0.05), the pair's energy is
 *
 *   t^7 (d w - e) + q u^n,   a = 0.07 R*,   b = 0.12 R*^7,   d = 1.12 R*^7 e / 2,   e = 2 eps (1.07 R*)^7,   q = 332.0716 q_i q_j / D
 *
 * which is the formulas in van-der-waals.ts and electrostatic.ts with everything that does not depend on r worked out beforehand.
 * The loop in kernel/ does the same on two pairs at a time; this one is its reference and its fallback.
 */
import type { Molecule } from '@tordial/geometry';
import { chargeProduct, type Dielectric, electrostatic, ONE_FOUR_SCALE } from './electrostatic.js';
import { type VanDerWaalsAtoms, vanDerWaals, vanDerWaalsPair } from './van-der-waals.js';

/** Constants of all pairs i < j: row after row, j ascending. The five arrays have n (n - 1) / 2 entries each. */
export interface NonBondedRows {
  readonly atomCount: number;
  readonly dielectricModel: Dielectric['model'];
  /** a = 0.07 R*, angstrom. */
  readonly a: Float64Array;
  /** b = 0.12 R*^7, angstrom^7. */
  readonly b: Float64Array;
  /** d = 1.12 R*^7 e / 2, kcal/mol angstrom^14; 0 for pairs that do not count. */
  readonly d: Float64Array;
  /** e = 2 eps (1.07 R*)^7, kcal/mol angstrom^7; 0 for pairs that do not count. */
  readonly e: Float64Array;
  /** q, kcal/mol angstrom^n; 0 for pairs that do not count. */
  readonly q: Float64Array;
}

/** Number of bonds between atom i and every other, as far as it matters: 0 to 3, and 4 for all that is farther or not connected. */
function separations({ atomCount, neighbours: { start, atom } }: Pick<Molecule, 'atomCount' | 'neighbours'>, i: number): Uint8Array {
  const bonds = new Uint8Array(atomCount).fill(4);
  bonds[i] = 0;
  let shell = [i];
  for (let distance = 1; distance <= 3; distance++) {
    const next: number[] = [];
    for (const from of shell)
      for (let n = start[from]; n < start[from + 1]; n++) {
        if (bonds[atom[n]] <= distance) continue;
        bonds[atom[n]] = distance;
        next.push(atom[n]);
      }
    shell = next;
  }
  return bonds;
}

/** Combines the constants of all pairs. `partialCharges` holds one charge an atom, in elementary charges. */
export function nonBondedRows(
  molecule: Pick<Molecule, 'atomCount' | 'neighbours'>,
  atoms: VanDerWaalsAtoms,
  partialCharges: Float64Array,
  dielectric: Dielectric,
): NonBondedRows {
  const { atomCount } = molecule;
  const length = (atomCount * (atomCount - 1)) / 2;
  // a pair without strength still needs denominators that are not zero
  const a = new Float64Array(length).fill(1), b = new Float64Array(length).fill(1);
  const d = new Float64Array(length), e = new Float64Array(length), q = new Float64Array(length);
  const { kind, count, constants } = constantsByKind(atoms);
  let pair = 0;
  for (let i = 0; i < atomCount; i++) {
    const bonds = separations(molecule, i);
    for (let j = i + 1; j < atomCount; j++, pair++) {
      if (bonds[j] < 3) continue;
      const at = 4 * (kind[i] * count + kind[j]);
      a[pair] = constants[at];
      b[pair] = constants[at + 1];
      d[pair] = constants[at + 2];
      e[pair] = constants[at + 3];
      q[pair] = chargeProduct(partialCharges[i], partialCharges[j], dielectric.constant) * (bonds[j] === 3 ? ONE_FOUR_SCALE : 1);
    }
  }
  return { atomCount, dielectricModel: dielectric.model, a, b, d, e, q };
}

/** Atoms of one type have the same constants, so that a molecule has few different pairs: a, b, d, e of each pair of kinds. */
function constantsByKind(atoms: VanDerWaalsAtoms): { kind: Int32Array; count: number; constants: Float64Array } {
  const { polarizability, effectiveElectrons, scaleA, scaleG, donorAcceptor } = atoms;
  const examples: number[] = [];
  const same = (m: number, n: number): boolean =>
    polarizability[m] === polarizability[n] && effectiveElectrons[m] === effectiveElectrons[n] &&
    scaleA[m] === scaleA[n] && scaleG[m] === scaleG[n] && donorAcceptor[m] === donorAcceptor[n];
  const kind = Int32Array.from(polarizability, (_, atom) => {
    const known = examples.findIndex((example) => same(example, atom));
    return known >= 0 ? known : examples.push(atom) - 1;
  });
  const count = examples.length;
  const constants = new Float64Array(4 * count * count);
  for (let m = 0; m < count; m++)
    for (let n = 0; n < count; n++) {
      const { distance, depth } = vanDerWaalsPair(atoms, examples[m], examples[n]);
      const seventh = distance ** 7;
      const e = 2 * depth * (1.07 * distance) ** 7;
      constants.set([0.07 * distance, 0.12 * seventh, 0.56 * seventh * e, e], 4 * (m * count + n));
    }
  return { kind, count, constants };
}

/** Adds the gradient (kcal/mol/angstrom) of every pair to `gradient` and returns the energy of both terms (kcal/mol). */
export function addNonBonded(rows: NonBondedRows, x: Float64Array, gradient: Float64Array): number {
  const { a, b, d, e, q } = rows;
  const end = 3 * rows.atomCount;
  const distanceDependent = rows.dielectricModel === 'distance';
  let energy = 0;
  let pair = 0;
  for (let i = 0; i < end; i += 3) {
    const xi = x[i], yi = x[i + 1], zi = x[i + 2];
    let gx = 0, gy = 0, gz = 0;
    for (let j = i + 3; j < end; j += 3, pair++) {
      const dx = xi - x[j], dy = yi - x[j + 1], dz = zi - x[j + 2];
      // two atoms on one spot repel with a finite energy and no direction
      const r2 = dx * dx + dy * dy + dz * dz + 1e-24;
      const r = Math.sqrt(r2), r6 = r2 * r2 * r2, s = r + 0.05;
      const t = 1 / (r + a[pair]), w = 1 / (r6 * r + b[pair]);
      // 1 / r and u from one division
      const v = 1 / (r * s), u = v * r;

      const t2 = t * t, t7 = t2 * t2 * t2 * t;
      const dw = d[pair] * w, well = dw - e[pair];
      let coulomb = q[pair] * u, pull = coulomb * u;
      if (distanceDependent) {
        coulomb = pull;
        pull *= 2 * u;
      }
      energy += t7 * well + coulomb;

      // -dE/dr / r
      const push = (7 * t7 * (well * t + dw * w * r6) + pull) * (v * s);
      const fx = push * dx, fy = push * dy, fz = push * dz;
      gx += fx; gy += fy; gz += fz;
      gradient[j] += fx; gradient[j + 1] += fy; gradient[j + 2] += fz;
    }
    gradient[i] -= gx; gradient[i + 1] -= gy; gradient[i + 2] -= gz;
  }
  return energy;
}

/** The two terms apart, kcal/mol, from the formulas as they are published. */
export function nonBondedEnergies(rows: NonBondedRows, x: Float64Array): { vanDerWaals: number; electrostatic: number } {
  const { atomCount, a, e, q, dielectricModel } = rows;
  let dispersion = 0, coulomb = 0, pair = 0;
  for (let i = 0; i < atomCount; i++)
    for (let j = i + 1; j < atomCount; j++, pair++) {
      const r = Math.hypot(x[3 * i] - x[3 * j], x[3 * i + 1] - x[3 * j + 1], x[3 * i + 2] - x[3 * j + 2]);
      const distance = a[pair] / 0.07;
      dispersion += vanDerWaals(r, distance, e[pair] / (2 * (1.07 * distance) ** 7));
      coulomb += electrostatic(r, q[pair], dielectricModel);
    }
  return { vanDerWaals: dispersion, electrostatic: coulomb };
}
