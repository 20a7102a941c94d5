/** Bonds that are single in one way of writing a structure's alternating bonds and double in another. */
import { augment } from './matching.js';
import type { Molecule } from './molecule.js';

/** The partner of each atom by a double bond (-1: none), and the neighbours it could alternate with. Atoms with two double bonds take no part. */
export interface DoubleBondMatching {
  readonly mate: Int32Array;
  readonly around: readonly (readonly number[])[];
}

export function doubleBondMatching({ atomCount, bonds }: Pick<Molecule, 'atomCount' | 'bonds'>): DoubleBondMatching {
  const mate = new Int32Array(atomCount).fill(-1);
  const doubles = new Uint8Array(atomCount);
  for (let n = 0; n < bonds.count; n++)
    if (bonds.order[n] === 2) {
      mate[bonds.a[n]] = bonds.b[n];
      mate[bonds.b[n]] = bonds.a[n];
      doubles[bonds.a[n]]++;
      doubles[bonds.b[n]]++;
    }
  for (let i = 0; i < atomCount; i++)
    if (doubles[i] > 1) {
      for (let j = 0; j < atomCount; j++) if (mate[j] === i) mate[j] = -1;
      mate[i] = -1;
    }
  const around: number[][] = Array.from({ length: atomCount }, () => []);
  for (let n = 0; n < bonds.count; n++) {
    const [a, b] = [bonds.a[n], bonds.b[n]];
    if (mate[a] < 0 || mate[b] < 0 || bonds.order[n] === 3) continue;
    around[a].push(b);
    around[b].push(a);
  }
  return { mate, around };
}

/** Whether the double bond between a and b can be single with all other atoms keeping a double bond each. */
export function doubleCanBeSingle({ mate, around }: DoubleBondMatching, a: number, b: number): boolean {
  if (mate[a] !== b) return false;
  const without = around.map((row, i) => (i === a ? row.filter((j) => j !== b) : i === b ? row.filter((j) => j !== a) : row));
  const open = mate.slice();
  open[a] = open[b] = -1;
  return augment(a, without, open);
}

/** Whether the single bond between a and b can be double with all other atoms keeping a double bond each. */
export function singleCanBeDouble({ mate, around }: DoubleBondMatching, a: number, b: number): boolean {
  const [p, q] = [mate[a], mate[b]];
  if (p < 0 || q < 0 || p === b) return false;
  const without = around.map((row, i) => (i === a || i === b ? [] : row.filter((j) => j !== a && j !== b)));
  const open = mate.slice();
  open[a] = b;
  open[b] = a;
  open[p] = open[q] = -1;
  return augment(p, without, open);
}
