import { describe, expect, it } from 'vitest';
import { empiricalForce, empiricalLength } from './empirical-bond.js';
import { AROMATIC, UNCOVERED } from './rule-bond-order.js';

describe('the bond rule', () => {
  // force constants that the log of the MMFF94 validation suite prints (ERULE_06, ERULE_03, OHMW1) and MMFFBOND's row 23-67, marked #E94: length
  // and force constant both by the rule (T. A. Halgren, J. Comput. Chem. 17, 616 (1996))
  it.each([
    ['N-F', 8, 11, [7, 9], 1.379, 5.438],
    ['P-Si', 26, 19, [15, 14], 2.224, 1.609],
    ['O-H', 35, 21, [8, 1], 0.978, 7.51],
    ['N-H', 67, 23, [7, 1], 1.019, 6.61],
  ] as const)('gives the published constants of %s', (_, type_i, type_j, [element_i, element_j], length, force) => {
    const r0 = empiricalLength(1, type_i, type_j) ?? 0;
    expect(Math.abs(r0 - length)).toBeLessThan(6e-4);
    expect(Math.abs((empiricalForce(element_i, element_j, r0) ?? 0) - force)).toBeLessThan(6e-4);
  });

  // rows of MMFFBOND marked E94, force constant by the rule from a length fitted to X-ray structures
  it.each([
    ['1-22', 6, 6, 1.482, 4.286],
    ['1-13', 6, 35, 1.949, 2.529],
    ['8-15', 7, 16, 1.652, 4.06],
    ['66-78', 7, 6, 1.36, 6.385],
    ['79-79', 7, 7, 1.269, 6.408],
  ])('gives the tabulated force constant of %s', (_, element_i, element_j, length, force) => {
    expect(Math.abs((empiricalForce(element_i, element_j, length) ?? 0) - force)).toBeLessThan(6e-4);
  });

  it('falls back on the rule of Herschbach and Laurie where no reference is listed', () => {
    // F-Cl: rows 1 and 2 of the periodic table, a = 2.28, d = 0.74
    expect(empiricalForce(9, 17, 1.63)).toBeCloseTo(10 ** ((2.28 - 1.63) / 0.74), 12);
    expect(empiricalForce(82, 82, 2)).toBeUndefined();
  });

  it('shortens a bond with its order, and between two unsaturated atoms', () => {
    const length = (order: number, type_i: number, type_j: number) => empiricalLength(order, type_i, type_j) ?? 0;
    expect(length(1, 1, 1)).toBeCloseTo(1.54, 12);
    expect(length(1, 2, 2)).toBeCloseTo(1.48, 12);
    expect(length(1, 4, 4)).toBeCloseTo(1.38, 12);
    expect(length(2, 2, 2)).toBeCloseTo(1.34, 12);
    expect(length(3, 4, 4)).toBeCloseTo(1.2, 12);
    expect(length(AROMATIC, 37, 37)).toBeCloseTo(1.39, 12);
    expect(length(AROMATIC, 63, 44)).toBeLessThan(length(1, 1, 15));
    expect(length(UNCOVERED, 37, 51)).toBeCloseTo(0.77 + 0.72 - 0.085, 12);
    expect(length(1, 10, 41)).toBeCloseTo(length(1, 8, 1) - 0.15, 12);
    expect(length(1, 10, 2)).toBeCloseTo(length(1, 8, 1) - 0.08, 12);
  });

  it('has no length for an element without a radius', () => {
    expect(empiricalLength(1, 87, 1)).toBeUndefined();
  });
});
