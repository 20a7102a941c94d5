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
  ['5-1-13', [[1, 6, 35], 1.093, 1.949, 106.049, 0, 0.613]],
  ['2-2-2', [[6, 6, 6], 1.43, 1.43, 60.549, 3, 0.173]],
  ['6-3-20', [[8, 6, 6], 1.355, 1.53, 93.13, 4, 1.495]],
  ['6-6-21', [[8, 8, 1], 1.449, 0.972, 95.697, 0, 1.362]],
  ['22-6-22', [[6, 8, 6], 1.433, 1.433, 58.68, 3, 0.242]],
  ['6-8-6', [[8, 7, 8], 1.45, 1.45, 107.296, 0, 1.776]],
  ['8-8-8', [[7, 7, 7], 1.42, 1.42, 60, 3, 0.23]],
  ['17-8-17', [[16, 7, 16], 1.663, 1.663, 110.056, 4, 1.198]],
  ['1-15-2', [[6, 16, 6], 1.805, 1.72, 97.853, 0, 1.321]],
  ['25-15-25', [[15, 16, 15], 2.112, 2.112, 87.982, 4, 1.03]],
  ['5-19-8', [[1, 14, 7], 1.485, 1.7, 109.07, 0, 0.461]],
  ['20-19-20', [[6, 14, 6], 1.9, 1.9, 89.931, 4, 0.802]],
  ['6-25-8', [[8, 15, 7], 1.63, 1.66, 104.161, 0, 1.419]],
  ['15-25-15', [[16, 15, 16], 2.112, 2.112, 93.138, 4, 1.264]],
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
