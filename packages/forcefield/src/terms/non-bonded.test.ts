import { createMolecule } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { electrostatic } from './electrostatic.js';
import { gradientError, uniform } from './gradient-check.fixture.js';
import { addNonBonded, nonBondedEnergies, nonBondedRows } from './non-bonded.js';
import { vanDerWaals, vanDerWaalsPair } from './van-der-waals.js';

// MMFF94 van der Waals rows of the types CR, HC, OR, HOR: J. Comput. Chem. 17, 520 (1996), MMFFVDW.PAR
const CR = [1.05, 2.49, 3.89, 1.282, 0];
const HC = [0.25, 0.8, 4.2, 1.209, 0];
const OR = [0.7, 3.15, 3.89, 1.282, 2];
const HOR = [0.15, 0.8, 4.2, 1.209, 1];

function atomsOf(rows: number[][]) {
  const column = (n: number) => Float64Array.from(rows, (row) => row[n]);
  return {
    polarizability: column(0),
    effectiveElectrons: column(1),
    scaleA: column(2),
    scaleG: column(3),
    donorAcceptor: Uint8Array.from(rows, (row) => row[4]),
  };
}

// 1,2-ethanediol's heavy atoms and two hydrogens of water beside it: chains, 1-4 pairs and a second fragment
const molecule = createMolecule({
  atomicNumbers: [8, 6, 6, 8, 1, 1, 8, 1, 1],
  bonds: [[0, 1, 1], [1, 2, 1], [2, 3, 1], [0, 4, 1], [3, 5, 1], [6, 7, 1], [6, 8, 1]],
});
const atoms = atomsOf([OR, CR, CR, OR, HOR, HOR, OR, HOR, HOR]);
const charges = Float64Array.of(-0.68, 0.28, 0.28, -0.68, 0.4, 0.4, -0.86, 0.43, 0.43);
const x = Float64Array.of(
  -0.1, 0.05, 0.1, 1.42, 0, 0, 1.9, 1.43, 0.1, 3.3, 1.4, 0.2, -0.4, 0.9, 0.3, 3.6, 0.5, 0.4,
  1.2, -1.1, 3.1, 1.0, -0.2, 2.8, 0.4, -1.6, 3.0,
);
const constant = { model: 'constant', constant: 1 } as const;
const distanceDependent = { model: 'distance', constant: 4 } as const;

describe('the van der Waals pair constants', () => {
  it('are those of one atom type in a pair of equals', () => {
    // R*_ii and eps_ii printed for CR and HC with the parameters: 3.938 and 0.068, 2.970 and 0.022 (MMFFVDW.PAR, comment columns, from memory)
    const pair = vanDerWaalsPair(atomsOf([CR, CR]), 0, 1);
    expect(pair.distance).toBeCloseTo(3.938, 3);
    expect(pair.depth).toBeCloseTo(0.068, 3);
    const hydrogens = vanDerWaalsPair(atomsOf([HC, HC]), 0, 1);
    expect(hydrogens.distance).toBeCloseTo(2.97, 3);
    expect(hydrogens.depth).toBeCloseTo(0.022, 3);
  });

  it('do not depend on the order of the pair', () => {
    const both = atomsOf([CR, HOR]);
    expect(vanDerWaalsPair(both, 0, 1)).toEqual(vanDerWaalsPair(both, 1, 0));
  });

  it('shrink between a donor and an acceptor only', () => {
    const [donor, acceptor] = [[...HOR], [...OR]];
    const plain = vanDerWaalsPair(atomsOf([donor, [...OR.slice(0, 4), 0]]), 0, 1);
    const bonded = vanDerWaalsPair(atomsOf([donor, acceptor]), 0, 1);
    expect(bonded.distance).toBeCloseTo(0.8 * plain.distance, 12);
    expect(bonded.depth).toBeCloseTo(0.5 * plain.depth, 12);
    const acceptors = vanDerWaalsPair(atomsOf([acceptor, acceptor]), 0, 1);
    expect(acceptors.distance).toBeCloseTo(3.89 * 0.7 ** 0.25, 12);
  });
});

describe('the scalar functions of the non-bonded terms', () => {
  it('put the van der Waals minimum at R* with the depth eps', () => {
    expect(vanDerWaals(3.9, 3.9, 0.07)).toBeCloseTo(-0.07, 12);
    expect(vanDerWaals(3.8, 3.9, 0.07)).toBeGreaterThan(-0.07);
    expect(vanDerWaals(4, 3.9, 0.07)).toBeGreaterThan(-0.07);
    expect(vanDerWaals(0, 3.9, 0.07)).toBeLessThan(Number.POSITIVE_INFINITY);
  });
  it("buffer Coulomb's law", () => {
    expect(electrostatic(1.95, 332.0716, 'constant')).toBeCloseTo(166.0358, 10);
    expect(electrostatic(1.95, 332.0716, 'distance')).toBeCloseTo(83.0179, 10);
  });
});

describe.each([constant, distanceDependent])('the pair loop, dielectric $model', (dielectric) => {
  const rows = nonBondedRows(molecule, atoms, charges, dielectric);

  it('sums the scalar functions over the pairs three or more bonds apart', () => {
    // bonds between the atoms, worked out by hand; 9 stands for separate fragments
    const bonds = [
      [0, 1, 2, 3, 1, 4, 9, 9, 9],
      [0, 0, 1, 2, 2, 3, 9, 9, 9],
      [0, 0, 0, 1, 3, 2, 9, 9, 9],
      [0, 0, 0, 0, 4, 1, 9, 9, 9],
      [0, 0, 0, 0, 0, 5, 9, 9, 9],
      [0, 0, 0, 0, 0, 0, 9, 9, 9],
      [0, 0, 0, 0, 0, 0, 0, 1, 1],
      [0, 0, 0, 0, 0, 0, 0, 0, 2],
    ];
    let dispersion = 0, coulomb = 0;
    bonds.forEach((row, i) => {
      row.forEach((separation, j) => {
        if (separation < 3) return;
        const r = Math.hypot(x[3 * i] - x[3 * j], x[3 * i + 1] - x[3 * j + 1], x[3 * i + 2] - x[3 * j + 2]);
        const { distance, depth } = vanDerWaalsPair(atoms, i, j);
        dispersion += vanDerWaals(r, distance, depth);
        const strength = (332.0716 * charges[i] * charges[j] * (separation === 3 ? 0.75 : 1)) / dielectric.constant;
        coulomb += electrostatic(r, strength, dielectric.model);
      });
    });
    const apart = nonBondedEnergies(rows, x);
    expect(apart.vanDerWaals).toBeCloseTo(dispersion, 10);
    expect(apart.electrostatic).toBeCloseTo(coulomb, 10);
    expect(addNonBonded(rows, x, new Float64Array(27))).toBeCloseTo(dispersion + coulomb, 10);
  });

  it('has the gradient of its energy', () => {
    const random = uniform(11);
    for (let n = 0; n < 20; n++) {
      const moved = x.map((value) => value + 0.3 * random());
      expect(gradientError((at, gradient) => addNonBonded(rows, at, gradient), moved).worst).toBeLessThan(1);
    }
  });

  it('stays finite where two atoms meet', () => {
    const met = x.slice();
    met.copyWithin(21, 0, 3);
    const gradient = new Float64Array(27);
    expect(Number.isFinite(addNonBonded(rows, met, gradient))).toBe(true);
    expect(gradient.every(Number.isFinite)).toBe(true);
  });
});
