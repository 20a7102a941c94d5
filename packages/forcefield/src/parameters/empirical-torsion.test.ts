import { describe, expect, it } from 'vitest';
import { empiricalTorsion } from './empirical-torsion.js';
import { AROMATIC, UNCOVERED } from './rule-bond-order.js';

/** Types j, k, bond order; V2, V3. */
type Row = readonly [j: number, k: number, order: number, v2: number, v3: number];

// rows *-j-k-* of MMFFTOR that Halgren marks E94, made by the rule (T. A. Halgren, J. Comput. Chem. 17, 616 (1996)); all 397 of them repeat
const E94: readonly Row[] = [
  [37, 37, AROMATIC, 6, 0],
  [37, 39, AROMATIC, 3.6, 0],
  [65, 78, AROMATIC, 6, 0],
  [44, 80, AROMATIC, 2.846, 0],
  [59, 80, AROMATIC, 3.6, 0],
  [76, 76, AROMATIC, 3.6, 0],
  [3, 54, 2, 12, 0],
  [1, 54, 1, 0, 0],
  [8, 15, 1, 0, 0.424],
  [8, 8, 1, 0, 0.375],
  [8, 20, 1, 0, 0.297],
  [15, 20, 1, 0, 0.336],
  [15, 19, 1, 0, 0.255],
  [20, 20, 1, 0, 0.236],
  [26, 26, 1, 0, 0.6],
  [10, 10, 1, 0, 0],
  [10, 20, 1, 0, 0.0],
  [9, 37, 1, 1.8, 0],
  [6, 37, 1, 3.6, 0],
  [2, 2, 1, 1.8, 0],
];

describe('the torsion rule', () => {
  it.each(E94)('gives the tabulated row for an axis %i-%i of order %f', (j, k, order, v2, v3) => {
    const rule = empiricalTorsion(j, k, order);
    expect(rule?.v1).toBe(0);
    expect(rule?.v2).toBeCloseTo(v2, 3);
    expect(rule?.v3).toBeCloseTo(v3, 3);
  });

  it('sets disulfides and peroxides upright', () => {
    expect(empiricalTorsion(15, 15, 1)?.v2).toBeCloseTo(-8, 12);
    expect(empiricalTorsion(6, 15, 1)?.v2).toBeCloseTo(-4, 12);
    expect(empiricalTorsion(6, 6, 1)?.v2).toBeCloseTo(-2, 12);
  });

  it('leaves linear atoms free', () => {
    expect(empiricalTorsion(4, 1, 1)).toEqual({ v1: 0, v2: 0, v3: 0 });
    expect(empiricalTorsion(2, 53, 2)).toEqual({ v1: 0, v2: 0, v3: 0 });
  });

  it('treats the bond of pyrylium oxygen as neither single nor double', () => {
    expect(empiricalTorsion(37, 51, UNCOVERED)?.v3).toBeCloseTo(Math.sqrt(2.12 * 0.2) / 2, 12);
  });

  it('has no numbers for a halogen in the axis', () => {
    expect(empiricalTorsion(1, 77, 1)).toBeUndefined();
  });
});
