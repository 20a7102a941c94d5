import { describe, expect, it } from 'vitest';
import { empiricalAngle, empiricalAngleForce } from './empirical-angle.js';

/** Elements, reference lengths of i-j and j-k (MMFFBOND), angle, ring size; force constant. */
type Row = readonly [
  elements: readonly [number, number, number],
  r_ij: number,
  r_jk: number,
  angle: number,
  ring: 0 | 3 | 4,
  force: number,
];

// rows of MMFFANG that Halgren marks E94, force constant by the rule (T. A. Halgren, J. Comput. Chem. 17, 616 (1996)); 1815 of 1865 repeat
const E94: readonly (readonly [name: string, row: Row])[] = [
  ['1-1-4', [[6, 6, 6], 1.508, 1.459, 110.265, 0, 1.006]],
  ['1-1-9', [[6, 6, 7], 1.508, 1.458, 108.194, 0, 1.136]],
  ['1-1-13', [[6, 6, 35], 1.508, 1.949, 106.82, 0, 1.078]],
  ['1-1-19', [[6, 6, 14], 1.508, 1.83, 115.436, 0, 0.755]],
  ['1-1-57', [[6, 6, 6], 1.508, 1.461, 109.9, 0, 1.012]],
];

describe('the angle force constant by rule', () => {
  it.each(E94)('gives the tabulated row %s', (_, [elements, r_ij, r_jk, angle, ring, force]) => {
    expect(Math.abs((empiricalAngleForce(...elements, r_ij, r_jk, angle, ring) ?? 0) - force)).toBeLessThan(6e-4);
  });

  it('is weaker in small rings', () => {
    const free = empiricalAngleForce(6, 6, 6, 1.5, 1.5, 90, 0) ?? 0;
    expect(empiricalAngleForce(6, 6, 6, 1.5, 1.5, 90, 4)).toBeCloseTo(0.85 * free, 12);
    expect(empiricalAngleForce(6, 6, 6, 1.5, 1.5, 90, 3)).toBeCloseTo(0.05 * free, 12);
  });

  it('has no numbers for a bromine at the centre', () => {
    expect(empiricalAngleForce(6, 35, 6, 1.9, 1.9, 95, 0)).toBeUndefined();
  });
});

// T. A. Halgren, J. Comput. Chem. 17, 616 (1996), rules for reference angles (from memory)
describe('the reference angle by rule', () => {
  it.each([
    ['a three-membered ring', 1, 3, 60],
    ['a four-membered ring', 2, 4, 90],
    ['a tetracoordinate atom', 34, 0, 109.45],
    ['amine nitrogen', 8, 0, 107],
    ['phosphine phosphorus', 26, 0, 92],
    ['planar carbon', 57, 0, 120],
    ['ether oxygen', 6, 0, 105],
    ['sulphide sulphur', 15, 0, 95],
    ['imine nitrogen', 9, 0, 120],
    ['an alkyne', 4, 0, 180],
  ] as const)('of %s', (_, type, ring, angle) => {
    expect(empiricalAngle(type, ring)).toBe(angle);
  });
});
