/**
 * Van der Waals and electrostatic energy of all pairs of atoms three or more bonds apart, those in separate fragments included.
 *
 * Both terms need the distance, so one loop serves both. It walks dense rows - all j > i for one i - with the constants of each pair
 * ready in that order: no index is looked up, and the gradient of i stays in locals. Pairs one or two bonds apart stand in the rows
 * with strength zero; at any size they are too few to be worth a branch. Each row is padded to an even number of pairs for the
 * vector form of the loop (kernel/), of which this one is the reference and the fallback.
 *
 * With t = 1 / (r + a), w = 1 / (r^7 + b), u = 1 / (r + 0.05), the pair's energy is
 *
 *   c t^7 ((28/3) b w - 2) + q u^n,   a = 0.07 R*,   b = 0.12 R*^7,   c = eps (1.07 R*)^7,   q = 332.0716 q_i q_j / D
 *
 * which is the product form of the formulas in van-der-waals.ts and electrostatic.ts. The three reciprocals and the 1 / r of the
 * gradient come from one division by the product of all four denominators: division is what this loop waits for.
 */
import type { Molecule } from '@tordial/geometry';
import { chargeProduct, type Dielectric, electrostatic, ONE_FOUR_SCALE } from './electrostatic.js';
import { type VanDerWaalsAtoms, vanDerWaals, vanDerWaalsPair } from './van-der-waals.js';

/** Constants of all pairs i < j, row after row; rows padded to even length. All four arrays have the same length and share one buffer. */
export interface NonBondedRows {
  readonly atomCount: number;
  readonly dielectricModel: Dielectric['model'];
  /** a = 0.07 R*, angstrom. */
  readonly a: Float64Array;
  /** b = 0.12 R*^7, angstrom^7. */
  readonly b: Float64Array;
  /** c = eps (1.07 R*)^7, kcal/mol angstrom^7; 0 for pairs that do not count. */
  readonly c: Float64Array;
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
  let length = 0;
  for (let i = 0; i < atomCount; i++) length += (atomCount - i) & ~1;
  const block = new Float64Array(4 * length);
  const [a, b, c, q] = [0, 1, 2, 3].map((n) => block.subarray(n * length, (n + 1) * length));
  // a pair without strength still needs denominators that are not zero
  a.fill(1);
  b.fill(1);
  let pair = 0;
  for (let i = 0; i < atomCount; i++) {
    const bonds = separations(molecule, i);
    for (let j = i + 1; j < atomCount; j++, pair++) {
      if (bonds[j] < 3) continue;
      const { distance, depth } = vanDerWaalsPair(atoms, i, j);
      a[pair] = 0.07 * distance;
      b[pair] = 0.12 * distance ** 7;
      c[pair] = depth * (1.07 * distance) ** 7;
      q[pair] = chargeProduct(partialCharges[i], partialCharges[j], dielectric.constant) * (bonds[j] === 3 ? ONE_FOUR_SCALE : 1);
    }
    pair = (pair + 1) & ~1;
  }
  return { atomCount, dielectricModel: dielectric.model, a, b, c, q };
}

/** Adds the gradient (kcal/mol/angstrom) of every pair to `gradient` and returns the energy of both terms (kcal/mol). */
export function addNonBonded(rows: NonBondedRows, x: Float64Array, gradient: Float64Array): number {
  const { a, b, c, q } = rows;
  const end = 3 * rows.atomCount;
  // u^n = u (k0 + k1 u), its logarithmic slope n
  const n = rows.dielectricModel === 'constant' ? 1 : 2, k0 = 2 - n, k1 = n - 1;
  let energy = 0;
  let pair = 0;
  for (let i = 0; i < end; i += 3) {
    const xi = x[i], yi = x[i + 1], zi = x[i + 2];
    let gx = 0, gy = 0, gz = 0;
    for (let j = i + 3; j < end; j += 3, pair++) {
      const dx = xi - x[j], dy = yi - x[j + 1], dz = zi - x[j + 2];
      // two atoms on one spot repel with a finite energy and no direction
      const r2 = Math.max(dx * dx + dy * dy + dz * dz, 1e-24);
      const r = Math.sqrt(r2), r6 = r2 * r2 * r2;
      const p = r + a[pair], m = r6 * r + b[pair], s = r + 0.05;
      const pm = p * m, sr = s * r;
      const reciprocal = 1 / (pm * sr);
      const perPM = reciprocal * sr, perSR = reciprocal * pm;
      const t = perPM * m, w = perPM * p, u = perSR * r, perR = perSR * s;

      const t2 = t * t;
      const ct7 = c[pair] * t * (t2 * t2 * t2);
      const bw = (28 / 3) * b[pair] * w;
      const dispersion = ct7 * (bw - 2);
      const coulomb = q[pair] * u * (k0 + k1 * u);
      energy += dispersion + coulomb;

      const slope = -7 * (dispersion * t + ct7 * bw * (w * r6)) - n * coulomb * u;
      const along = slope * perR;
      const fx = along * dx, fy = along * dy, fz = along * dz;
      gx += fx; gy += fy; gz += fz;
      gradient[j] -= fx; gradient[j + 1] -= fy; gradient[j + 2] -= fz;
    }
    gradient[i] += gx; gradient[i + 1] += gy; gradient[i + 2] += gz;
    pair = (pair + 1) & ~1;
  }
  return energy;
}

/** The two terms apart, kcal/mol, from the formulas as they are published. */
export function nonBondedEnergies(rows: NonBondedRows, x: Float64Array): { vanDerWaals: number; electrostatic: number } {
  const { atomCount, a, c, q, dielectricModel } = rows;
  let dispersion = 0, coulomb = 0, pair = 0;
  for (let i = 0; i < atomCount; i++) {
    for (let j = i + 1; j < atomCount; j++, pair++) {
      const r = Math.hypot(x[3 * i] - x[3 * j], x[3 * i + 1] - x[3 * j + 1], x[3 * i + 2] - x[3 * j + 2]);
      const distance = a[pair] / 0.07;
      dispersion += vanDerWaals(r, distance, c[pair] / (1.07 * distance) ** 7);
      coulomb += electrostatic(r, q[pair], dielectricModel);
    }
    pair = (pair + 1) & ~1;
  }
  return { vanDerWaals: dispersion, electrostatic: coulomb };
}
